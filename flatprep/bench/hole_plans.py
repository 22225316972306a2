"""The holes of a part that bench work opens up, and what to cut in their stead."""

from collections.abc import Iterator
from dataclasses import dataclass

from flatprep.bench.match import check_counts, targets
from flatprep.bench.ops import CLOSE_MM, Ask
from flatprep.bench.part import BenchPart
from flatprep.bench.plan import by_drawn, operations
from flatprep.job.values import Point
from flatprep.model.drawing import Contour
from flatprep.model.work import StepKind

_ALWAYS = ("tap", "thread_insert", "ream", "bore")
"""Work that opens a hole up whatever its drawn size."""


@dataclass(frozen=True, slots=True)
class HolePlan:
    """Holes of one drawn diameter and what to cut there; `cut_mm` None: nothing, mark the centre."""

    purpose: str
    drawn_mm: float
    cut_mm: float | None
    holes: tuple[tuple[Contour, Point], ...]


def hole_plans(bench: BenchPart) -> Iterator[HolePlan]:
    """Yield the holes that bench work opens up; a hole is named once, by the first work that does.

    Raises
    ------
    JobError
        When a size is not known, or (for a drawing of one part) work matches no hole.
    """
    found = tuple(targets(bench, work) for work in bench.work)
    if "#" not in bench.part.name:  # parts of one drawing share their words: only the checklist sees them all
        check_counts([(bench, found)])
    seen: set[int] = set()
    for work, places in zip(bench.work, found, strict=True):
        for ask in by_drawn(bench, work, places):
            plan = _plan(ask, seen)
            if plan is not None:
                seen |= {id(contour) for contour, _ in plan.holes}
                yield plan


def _plan(ask: Ask, seen: set[int]) -> HolePlan | None:
    holes = tuple((t.hole.contour, t.at) for t in ask.targets if t.hole and id(t.hole.contour) not in seen)
    if ask.drawn_mm is None or not holes:
        return None
    ops = [op for op in operations(ask) if op.tool_dia_mm is not None]
    if not ops or ops[-1].problem:
        return None
    final = ops[0].tool_dia_mm or 0.0
    sits = ops[-1].kind in (StepKind.COUNTERSINK, StepKind.COUNTERBORE) and len(ops) == 1
    if ask.work.kind not in _ALWAYS and (sits or ask.drawn_mm >= final - CLOSE_MM):
        return None
    return HolePlan(f"{ask.work.kind.replace('_', ' ')} {ask.work.size}", ask.drawn_mm, ops[-1].cut_dia_mm, holes)
