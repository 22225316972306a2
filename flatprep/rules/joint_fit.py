"""joint-fit: slots drawn for the sheet's nominal thickness, against the thickness that was measured."""

from collections.abc import Iterator, Sequence

from flatprep.measure.part import MeasuredPart
from flatprep.measure.slots import Slot, resized, sheet_slots
from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule

RATTLES_MM = 0.3
"""With more clearance a joint rattles (common practice)."""


def check(ctx: Context) -> Iterator[Finding]:
    """Compare slots with the measured thickness; nothing is said where nobody measured."""
    nominal, measured = ctx.thickness_mm, ctx.measured_thickness_mm
    if not nominal or not measured:
        return
    for part in ctx.parts:
        slots = sheet_slots(part, nominal)
        fitted = _fitted(ctx, part, slots, measured)
        for slot in slots:
            if slot in fitted:
                continue
            clearance = slot.width_mm - measured
            jams = clearance < -ctx.slack_mm()
            if jams or clearance > RATTLES_MM + ctx.slack_mm():
                yield Finding(
                    rule=RULE.id,
                    severity=RULE.severity,
                    message=f"the joint {'jams' if jams else 'rattles'}: the sheet measures {measured:.2f} mm",
                    part=part.name,
                    at=slot.at,
                    measured=slot.width_mm,
                    limit=measured if jams else measured + RATTLES_MM,
                    unit="mm",
                    handles=slot.handles,
                )


def _fitted(ctx: Context, part: MeasuredPart, slots: Sequence[Slot], measured_mm: float) -> tuple[Slot, ...]:
    """Slots that are cut with another width than they are drawn with, because the job asks for it."""
    clearance = ctx.job_part.slot_clearance_mm if ctx.job_part else None
    if clearance is None:
        return ()
    _, told = resized(part, slots, measured_mm + clearance)
    return tuple(one.slot for one in told if not one.why_not)


RULE = Rule(
    id="joint-fit",
    severity=Severity.WARNING,
    summary="A slot drawn for the nominal thickness jams on, or rattles around, the sheet as measured.",
    why="Sheets are not what their name says, plywood by half a millimetre: a joint is drawn for what is there.",
    remedy="Make it as wide as the sheet measures, plus 0.1 to 0.2 mm: repair --measured, or slots in the job.",
    check=check,
    limits=(),
)
