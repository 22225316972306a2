"""hole-near-bend: holes that a bend pulls out of shape."""

from collections.abc import Iterator

from flatprep.measure.bends import BendLine, bend_lines, rim_to_line, stops_at
from flatprep.measure.holes import Hole
from flatprep.model.finding import Finding, Severity
from flatprep.practice.bends import MOST_DEG, clear_of_bend_mm, tangent_mm
from flatprep.profile.process import Limit
from flatprep.rules.base import Context, Rule, judge

SOURCE = "sheet metal design guidelines: rim to the bend's tangent line 2 t + r at the least, 2.5 t + r to be safe"


def check(ctx: Context) -> Iterator[Finding]:
    """Compare the distance of each rim from the tangent line of each bend with thickness and radius."""
    if not ctx.thickness_mm:
        return
    asks = ctx.job_part.bends if ctx.job_part else ()
    for part in ctx.parts:
        for line in bend_lines(part.part, asks):
            for hole in part.holes:
                yield from _told(ctx, part.name, hole, line)


def _told(ctx: Context, part: str, hole: Hole, line: BendLine) -> Iterator[Finding]:
    thickness = ctx.thickness_mm or 0.0
    # nobody said the radius: one thickness is the usual air bend
    radius = line.radius_mm or thickness
    least, safe = (clear_of_bend_mm(key, thickness, radius) for key in ("hole_error", "hole_warn"))
    limit = Limit(least, safe, SOURCE)
    apart, place = rim_to_line(hole, line)
    if apart <= 0.0 and stops_at(hole, line):
        return
    clear = apart - tangent_mm(radius, thickness, min(line.angle_deg, MOST_DEG))
    verdict = judge(clear, limit, ctx.slack_mm(chords=hole.chords))
    if verdict is None:
        return
    assumed = "" if line.radius_mm else ", with an inside radius of one thickness assumed"
    relief = apart <= 0.0
    yield Finding(
        rule=RULE.id,
        # a hole across the line may well be a relief cut on purpose; a line nobody asked to be bent may be none
        severity=verdict[0] if line.said and not relief else Severity.WARNING,
        message=f"the hole {'lies across the bend line' if relief else 'is near the bend'}{assumed}",
        part=part,
        at=place,
        measured=clear,
        limit=verdict[1],
        unit="mm",
        handles=hole.handles,
    )


RULE = Rule(
    id="hole-near-bend",
    severity=Severity.ERROR,
    summary="A hole lies so near to a bend that the bend deforms it (rim to the bend's tangent line).",
    why="The sheet stretches in the bend and pulls the rim oval; a thread or a bearing seat is lost.",
    remedy="Move the hole away from the bend, drill it after bending, or cut a relief slot along the bend line.",
    check=check,
)
