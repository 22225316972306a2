"""What a nest is asked: items, stock, spacing; what may be spent on it."""

from dataclasses import dataclass

from flatprep.geom.bulge import Floats
from flatprep.model.drawing import Part


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
    """

    part: Part
    material: str
    thickness_mm: float
    quantity: int
    quantity_opposite: int = 0
    turns_deg: tuple[float, ...] | None = None
    may_flip: bool = False
    grain: str | None = None

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


@dataclass(frozen=True, slots=True)
class NestAsk:
    """A whole nest: several materials and thicknesses nest apart in one run."""

    items: tuple[Item, ...]
    stock: tuple[StockSheet, ...]
    spacing_mm: float
    margin_mm: float
    windows: bool = True


@dataclass(frozen=True, slots=True)
class Budget:
    """What the search may spend: wall time, or steps that do not depend on the clock."""

    seconds: float = 30.0
    steps: int | None = None
    seed: int = 1
    jobs: int = 1
