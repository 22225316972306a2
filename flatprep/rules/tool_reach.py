"""tool-reach: places that a round tool does not enter, where no corner, slot or hole is told for it."""

from collections.abc import Iterator

import numpy as np

from flatprep.measure.corners import Corner
from flatprep.measure.part import MeasuredPart
from flatprep.measure.reach import Region, suspects, tight_turns, unreached_regions
from flatprep.model.finding import Finding, Severity
from flatprep.practice.tool import tool_radius_mm
from flatprep.rules import lost_in_kerf, narrow_slot, small_hole
from flatprep.rules.base import Context, Rule
from flatprep.rules.inside_corner import missed_corners
from flatprep.rules.narrow_slot import gaps_under

ALSO_TELL = (narrow_slot.check, small_hole.check, lost_in_kerf.check)
"""Checks whose findings say the same of a region that holds their place."""
NEAR_MM = 0.1


def check(ctx: Context) -> Iterator[Finding]:
    """Tell regions that nothing else is said of: curves drawn with chords, gaps that grow narrow, free forms."""
    radius = tool_radius_mm(ctx.process, ctx.family, ctx.thickness_mm) if ctx.process else 0.0
    if radius <= 0.0:
        return
    for part in ctx.parts:
        corners = missed_corners(ctx, part, radius)
        narrow = {gap.contours[0] for gap in gaps_under(ctx, part, 2.0 * radius)}
        asked = _worth_a_look(part, radius, corners, narrow)
        found = unreached_regions(part, radius, asked) if asked else ()
        if found:
            told = [c.at for c in corners] + _told_elsewhere(ctx, part)
            yield from (_told(part, one, radius) for one in found if not one.holds(told, NEAR_MM))


def _worth_a_look(part: MeasuredPart, radius: float, corners: tuple[Corner, ...], narrow: set[int]) -> tuple[int, ...]:
    """Contours that turn sharper than the tool elsewhere than in the corners told, or are narrow for it."""
    b = part.boundary
    left = tight_turns(b, radius)
    left[[row for corner in corners for row in corner.rows[:1] if corner.radius_mm == 0.0]] = False
    left[[row for corner in corners for row in corner.rows if corner.radius_mm > 0.0]] = False
    turning = {int(k) for k in np.unique(b.contour[left])}
    narrow |= {k for k, hole in enumerate(part.holes, start=1) if hole.width_mm < 2.0 * radius - 1e-3}
    return tuple(k for k in suspects(part, radius) if k in turning or k in narrow)


def _told_elsewhere(ctx: Context, part: MeasuredPart) -> list[tuple[float, float]]:
    return [f.at for tell in ALSO_TELL for f in tell(ctx) if f.part == part.name and f.at is not None]


def _told(part: MeasuredPart, region: Region, radius: float) -> Finding:
    deep = f", {region.depth_mm:.2f} mm deep" if np.isfinite(region.depth_mm) else ""
    hole = part.shapes[region.contour]
    return Finding(
        rule=RULE.id,
        severity=RULE.severity,
        message=f"a tool of {2.0 * radius:.4g} mm leaves material here{deep}",
        part=part.name,
        at=region.at,
        measured=region.area_mm2,
        unit="mm²",
        handles=hole.handles if region.contour else (),
    )


RULE = Rule(
    id="tool-reach",
    severity=Severity.WARNING,
    summary="A round tool does not enter the void everywhere.",
    why="What it does not enter stays material: curves come out rounder than drawn, and narrow places closed.",
    remedy="Round the curve to the tool's radius, widen the place, or take a thinner cutter; finish the rest by hand.",
    check=check,
)
