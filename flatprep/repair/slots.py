"""Slots of a drawing made to fit the sheet as it measures, told as changes; those that cannot be are left and told."""

from collections.abc import Container

from flatprep.measure.part import MeasuredPart
from flatprep.measure.slots import Resized, SlotAsk, resized, sheet_slots
from flatprep.model.drawing import Part
from flatprep.model.finding import Finding, Severity
from flatprep.repair.values import Change

_REMEDY = "draw this slot anew, with straight edges across its ends"


def resize_part(part: Part, ask: SlotAsk, fixed: Container[int]) -> tuple[Part, list[Change], list[Finding]]:
    """Resize the slots of a part, but for those of the contours `fixed`, which are not written as they are seen."""
    measured = MeasuredPart(part)
    slots = [slot for slot in sheet_slots(measured, ask.nominal_mm) if slot.contour not in fixed]
    after, told = resized(measured, slots, ask.width_mm)
    changes = [slot_change(one) for one in told if not one.why_not]
    return after, changes, [_refused(part.name, one) for one in told if one.why_not]


def slot_change(one: Resized) -> Change:
    """Tell a slot that got another width."""
    message = f"slot of {one.slot.width_mm:.3f} mm made {one.width_mm:.3f} mm wide"
    return Change("slot", message, one.slot.at, handles=one.slot.handles)


def _refused(part: str, one: Resized) -> Finding:
    message = f"this slot keeps its width: {one.why_not}"
    slot = one.slot
    return Finding(
        "joint-fit", Severity.WARNING, message, part, slot.at, slot.width_mm, one.width_mm, "mm", _REMEDY, slot.handles
    )
