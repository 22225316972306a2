"""The checklist as one JSON document."""

from flatprep.model.work import Checklist, JointReport, PartSteps, Step


def checklist_document(checklist: Checklist) -> dict[str, object]:
    """Return the document of ``checklist --format json``: lengths in mm, unrounded."""
    return {
        "schema": "flatprep-checklist/1",
        "parts": [_part(part) for part in checklist.parts],
        "cautions": list(checklist.cautions),
        "tools": [{"tool": t.name, "uses": t.uses, "parts": list(t.parts)} for t in checklist.tools],
        "joints": [_joint(joint) for joint in checklist.joints],
    }


def _joint(joint: JointReport) -> dict[str, object]:
    return {
        "name": joint.name, "fastener": joint.fastener, "count": joint.count, "closes": joint.closes,
        "grip_mm": joint.grip_mm, "buy": joint.buy or None,
        "checks": [{"what": c.what, "outcome": str(c.outcome), "text": c.text} for c in joint.checks],
    }  # fmt: skip


def _part(part: PartSteps) -> dict[str, object]:
    return {
        "name": part.name, "quantity": part.quantity, "quantity_opposite": part.quantity_opposite,
        "steps": [_step(step) for step in part.steps], "questions": list(part.questions), "flip": part.flip or None,
    }  # fmt: skip


def _step(step: Step) -> dict[str, object]:
    return {
        "order": step.order, "kind": str(step.kind), "size": step.size, "tool_dia_mm": step.tool_dia_mm,
        "depth_mm": step.depth_mm, "count": step.count, "at": [list(point) for point in step.at],
        "cut_dia_mm": step.cut_dia_mm, "side": step.side, "note": step.note, "caution": step.caution,
        "tool": step.tool, "why": step.why, "limits_mm": list(step.limits_mm) if step.limits_mm else None,
        "problem": step.problem or None,
    }  # fmt: skip
