"""Which part may lie on which stock, at which turns; and why one may lie on none."""

from collections.abc import Sequence

from flatprep.nest.across import grain_deg, turns_across
from flatprep.nest.problem import Item, StockSheet

SAME_THICKNESS_MM = 1e-6
SAME_TURN_DEG = 1e-9


def matches(item: Item, stock: StockSheet) -> bool:
    """Tell whether stock is of the part's material and thickness."""
    return item.material == stock.material and abs(item.thickness_mm - stock.thickness_mm) <= SAME_THICKNESS_MM


def turns_on(item: Item, stock: StockSheet, *, mirrored: bool = False) -> tuple[float, ...] | None:
    """Return the turns a part may have on stock, degrees: None for any, empty where its grain forbids the stock.

    A part with a grain lies with it along the stock's: the direction of the drawing that `grain` names, turned, is
    x for stock with its grain along the length, y for grain along the width. Bends that must cross the grain do.
    """
    if item.must_cross and item.minds_grain and stock.grain is not None:
        return _across(item, stock, mirrored=mirrored)
    if item.grain is None:
        return item.turns_deg
    if stock.grain is None:
        return ()
    level = (item.grain == "x") == (stock.grain == "length")
    along = (0.0, 180.0) if level else (90.0, 270.0)
    if item.turns_deg is None:
        return along
    return tuple(t for t in item.turns_deg if any(same_turn(t, a) for a in along))


def turns_of(
    item: Item, states: Sequence[bool], stock: StockSheet, *, prefer: bool = False
) -> tuple[float, ...] | None:
    """Return the turns of a piece that may be in some states (mirrored or not): those allowed in every one of them.

    With `prefer` bends that had better cross the grain do, where some turn allows it.
    """
    every = [turns_on(item, stock, mirrored=state) for state in states]
    if prefer and item.minds_grain and stock.grain is not None:
        every = [_across(item, stock, mirrored=state) for state in states]
    first, *others = every
    if first is None or (common := tuple(t for t in first if all(o is None or t in o for o in others))):
        return None if first is None else common
    return turns_of(item, states, stock) if prefer else ()


def _across(item: Item, stock: StockSheet, *, mirrored: bool) -> tuple[float, ...]:
    grain = grain_deg(stock.grain or "length")
    return turns_across(item.bends_deg, item.turns_deg, grain, mirrored=mirrored)


def same_turn(a_deg: float, b_deg: float) -> bool:
    """Tell whether two turns are one, full circles apart or not."""
    return abs((a_deg - b_deg + 180.0) % 360.0 - 180.0) <= SAME_TURN_DEG


def hands(item: Item) -> tuple[tuple[int, tuple[bool, ...]], ...]:
    """Pieces of a part by what mirroring they may have: (count, states), those without pieces left out."""
    if item.flips:
        found: tuple[tuple[int, tuple[bool, ...]], ...] = ((item.quantity + item.quantity_opposite, (False, True)),)
    else:
        found = ((item.quantity, (False,)), (item.quantity_opposite, (True,)))
    return tuple((count, states) for count, states in found if count > 0)


def why_no_stock(item: Item, stock: Sequence[StockSheet]) -> str | None:
    """Reason why no stock at all may carry the part, whatever its size; None where some may."""
    if not any(s.material == item.material for s in stock):
        return f"no stock of {item.material}"
    same = [s for s in stock if matches(item, s)]
    if not same:
        have = sorted({s.thickness_mm for s in stock if s.material == item.material})
        listed = ", ".join(f"{t:g} mm" for t in have)
        return f"no stock of {item.material} in {item.thickness_mm:g} mm, only in {listed}"
    if all(s.count == 0 for s in same):
        return f"no sheet left of {', '.join(s.name for s in same)}"
    if any(turns_on(item, s) != () for s in same):
        return None
    if item.grain is None:
        return f"no turn that it may have lays its bends across the grain, along which {item.material} cracks"
    bare = [s.name for s in same if s.grain is None]
    if bare:
        return (
            f"its grain is to lie along the stock's, but {', '.join(bare)} states no grain: "
            'grain = "length" or "width" in the stock says it'
        )
    return "none of its allowed turns lays its grain along the stock's"
