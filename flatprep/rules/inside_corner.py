"""inside-corner: corners of holes and notches that a round tool cannot reach."""

from collections.abc import Iterator

from flatprep.measure.corners import Corner
from flatprep.measure.part import MeasuredPart
from flatprep.model.finding import Finding, Severity
from flatprep.practice.tool import tool_radius_mm
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Compare the radius of inside corners with the tool's, or with the profile's own limit."""
    radius = tool_radius_mm(ctx.process, ctx.family, ctx.thickness_mm) if ctx.process else 0.0
    if radius <= 0.0:
        return
    for part in ctx.parts:
        for corner in part.unreached_corners(radius, ctx.slack_mm()):
            yield _told(part, corner, radius)


def _told(part: MeasuredPart, corner: Corner, radius: float) -> Finding:
    return Finding(
        rule=RULE.id,
        severity=RULE.severity,
        message=f"the tool leaves {corner.gap_mm:.2f} mm of material in this corner",
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
