"""short-flange: legs too short for the tools of a press brake."""

from collections.abc import Iterator

from flatprep.measure.bends import BendLine, bend_lines, legs_mm
from flatprep.model.drawing import Part
from flatprep.model.finding import Finding, Severity
from flatprep.practice.bends import MOST_DEG, bend
from flatprep.profile.process import Limit
from flatprep.rules.base import Context, Rule, judge

SOURCE = "design rules for press brakes: outside leg at least 3 t + r; 4 t and 0.7 of the die's width to be safe"


def check(ctx: Context) -> Iterator[Finding]:
    """Compare each outside leg with the least that rests on the die."""
    if not ctx.thickness_mm:
        return
    asks = ctx.job_part.bends if ctx.job_part else ()
    for part in ctx.parts:
        lines = bend_lines(part.part, asks)
        for line, legs in zip(lines, legs_mm(part.part, lines), strict=True):
            if legs:
                yield from _told(ctx, part.part, line, min(legs))


def least_flange(thickness_mm: float, radius_mm: float) -> Limit:
    """Return the least outside leg of a bend, mm."""
    error = 3.0 * thickness_mm + radius_mm
    return Limit(error, max(error, 4.0 * thickness_mm, 0.7 * die_width_mm(thickness_mm)), SOURCE)


def die_width_mm(thickness_mm: float) -> float:
    """Return the usual opening of a V die, mm (common practice: 6, 8 and 10 times the thickness)."""
    return thickness_mm * (6.0 if thickness_mm <= 3.0 else 8.0 if thickness_mm <= 10.0 else 10.0)


def _told(ctx: Context, part: Part, line: BendLine, leg_mm: float) -> Iterator[Finding]:
    thickness = ctx.thickness_mm or 0.0
    radius = line.radius_mm or thickness
    # from the bend line in the flat to the edge, plus half of what the bend takes off both outside legs
    outside = leg_mm + bend(thickness, radius, min(line.angle_deg, MOST_DEG)).deduction_mm / 2.0
    verdict = judge(outside, least_flange(thickness, radius), ctx.slack_mm())
    if verdict is not None:
        yield Finding(
            rule=RULE.id,
            severity=verdict[0] if line.said else Severity.WARNING,
            message="the leg beside the bend is short" + ("" if line.radius_mm else ", its radius assumed"),
            part=part.name,
            at=line.middle,
            measured=outside,
            limit=verdict[1],
            unit="mm",
            handles=(line.handle,) if line.handle else (),
        )


RULE = Rule(
    id="short-flange",
    severity=Severity.ERROR,
    summary="A leg beside a bend is too short (outside length after bending).",
    why="It slips into the die instead of resting on both shoulders, and the bend comes out crooked.",
    remedy="Make the leg longer and trim it after bending, or use a narrower die; the press brake's manual says which.",
    check=check,
)
