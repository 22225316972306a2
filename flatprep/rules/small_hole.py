"""small-hole: holes too small to cut in that thickness."""

from collections.abc import Iterator

from flatprep.measure.facing import TooFineError
from flatprep.measure.holes import Hole, HoleShape, inscribed_diameter
from flatprep.measure.part import MeasuredPart
from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule, judge, reach_mm

_NAMES = {
    HoleShape.CIRCLE: "round",
    HoleShape.OBROUND: "obround",
    HoleShape.RECTANGLE: "rectangular",
    HoleShape.HEXAGON: "hexagonal",
    HoleShape.OTHER: "free-form",
}


def check(ctx: Context) -> Iterator[Finding]:
    """Compare the width of each hole that is no slot with the least hole."""
    limit = ctx.limit("hole")
    if limit is None:
        return
    for part in ctx.parts:
        slots = _narrow(ctx, part)
        for k, hole in enumerate(part.holes, start=1):
            if hole.is_long or k in slots:  # both answer to narrow-slot
                continue
            size = clear_mm(hole, reach_mm(limit))
            verdict = judge(size, limit, ctx.slack_mm(chords=hole.chords))
            if verdict is not None:
                yield Finding(
                    rule=RULE.id,
                    severity=verdict[0],
                    message=f"the {_NAMES[hole.shape]} hole is small",
                    part=part.name,
                    at=hole.at,
                    measured=size,
                    limit=verdict[1],
                    unit="mm",
                    handles=hole.handles,
                )


def _narrow(ctx: Context, part: MeasuredPart) -> frozenset[int]:
    """Which contours of a part are holes that are too narrow somewhere, and are told as such."""
    limit = ctx.limit("slot")
    if limit is None:
        return frozenset()
    try:
        found = part.slots(reach_mm(limit))
    except TooFineError:
        return frozenset()
    return frozenset(w.contours[0] for w in found if judge(w.width_mm, limit, ctx.slack_mm()) is not None)


def clear_mm(hole: Hole, needed_mm: float) -> float:
    """Diameter of the largest circle in a hole, mm; a lower bound where that is enough to be above `needed_mm`."""
    if hole.shape is not HoleShape.OTHER:
        return hole.width_mm
    # area <= perimeter x inradius for every region
    bound = 2.0 * hole.contour.area_mm2 / hole.contour.length_mm
    return bound if bound >= needed_mm else inscribed_diameter(hole.contour)


RULE = Rule(
    id="small-hole",
    severity=Severity.ERROR,
    summary="A hole is narrower than the process cuts cleanly in this thickness.",
    why="The pierce alone is about as wide, the slug has no room to drop, and the wall comes out tapered.",
    remedy="Enlarge the hole, or mark its centre only and drill it.",
    check=check,
    limits=("hole",),
)
