"""unclear-hole: round nominal sizes that are neither thread nor clearance."""

from collections.abc import Iterator

from flatprep.job.values import Work
from flatprep.measure.holes import Hole
from flatprep.measure.part import MeasuredPart
from flatprep.model.finding import Finding, Severity
from flatprep.practice.asked import all_work
from flatprep.practice.meanings import is_unclear, nominal_of
from flatprep.practice.targets import targets_of
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Tell once per part and size of holes that nothing is said about."""
    for part in ctx.parts:
        said = {t.at for one in _work(ctx, part) for t in targets_of(part.holes, one)}
        bare: dict[str, list[Hole]] = {}
        for hole in part.holes:
            if hole.at not in said and is_unclear(hole):
                bare.setdefault(nominal_of(hole.width_mm, 0.01) or "", []).append(hole)
        for name, holes in bare.items():
            counted = "a hole has" if len(holes) == 1 else f"{len(holes)} holes have"
            message = f"{counted} the bare size of {name}: neither its tap drill nor its clearance hole"
            handles = tuple(h for hole in holes for h in hole.handles)
            yield Finding(
                RULE.id, Severity.NOTE, message, part.name, holes[0].at, holes[0].width_mm, None, "mm", handles=handles
            )


def _work(ctx: Context, part: MeasuredPart) -> tuple[Work, ...]:
    work = ctx.job_part.work if ctx.job_part else ()
    return all_work(part.holes, work, ctx.drawing.texts, ctx.drawing.units)


RULE = Rule(
    id="unclear-hole",
    severity=Severity.NOTE,
    summary="A round nominal size that is neither the tap drill nor a clearance hole of a usual screw.",
    why="A screw of that size will not pass a hole cut to its own diameter, and cannot be tapped into it.",
    remedy="Say what the hole is for in the job ([[part.work]]), or draw the tap drill or the clearance hole.",
    check=check,
)
