"""What a nest is asked: items, stock, spacing; what may be spent on it."""

from dataclasses import dataclass

from flatprep.geom.bulge import Floats
from flatprep.model.drawing import Part
from flatprep.model.layout import Placement


@dataclass(frozen=True, slots=True)
class Item:
    """A kind of part to lay.

    Attributes
    ----------
    part : Part
        Its true shape, drawing coordinates, mm.
    quantity, quantity_opposite : int
        Pieces as drawn, and pieces turned over (mirrored), all sets together.
    turns_deg : tuple of float or None
        Allowed turns, None for free.
    may_flip : bool
        Any piece may be mirrored to save material.
    grain : str or None
        ``x`` or ``y``: this direction of the drawing lies along the stock's grain.
    bends_deg : tuple of float
        Directions of bend lines in the drawing, 0 to 180, where the material minds how they lie to its grain.
    must_cross : bool
        They must not lie along the stock's grain; else they had better not.
    filler : bool
        Laid where room is left when all else lies; never costs a sheet, nor length of the last one.
    """

    part: Part
    material: str
    thickness_mm: float
    quantity: int
    quantity_opposite: int = 0
    turns_deg: tuple[float, ...] | None = None
    may_flip: bool = False
    grain: str | None = None
    filler: bool = False
    bends_deg: tuple[float, ...] = ()
    must_cross: bool = False

    @property
    def minds_grain(self) -> bool:
        """Whether its bends had better lie across the stock's grain; where its own grain is named, that goes before."""
        return bool(self.bends_deg) and self.grain is None

    @property
    def flips(self) -> bool:
        """Whether any piece may be mirrored; not where bends askew, which then lie otherwise, must cross the grain."""
        square = all(bend % 90.0 == 0.0 for bend in self.bends_deg)
        return self.may_flip and (square or not (self.must_cross and self.minds_grain))

    @property
    def name(self) -> str:
        """The part's name."""
        return self.part.name


@dataclass(frozen=True, slots=True, eq=False)
class StockSheet:
    """A kind of sheet.

    Attributes
    ----------
    outline : ndarray, shape (n, 2), or None
        Border of an irregular remnant, mm, flattened on the safe side; else a rectangle from (0, 0).
    holes : tuple of ndarray, shape (m, 2)
    length_mm : float or None
        Along x; None for open length.
    count : int or None
        None for any number.
    margins_mm : (float, float, float, float) or None
        Left, right, bottom, top, where they differ from the job's margin; for rectangles and open length.
    keep_out : tuple of tuple of float
        Boxes (x0, y0, x1, y1) and circles (x, y, radius) that nothing may lie in (clamps, screws), mm.
    """

    name: str
    material: str
    thickness_mm: float
    length_mm: float | None
    width_mm: float
    outline: Floats | None = None
    holes: tuple[Floats, ...] = ()
    count: int | None = 1
    price: float | None = None
    price_per_metre: float | None = None
    grain: str | None = None
    margins_mm: tuple[float, float, float, float] | None = None
    keep_out: tuple[tuple[float, ...], ...] = ()

    def margins(self, margin_mm: float) -> tuple[float, float, float, float]:
        """Return the margins in force (left, right, bottom, top) where the job's is `margin_mm`."""
        return self.margins_mm or (margin_mm, margin_mm, margin_mm, margin_mm)


@dataclass(frozen=True, slots=True)
class KeptSheet:
    """A sheet whose placements stay as they are: it is cut already, or was laid by hand.

    Attributes
    ----------
    stock : str
        The name of its stock; one sheet of it is taken.
    """

    stock: str
    placements: tuple[Placement, ...]


@dataclass(frozen=True, slots=True)
class NestAsk:
    """A whole nest: several materials and thicknesses nest apart in one run.

    Attributes
    ----------
    keep : tuple of KeptSheet
        Placements that stay; the rest of the quantities is nested around them.
    """

    items: tuple[Item, ...]
    stock: tuple[StockSheet, ...]
    spacing_mm: float
    margin_mm: float
    windows: bool = True
    keep: tuple[KeptSheet, ...] = ()


@dataclass(frozen=True, slots=True)
class Budget:
    """What the search may spend: wall time, or steps that do not depend on the clock."""

    seconds: float = 30.0
    steps: int | None = None
    seed: int = 1
    jobs: int = 1
