"""too-large: parts that no turn brings onto the machine's bed."""

from collections.abc import Iterator

import shapely

from flatprep.geom import bulge
from flatprep.model.drawing import Part
from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Compare each part's least turned box with the bed."""
    if ctx.process is None or ctx.process.bed_mm is None:
        return
    short, long = sorted(ctx.process.bed_mm)
    for part in ctx.drawing.parts:
        if _fits(sorted(part.size_mm), short, long):
            continue
        width, length = _least_box(part)
        if _fits([width, length], short, long):
            continue
        side, limit = (length, long) if length > long else (width, short)
        x0, y0, x1, y1 = part.outer.bounds
        yield Finding(
            rule=RULE.id,
            severity=RULE.severity,
            message="the part does not fit on the machine's bed, however it is turned",
            part=part.name,
            at=((x0 + x1) / 2, (y0 + y1) / 2),
            measured=side,
            limit=limit,
            unit="mm",
        )


def _fits(sides: list[float], short: float, long: float) -> bool:
    return sides[0] <= short + 1e-6 and sides[1] <= long + 1e-6


def _least_box(part: Part) -> tuple[float, float]:
    """Short and long side of the least turned box, mm."""
    points = shapely.MultiPoint(bulge.points_along(part.outer.xyb, closed=True, chord_mm=0.01))
    corners = shapely.get_coordinates(shapely.oriented_envelope(points))
    sides = shapely.distance(shapely.points(corners[:2]), shapely.points(corners[1:3]))
    return float(sides.min()), float(sides.max())


RULE = Rule(
    id="too-large",
    severity=Severity.ERROR,
    summary="The part is larger than the machine's bed.",
    why="It cannot be cut in one piece on this machine.",
    remedy="Split the part and join it afterwards, or choose a process with a larger bed. Check the drawing's unit.",
    check=check,
)
