"""lost-in-kerf: holes that vanish or fall apart when the cut is offset by half its width."""

from collections.abc import Iterator

import shapely

from flatprep.geom.polygons import polygon, valid_polygon
from flatprep.measure.holes import Hole, HoleShape
from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule

MOST_POINTS = 20_000
"""A contour of more points is not offset: it would run for minutes."""
CHORD_MM = 0.005
CRUMB = 0.02
"""Left-overs smaller than this share of the hole are rounding, not pieces."""


def check(ctx: Context) -> Iterator[Finding]:
    """Offset every hole inwards by half the kerf, where no limit for holes and slots is stricter than that."""
    if ctx.process is None:
        return
    kerf = ctx.process.kerf_at(ctx.family, ctx.thickness_mm)
    told_by = [ctx.limit("hole"), ctx.limit("slot")]
    if kerf <= 0.0 or all(limit is not None and limit.error >= kerf for limit in told_by):
        return
    for part in ctx.parts:
        for hole in part.holes:
            pieces = pieces_left(hole, kerf, ctx.slack_mm(chords=hole.chords))
            if pieces != 1:
                yield _told(part.name, hole, pieces, kerf)


def pieces_left(hole: Hole, kerf_mm: float, slack_mm: float) -> int:
    """Return the number of pieces a hole's outline falls into when it is offset inwards by half the kerf."""
    if hole.shape is not HoleShape.OTHER:
        return int(hole.width_mm >= kerf_mm - slack_mm)
    shape = valid_polygon(polygon(hole.contour.xyb, (), chord_mm=CHORD_MM))
    if shapely.get_num_coordinates(shape) > MOST_POINTS:
        return 1
    left = shape.buffer(-(kerf_mm - slack_mm) / 2.0, join_style="mitre")
    return sum(1 for g in getattr(left, "geoms", [left]) if g.area > CRUMB * shape.area)


def _told(part: str, hole: Hole, pieces: int, kerf_mm: float) -> Finding:
    gone = pieces == 0
    return Finding(
        rule=RULE.id,
        severity=RULE.severity,
        message=f"the hole {'vanishes' if gone else f'falls into {pieces} pieces'} when offset by half the kerf",
        part=part,
        at=hole.at,
        measured=hole.width_mm if gone else None,
        limit=kerf_mm if gone else None,
        unit="mm" if gone else None,
        handles=hole.handles,
    )


RULE = Rule(
    id="lost-in-kerf",
    severity=Severity.ERROR,
    summary="A hole's outline vanishes or splits when it is offset by half the kerf.",
    why="The cut is as wide as the hole: the machine's control refuses the outline, or cuts it away.",
    remedy="Widen the hole, or draw it as one open line that is cut once.",
    check=check,
)
