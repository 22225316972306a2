"""After a search: put what lies on a sheet on a cheaper one that has become large enough."""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import replace

from flatprep.nest.construct import Layer
from flatprep.nest.firstfit import Answer, answer_of, piece_orders
from flatprep.nest.objective import SheetUse, cost_of, is_open, price_per_area
from flatprep.nest.shapes import Place


def downsized(answer: Answer, margin_mm: float, stop: Callable[[], bool] = lambda: False) -> Iterator[Answer]:
    """Yield better answers in which a sheet is a cheaper one, the last sheet first; `stop` is asked before each try."""
    best = answer
    for number in range(len(answer.supply) - 1, -1, -1):
        for kind in cheaper_kinds(best, number):
            if stop():
                return
            made = _moved(best, number, kind, margin_mm)
            if made is not None and made.value < best.value:
                best = made
                yield best
                break


def may_downsize(answer: Answer) -> bool:
    """Tell whether a cheaper kind of sheet is at hand for any sheet of an answer."""
    return any(cheaper_kinds(answer, n) for n in range(len(answer.supply)))


def cheaper_kinds(answer: Answer, number: int) -> list[int]:
    """Kinds of stock, cheapest first, that cost less than a sheet of an answer and of which one is left."""
    group, now = answer.group, answer.supply[number]
    if group.kept[now] or is_open(group.stock[now]):
        return []
    rate = price_per_area(group.stock)
    cost = [cost_of(SheetUse(s, s.length_mm or 0.0), rate) for s in group.stock]
    fit = [
        k
        for k, stock in enumerate(group.stock)
        if cost[k] < cost[now] and not is_open(stock) and _has_one_left(answer.supply, k, stock.count)
    ]
    return sorted(fit, key=lambda k: cost[k])


def _has_one_left(supply: Sequence[int], kind: int, count: int | None) -> bool:
    return count is None or list(supply).count(kind) < count


def _moved(answer: Answer, number: int, kind: int, margin_mm: float) -> Answer | None:
    """Lay the pieces of one sheet anew on a sheet of another kind; None where they do not all fit."""
    group = answer.group
    mine = [p for p in answer.places if p.container == number]
    counts = [sum(p.shape == s for p in mine) for s in range(len(group.shapes))]
    shapes = [replace(s, count=n) for s, n in zip(group.shapes, counts, strict=True)]
    layer = Layer(shapes, [group.bins[kind]])
    for order in piece_orders(shapes, [n > 0 for n in counts]):
        laid = layer.lay(order, [0])
        if not any(laid.left_out):
            there: list[Place] = [replace(p, container=number) for p in laid.places]
            places = (*(p for p in answer.places if p.container != number), *there)
            supply = (*answer.supply[:number], kind, *answer.supply[number + 1 :])
            return answer_of(group, places, supply, margin_mm)
    return None
