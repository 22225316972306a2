"""inside-corner: corners of holes and notches that a round tool cannot reach."""

from collections.abc import Iterator

from flatprep.measure.corners import Corner
from flatprep.measure.holes import Hole, HoleShape
from flatprep.measure.part import MeasuredPart
from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule

LEAST_GAP_MM = 0.05
"""Where a tool leaves less than this, a joint still closes (common practice for wood and plastics)."""


def check(ctx: Context) -> Iterator[Finding]:
    """Compare the radius of inside corners with the tool's, or with the profile's own limit."""
    radius = tool_radius_mm(ctx)
    if radius <= 0.0:
        return
    for part in ctx.parts:
        for corner in part.inside_corners(radius, LEAST_GAP_MM):
            if corner.radius_mm < radius - ctx.slack_mm() and not _too_small_anyway(
                part.shapes[corner.contour], radius
            ):
                yield _told(part, corner, radius)


def tool_radius_mm(ctx: Context) -> float:
    """Least radius of an inside corner, mm: half the tool's diameter or the profile's own; 0 where there is none."""
    if ctx.process is None:
        return 0.0
    limit = ctx.limit("inside_corner")
    return max(ctx.process.tool_diameter_mm / 2.0, limit.error if limit else 0.0)


def _too_small_anyway(hole: Hole, radius: float) -> bool:
    """Whether the tool does not enter the hole at all, which small-hole and narrow-slot tell."""
    return hole.shape is not HoleShape.OTHER and hole.width_mm < 2.0 * radius - 1e-3


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
    remedy="Round the corner to the tool's radius; relieve it with a circle through it where a square mate seats.",
    check=check,
    limits=("inside_corner",),
)
