"""What the search lays and where: outlines that may touch, containers that hold them, places that result."""

from dataclasses import dataclass

from flatprep.geom.bulge import Floats


@dataclass(frozen=True, slots=True, eq=False)
class Shape:
    """A kind of piece, already grown by half the spacing: two of them may touch but not overlap.

    Attributes
    ----------
    outer : ndarray, shape (n, 2)
        Simple ring, counter-clockwise, mm, about the part's drawing origin: a place turns about that origin.
    holes : tuple of ndarray, shape (m, 2)
        Windows other pieces may lie in, clockwise or not; empty where windows are not used.
    turns_deg : tuple of float or None
        Allowed turns, degrees anticlockwise; None for any.
    mirror : tuple of bool
        Allowed states: (False,), (True,) or (False, True).
    count : int
        Pieces of this kind.
    """

    outer: Floats
    holes: tuple[Floats, ...] = ()
    turns_deg: tuple[float, ...] | None = (0.0,)
    mirror: tuple[bool, ...] = (False,)
    count: int = 1


@dataclass(frozen=True, slots=True, eq=False)
class Container:
    """A sheet or remnant, already shrunk by margin less half the spacing.

    Attributes
    ----------
    outer : ndarray, shape (n, 2)
        Simple ring, mm; an axis-parallel rectangle or an irregular remnant.
    holes : tuple of ndarray, shape (m, 2)
        Regions that pieces must keep out of.
    """

    outer: Floats
    holes: tuple[Floats, ...] = ()


@dataclass(frozen=True, slots=True)
class Place:
    """One piece laid: mirrored (x -> -x) if asked, turned anticlockwise about its origin, moved by (x, y) mm.

    `shape` and `container` are indices into what the search was given. The strip is container 0, from x = 0, y = 0.
    """

    shape: int
    container: int
    turn_deg: float
    mirrored: bool
    x: float
    y: float


@dataclass(frozen=True, slots=True)
class Best:
    """The best layout found, free of overlap.

    Attributes
    ----------
    places : tuple of Place
        One for each piece, in order of shapes.
    containers : int
        How many containers are used: the first ones of those given. 1 for a strip.
    length_mm : float
        Reach of the pieces along x in the last used container, from its least x.
    """

    places: tuple[Place, ...]
    containers: int
    length_mm: float

    def better_than(self, other: "Best") -> bool:
        """Tell whether fewer containers are used, or as many with the last one shorter."""
        return (self.containers, self.length_mm) < (other.containers, other.length_mm)
