"""A first layout that does not verify: laid again with more room, else without the pieces that are at fault.

That should never happen; where it does (an outline that rounding spoils, a turn at the edge of what is allowed), the
job still gets a sound layout, and pieces that found no sound place are listed with what was wrong.
"""

from collections import Counter
from collections.abc import Callable, Mapping, Sequence
from dataclasses import replace

from flatprep.base.errors import FlatprepError
from flatprep.nest.firstfit import Answer, answer_of
from flatprep.nest.problem import NestAsk, StockSheet
from flatprep.nest.verify import LayoutFault

SAFETIES_MM = (0.02, 0.2, 1.0)
"""What is added to spacing and margins, one try after the other."""

Faults = Callable[[Answer], Sequence[LayoutFault]]
"""What is wrong with an answer."""


class UnsoundError(FlatprepError):
    """A layout that is not sound in the end: it is never written."""


def with_more_room(ask: NestAsk, by_mm: float) -> NestAsk:
    """Return what is asked with so much more spacing and margin."""
    stock = tuple(_with_margins(s, by_mm) for s in ask.stock)
    return replace(ask, spacing_mm=ask.spacing_mm + by_mm, margin_mm=ask.margin_mm + by_mm, stock=stock)


def _with_margins(stock: StockSheet, by_mm: float) -> StockSheet:
    if stock.margins_mm is None:
        return stock
    left, right, bottom, top = (margin + by_mm for margin in stock.margins_mm)
    return replace(stock, margins_mm=(left, right, bottom, top))


def sound_answer(answer: Answer, faults: Faults, again: Callable[[float], Answer], margin_mm: float) -> Answer:
    """Return the answer where it verifies, else the best sound one that can be had.

    Parameters
    ----------
    again
        Lays the group anew with so much more room, mm.
    margin_mm
        The job's.
    """
    if not faults(answer):
        return answer
    found = [without_faults(answer, faults, margin_mm)]
    for more in SAFETIES_MM:
        if not found[-1].unplaced:
            break
        found.append(without_faults(again(more), faults, margin_mm))
    return min(found, key=lambda one: one.value)


def without_faults(answer: Answer, faults: Faults, margin_mm: float) -> Answer:
    """Return an answer without its pieces that are at fault; without any where a fault is of no piece."""
    why: dict[str, str] = {}
    while answer.places and (found := faults(answer)):
        bad = _places_of(answer, found)
        told = bad or dict.fromkeys(range(len(answer.places)), found[0].message)
        lying = answer.group.spots(answer.places)
        for index, message in told.items():
            why.setdefault(lying[index].item.name, message)
        kept = [p for index, p in enumerate(answer.places) if index not in told]
        answer = answer_of(answer.group, kept, answer.supply, margin_mm)
    unplaced = (replace(u, why=f"found no sound place: {why[u.part]}") if u.part in why else u for u in answer.unplaced)
    return replace(answer, unplaced=tuple(unplaced))


def _places_of(answer: Answer, faults: Sequence[LayoutFault]) -> Mapping[int, str]:
    """Return the places of pieces at fault (of a pair, the one laid later) with the message; kept ones stay."""
    index = _by_name(answer)
    found: dict[int, str] = {}
    for fault in faults:
        mine = [index[fault.sheet, part] for part in fault.parts if (fault.sheet, part) in index]
        if mine and not found.keys() & set(mine):
            found[max(mine)] = fault.message
    return found


def _by_name(answer: Answer) -> Mapping[tuple[int | None, str], int]:
    """Index into the places by sheet (from 1) and the name that a layout gives the piece, copies counted."""
    copies: Counter[str] = Counter()
    found: dict[tuple[int | None, str], int] = {}
    for number, sheet in enumerate(answer.sheets):
        kept = len(answer.group.kept[answer.supply[number]])
        mine = [index for index, p in enumerate(answer.places) if p.container == number]
        for k, spot in enumerate(sheet.spots):
            copies[spot.item.name] += 1
            if kept <= k < kept + len(mine):
                found[number + 1, f"{spot.item.name} {copies[spot.item.name]}"] = mine[k - kept]
    return found
