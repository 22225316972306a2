"""Which sheets are taken, and in which order: a few sequences worth trying."""

from collections.abc import Sequence

from flatprep.nest.objective import SheetUse, area_mm2, cost_of, is_open, price_per_area
from flatprep.nest.problem import StockSheet


def sequences(kinds: Sequence[StockSheet], pieces: int) -> list[tuple[int, ...]]:
    """Orders in which sheets may be taken, without repeats.

    Remnants before full sheets, the cheapest area first; among equals the larger sheet first, then the smaller
    first; then, for each kind of full sheet, that kind before all others.

    Parameters
    ----------
    kinds
        Stock of one material and thickness.
    pieces
        No more sheets of a kind than this are ever needed.
    """
    rate = price_per_area(kinds)

    def per_area(k: int) -> float:
        stock = kinds[k]
        area = area_mm2(stock) if not is_open(stock) else stock.width_mm * 1000.0
        return round(cost_of(SheetUse(stock, 1000.0), rate) / area, 15)

    def size(k: int) -> float:
        return area_mm2(kinds[k])

    every = range(len(kinds))
    orders = [
        sorted(every, key=lambda k: (kinds[k].outline is None, per_area(k), is_open(kinds[k]), -size(k))),
        sorted(every, key=lambda k: (kinds[k].outline is None, per_area(k), is_open(kinds[k]), size(k))),
    ]
    orders += [[k, *(o for o in orders[0] if o != k)] for k in every]
    found = [tuple(n for k in order for n in [k] * _most(kinds[k], pieces)) for order in orders]
    return list(dict.fromkeys(found))


def cheaper(taken: Sequence[int], kinds: Sequence[StockSheet]) -> list[tuple[int, ...]]:
    """Sequences with one sheet fewer, or one sheet put in the place of a dearer one; the cheapest first."""
    rate = price_per_area(kinds)
    cost = [cost_of(SheetUse(k, k.length_mm or 0.0), rate) for k in kinds]
    found = []
    for n in range(len(taken) - 1, -1, -1):
        rest = (*taken[:n], *taken[n + 1 :])
        found.append((cost[taken[n]], rest))
        for k, stock in enumerate(kinds):
            count = stock.count
            if cost[k] < cost[taken[n]] and not is_open(stock) and (count is None or rest.count(k) < count):
                found.append((cost[taken[n]] - cost[k], (*taken[:n], k, *taken[n + 1 :])))
    ranked = sorted(found, key=lambda pair: -pair[0])
    return list(dict.fromkeys(sequence for _, sequence in ranked if sequence))


def _most(stock: StockSheet, pieces: int) -> int:
    if is_open(stock):
        return 1
    return pieces if stock.count is None else min(stock.count, pieces)
