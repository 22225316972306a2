"""What a better nest is, stated in one place.

First, no piece is left out that could be laid. Then the stock taken costs least: the price of each sheet; of open
length, the length used. Then fewer full sheets are begun. Then the last one is used up to the least length, so that
the rest of it is one useful piece. Then fewer remnants are taken.

Full sheets without a price are reckoned by their area at the mean price per area of the priced stock of the same
group, or by their area alone where none has a price. An irregular remnant without a price costs nothing: it lies
there anyway, and is filled first. The figures only rank nests: no made-up price leaves this module.
"""

from collections.abc import Sequence
from dataclasses import dataclass

from shapely.geometry import Polygon

from flatprep.nest.problem import StockSheet

SAME_COST = 1e-9


@dataclass(frozen=True, slots=True, order=True)
class Value:
    """How good a nest of one material and thickness is: the smaller, the better, in the order of the fields.

    Attributes
    ----------
    left_out : int
        Pieces without a place.
    cost : float
        Of the stock taken; the job's currency, or m² where nothing has a price.
    sheets : int
        Full sheets.
    length_mm : float
        Used length of the last full sheet, else of the last remnant.
    remnants : int
    """

    left_out: int
    cost: float
    sheets: int
    length_mm: float
    remnants: int


@dataclass(frozen=True, slots=True)
class SheetUse:
    """A sheet that is used, and how far along x; `length_mm` counts both margins."""

    stock: StockSheet
    length_mm: float


def value(uses: Sequence[SheetUse], left_out: int, kinds: Sequence[StockSheet]) -> Value:
    """Value of a nest on these sheets, in the order in which they are taken; `kinds` is the stock of the group."""
    rate = price_per_area(kinds)
    cost = sum(cost_of(use, rate) for use in uses)
    full = [use for use in uses if use.stock.outline is None]
    last = (full or list(uses))[-1].length_mm if uses else 0.0
    return Value(left_out, round(cost / SAME_COST) * SAME_COST, len(full), last, len(uses) - len(full))


def cost_of(use: SheetUse, rate: float) -> float:
    """Cost of one sheet as used; `rate` per mm² stands in for a missing price."""
    stock = use.stock
    if is_open(stock):
        per_metre = stock.price_per_metre if stock.price_per_metre is not None else rate * stock.width_mm * 1000.0
        return per_metre * use.length_mm / 1000.0
    if stock.price is not None:
        return stock.price
    return 0.0 if stock.outline is not None else rate * area_mm2(stock)


def price_per_area(kinds: Sequence[StockSheet]) -> float:
    """Mean price per mm² of the stock that has one; 1e-6 (m²) where none has."""
    known = [rate for rate in map(_own_rate, kinds) if rate is not None and rate > 0.0]
    return sum(known) / len(known) if known else 1e-6


def _own_rate(stock: StockSheet) -> float | None:
    if is_open(stock):
        return None if stock.price_per_metre is None else stock.price_per_metre / (1000.0 * stock.width_mm)
    return None if stock.price is None else stock.price / area_mm2(stock)


def is_open(stock: StockSheet) -> bool:
    """Tell whether as much of the stock is taken as is needed."""
    return stock.outline is None and stock.length_mm is None


def area_mm2(stock: StockSheet) -> float:
    """Area of one sheet, its holes taken off; 0 for open length."""
    if stock.outline is not None:
        return float(Polygon(stock.outline).area) - sum(float(Polygon(h).area) for h in stock.holes)
    return (stock.length_mm or 0.0) * stock.width_mm
