"""Lint as one JSON document, ``flatprep-lint/1``; figures unrounded."""

from flatprep.model.drawing import Part
from flatprep.model.finding import Finding
from flatprep.model.linted import Linted, LintReport

SCHEMA = "flatprep-lint/1"


def lint_document(report: LintReport) -> dict[str, object]:
    """Return the document as plain values, ready for `json.dumps`."""
    return {
        "schema": SCHEMA,
        "drawings": [_drawing(one) for one in report.linted],
        "unreadable": [{"file": one.file, "message": one.message} for one in report.unreadable],
        "notes": list(report.notes),
    }


def _drawing(one: Linted) -> dict[str, object]:
    return {
        "file": one.file,
        "units": one.drawing.units,
        "units_from": str(one.drawing.units_from),
        "process": one.process,
        "material": one.material,
        "thickness_mm": one.thickness_mm,
        "parts": [_part(one, part) for part in one.drawing.parts],
        "findings": [finding_document(finding) for finding in one.findings],
    }


def _part(one: Linted, part: Part) -> dict[str, object]:
    return {
        "name": part.name,
        "area_mm2": part.area_mm2,
        "cut_length_mm": part.cut_length_mm,
        "holes": len(part.holes),
        "pierces": part.pierces,
        "size_mm": list(part.size_mm),
        "centroid_mm": list(part.moments.centroid),
        "mass_kg": one.mass_kg(part),
    }


def finding_document(finding: Finding) -> dict[str, object]:
    """Return one finding as plain values."""
    return {
        "rule": finding.rule,
        "severity": str(finding.severity),
        "part": finding.part,
        "message": finding.message,
        "at": None if finding.at is None else list(finding.at),
        "measured": finding.measured,
        "limit": finding.limit,
        "unit": finding.unit,
        "remedy": finding.remedy,
        "handles": list(finding.handles),
    }
