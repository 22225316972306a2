"""joint-fit: slots drawn for the sheet's nominal thickness, against the thickness that was measured."""

from collections.abc import Iterator

from flatprep.measure.facing import TooFineError
from flatprep.measure.holes import HoleShape
from flatprep.measure.part import MeasuredPart
from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule

FOR_THE_SHEET_MM = 0.25
"""A slot this near to the nominal thickness is drawn for the sheet (common practice)."""
RATTLES_MM = 0.3
"""With more clearance a joint rattles (common practice)."""
LONG = 2.0
"""Slots for tabs are so many times longer than wide at least."""

Slot = tuple[float, tuple[float, float], tuple[str, ...]]
"""Width mm, middle, handles."""


def check(ctx: Context) -> Iterator[Finding]:
    """Compare slots with the measured thickness; nothing is said where nobody measured."""
    nominal, measured = ctx.thickness_mm, ctx.measured_thickness_mm
    if not nominal or not measured:
        return
    for part in ctx.parts:
        for width, at, handles in slots_for(part, nominal):
            clearance = width - measured
            jams = clearance < -ctx.slack_mm()
            if jams or clearance > RATTLES_MM + ctx.slack_mm():
                yield Finding(
                    rule=RULE.id,
                    severity=RULE.severity,
                    message=f"the joint {'jams' if jams else 'rattles'}: the sheet measures {measured:.2f} mm",
                    part=part.name,
                    at=at,
                    measured=width,
                    limit=measured if jams else measured + RATTLES_MM,
                    unit="mm",
                    handles=handles,
                )


def slots_for(part: MeasuredPart, nominal_mm: float) -> Iterator[Slot]:
    """Slots and notches with parallel sides that are drawn for a sheet of the nominal thickness."""
    for hole in part.holes:
        near = abs(hole.width_mm - nominal_mm) <= FOR_THE_SHEET_MM
        if near and hole.shape is HoleShape.RECTANGLE and hole.length_mm >= LONG * hole.width_mm:
            yield hole.width_mm, hole.at, hole.handles
    try:
        gaps = part.slots(nominal_mm + FOR_THE_SHEET_MM)
    except TooFineError:
        return
    for gap in gaps:
        if abs(gap.width_mm - nominal_mm) <= FOR_THE_SHEET_MM and gap.extent_mm >= gap.width_mm:
            yield gap.width_mm, gap.at, part.handles(gap.rows)


RULE = Rule(
    id="joint-fit",
    severity=Severity.WARNING,
    summary="A slot drawn for the nominal thickness jams on, or rattles around, the sheet as measured.",
    why="Sheets are not what their name says, plywood by half a millimetre: a joint is drawn for what is there.",
    remedy="Draw the slot as wide as the sheet measures, plus 0.1 to 0.2 mm; cut one joint as a sample first.",
    check=check,
    limits=(),
)
