"""Repair as one JSON document, ``flatprep-repair/1``; figures unrounded."""

from flatprep.model.drawing import Part
from flatprep.repair.values import Change, Repaired
from flatprep.report.lint_json import finding_document

SCHEMA = "flatprep-repair/1"


def repair_document(repaired: Repaired, out: str) -> dict[str, object]:
    """Return the document as plain values; `out` is where the drawing was written, as given."""
    return {
        "schema": SCHEMA,
        "file": repaired.file,
        "out": out,
        "units_before": repaired.units,
        "parts": [_part(part) for part in repaired.after],
        "area_before_mm2": sum(p.area_mm2 for p in repaired.before),
        "area_after_mm2": sum(p.area_mm2 for p in repaired.after),
        "changes": [_change(change) for change in repaired.changes],
        "left": [finding_document(finding) for finding in repaired.left],
    }


def _part(part: Part) -> dict[str, object]:
    return {
        "name": part.name,
        "area_mm2": part.area_mm2,
        "cut_length_mm": part.cut_length_mm,
        "holes": len(part.holes),
        "size_mm": list(part.size_mm),
    }


def _change(change: Change) -> dict[str, object]:
    return {
        "kind": change.kind,
        "message": change.message,
        "at": None if change.at is None else list(change.at),
        "measured_mm": change.measured_mm,
        "handles": list(change.handles),
    }
