"""Where the parts lie on the stock."""

from dataclasses import dataclass

from flatprep.geom.bulge import Floats, Similarity


@dataclass(frozen=True, slots=True)
class Placement:
    """One piece on a sheet: mirrored (x -> -x) if asked, turned anticlockwise about the drawing's origin, moved.

    `first` marks a first article: cut before the others, and measured before the rest is cut.
    """

    part: str
    copy: int
    turn_deg: float
    mirrored: bool
    dx: float
    dy: float
    first: bool = False

    @property
    def motion(self) -> Similarity:
        """The map from the part's drawing (mm) to the sheet (mm)."""
        return Similarity(turn_deg=self.turn_deg, dx=self.dx, dy=self.dy, mirrored=self.mirrored)


@dataclass(frozen=True, slots=True, eq=False)
class SheetLayout:
    """One sheet and what lies on it.

    Attributes
    ----------
    outline : ndarray, shape (n, 2)
        Border, mm, flattened on the safe side; for open stock the used rectangle.
    holes : tuple of ndarray, shape (m, 2)
        Holes of a remnant.
    used_length_mm : float
        Along x; both margins included.
    utilisation : float
        Net part area over the sheet's area.
    """

    stock: str
    material: str
    thickness_mm: float
    outline: Floats
    holes: tuple[Floats, ...]
    used_length_mm: float
    utilisation: float
    placements: tuple[Placement, ...]


@dataclass(frozen=True, slots=True)
class Unplaced:
    """Pieces that found no place, and why."""

    part: str
    count: int
    why: str


@dataclass(frozen=True, slots=True)
class Layout:
    """The whole nest."""

    spacing_mm: float
    margin_mm: float
    sheets: tuple[SheetLayout, ...]
    unplaced: tuple[Unplaced, ...] = ()
