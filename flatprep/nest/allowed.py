"""Which part may lie on which stock, at which turns; and why one may lie on none."""

from collections.abc import Sequence

from flatprep.nest.problem import Item, StockSheet

SAME_THICKNESS_MM = 1e-6
SAME_TURN_DEG = 1e-9


def matches(item: Item, stock: StockSheet) -> bool:
    """Tell whether stock is of the part's material and thickness."""
    return item.material == stock.material and abs(item.thickness_mm - stock.thickness_mm) <= SAME_THICKNESS_MM


def turns_on(item: Item, stock: StockSheet) -> tuple[float, ...] | None:
    """Return the turns a part may have on stock, degrees: None for any, empty where its grain forbids the stock.

    A part with a grain lies with it along the stock's: the direction of the drawing that `grain` names, turned, is
    x for stock with its grain along the length, y for grain along the width.
    """
    if item.grain is None:
        return item.turns_deg
    if stock.grain is None:
        return ()
    level = (item.grain == "x") == (stock.grain == "length")
    along = (0.0, 180.0) if level else (90.0, 270.0)
    if item.turns_deg is None:
        return along
    return tuple(t for t in item.turns_deg if any(same_turn(t, a) for a in along))


def same_turn(a_deg: float, b_deg: float) -> bool:
    """Tell whether two turns are one, full circles apart or not."""
    return abs((a_deg - b_deg + 180.0) % 360.0 - 180.0) <= SAME_TURN_DEG


def hands(item: Item) -> tuple[tuple[int, tuple[bool, ...]], ...]:
    """Pieces of a part by what mirroring they may have: (count, states), those without pieces left out."""
    if item.may_flip:
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
    bare = [s.name for s in same if s.grain is None]
    if bare:
        return f"its grain is to lie along the stock's, but {', '.join(bare)} states no grain"
    return "none of its allowed turns lays its grain along the stock's"
