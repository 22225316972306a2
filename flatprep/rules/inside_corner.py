"""inside-corner: corners of holes and notches that a round tool cannot reach."""

from collections.abc import Iterator, Sequence
from math import dist

from flatprep.job.corners import Corners, Point
from flatprep.measure.corners import Corner
from flatprep.measure.part import MeasuredPart
from flatprep.measure.relieved import ReliefAsk, among, relieved
from flatprep.measure.widths import Width
from flatprep.model.finding import Finding, Severity
from flatprep.practice.tool import least_web_mm, tool_radius_mm
from flatprep.rules.base import Context, Rule
from flatprep.rules.narrow_slot import gaps_under


def check(ctx: Context) -> Iterator[Finding]:
    """Compare the radius of inside corners with the tool's, or with the profile's own limit."""
    radius = tool_radius_mm(ctx.process, ctx.family, ctx.thickness_mm) if ctx.process else 0.0
    if radius <= 0.0:
        return
    which = (ctx.job_part.corners if ctx.job_part else None) or Corners.ALL
    for part in ctx.parts:
        missed = among(missed_corners(ctx, part, radius), which)
        opened = _opened(ctx, part, missed, radius) if missed else {}
        for corner in missed:
            why = opened.get(corner.at)
            if why != "":
                yield _told(part, corner, radius, why)


def missed_corners(ctx: Context, part: MeasuredPart, radius: float) -> tuple[Corner, ...]:
    """Corners that the tool misses in places that it does enter: of others narrow-slot and tool-reach tell."""
    found = part.unreached_corners(radius, ctx.slack_mm())
    if not found:
        return ()
    gaps = gaps_under(ctx, part, 2.0 * radius)
    return tuple(corner for corner in found if not any(_ends(gap, corner) for gap in gaps))


def _ends(gap: Width, corner: Corner) -> bool:
    """Tell whether a corner is one of a gap's own."""
    near = dist(gap.at, corner.at) <= gap.extent_mm / 2.0 + gap.width_mm
    return near and not set(gap.rows).isdisjoint(corner.rows)


def _opened(ctx: Context, part: MeasuredPart, missed: Sequence[Corner], radius: float) -> dict[Point, str]:
    """Corners that the job has relieved, by their places; with the reason where that cannot be."""
    job = ctx.job_part
    if job is None or job.relief is None or ctx.process is None:
        return {}
    web = least_web_mm(ctx.process, ctx.family, ctx.thickness_mm)
    ask = ReliefAsk(job.relief, radius, web, job.corners or Corners.SQUARE)
    _, told = relieved(part, ask, among(missed, ask.corners))
    return {one.corner.at: one.why_not for one in told}


def _told(part: MeasuredPart, corner: Corner, radius: float, why: str | None) -> Finding:
    no_relief = f", and no relief is cut: {why}" if why else ""
    return Finding(
        rule=RULE.id,
        severity=RULE.severity,
        message=f"the tool leaves {corner.gap_mm:.2f} mm of material in this corner{no_relief}",
        part=part.name,
        at=corner.at,
        measured=corner.radius_mm,
        limit=radius,
        unit="mm",
        handles=part.handles(corner.rows),
    )


RULE = Rule(
    id="inside-corner",
    severity=Severity.WARNING,
    summary="An inside corner is sharper than the tool is round.",
    why="A round tool leaves material in it, 0.41 of its radius at a right angle, and a square mate does not seat.",
    remedy="Round the corner to the tool's radius; where a square mate seats, repair --relief dogbone opens it.",
    check=check,
    limits=("inside_corner",),
)
