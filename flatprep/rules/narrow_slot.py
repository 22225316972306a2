"""narrow-slot: slots, notches and long holes too narrow to cut."""

from collections.abc import Iterator
from math import dist

from flatprep.measure.bends import bend_lines
from flatprep.measure.facing import TooFineError
from flatprep.measure.holes import HoleShape
from flatprep.measure.part import MeasuredPart
from flatprep.measure.widths import Width
from flatprep.model.finding import Finding, Severity
from flatprep.profile.process import Limit
from flatprep.rules.base import Context, Rule, judge, reach_mm


def check(ctx: Context) -> Iterator[Finding]:
    """Compare long holes of a known shape, and gaps of all others, with the least slot."""
    limit = ctx.limit("slot")
    if limit is None:
        return
    for part in ctx.parts:
        yield from _long_holes(ctx, part, limit)
        yield from _gaps(ctx, part, limit)


def gaps_under(ctx: Context, part: MeasuredPart, tool_mm: float) -> tuple[Width, ...]:
    """Gaps of a part that a tool of that diameter does not enter; none where they cannot be measured."""
    try:
        found = part.slots(max(reach_mm(ctx.limit("slot")), tool_mm))
    except TooFineError:
        return ()
    return tuple(gap for gap in found if gap.width_mm < tool_mm - ctx.slack_mm())


def _long_holes(ctx: Context, part: MeasuredPart, limit: Limit) -> Iterator[Finding]:
    for hole in part.holes:
        if not hole.is_long or hole.shape is HoleShape.OTHER:
            continue
        verdict = judge(hole.width_mm, limit, ctx.slack_mm(chords=hole.chords))
        if verdict is not None:
            yield Finding(
                rule=RULE.id,
                severity=verdict[0],
                message=f"the {'obround' if hole.shape is HoleShape.OBROUND else 'rectangular'} slot is narrow",
                part=part.name,
                at=hole.at,
                measured=hole.width_mm,
                limit=verdict[1],
                unit="mm",
                handles=hole.handles,
            )


def _gaps(ctx: Context, part: MeasuredPart, limit: Limit) -> Iterator[Finding]:
    try:
        found = part.slots(reach_mm(limit))
    except TooFineError:  # told by not-measured
        return
    for width in found:
        verdict = judge(width.width_mm, limit, ctx.slack_mm())
        if verdict is not None and not (verdict[0] is Severity.WARNING and _relieves_a_bend(ctx, part, width)):
            yield Finding(
                rule=RULE.id,
                severity=verdict[0],
                message="the gap is narrow" if width.contours == (0, 0) else "the hole is narrow here",
                part=part.name,
                at=width.at,
                measured=width.width_mm,
                limit=verdict[1],
                unit="mm",
                handles=part.handles(width.rows),
            )


def _relieves_a_bend(ctx: Context, part: MeasuredPart, gap: Width) -> bool:
    """Tell whether a bend ends at a gap in the edge: a relief is as narrow as can be cut, and holds nothing."""
    if gap.contours != (0, 0):
        return False
    lines = bend_lines(part.part, ctx.job_part.bends if ctx.job_part else ())
    near = gap.extent_mm / 2.0 + gap.width_mm
    return any(dist(gap.at, end) <= near for line in lines for end in (line.start, line.end))


RULE = Rule(
    id="narrow-slot",
    severity=Severity.ERROR,
    summary="A slot or gap is too narrow.",
    why="The cut needs its kerf, and its slug room to drop; a router's tool does not enter.",
    remedy="Widen the slot, or draw it as one open line that is cut once.",
    check=check,
    limits=("slot",),
)
