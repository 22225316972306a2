"""The checklist as a table, one row a step."""

from flatprep.model.work import Checklist, PartSteps, Step
from flatprep.report.csv_table import csv_table

COLUMNS = (
    "part", "quantity", "quantity_opposite", "order", "kind", "size", "tool", "tool_dia_mm", "depth_mm", "count",
    "at_mm", "cut_dia_mm", "side", "least_mm", "most_mm", "note", "why", "caution", "problem",
)  # fmt: skip


def checklist_csv(checklist: Checklist) -> str:
    """Return the steps as CSV with a header: lengths in mm, places as ``(x y) (x y)``."""
    return csv_table(COLUMNS, (_row(part, step) for part in checklist.parts for step in part.steps))


def _row(part: PartSteps, step: Step) -> list[object]:
    least, most = step.limits_mm or ("", "")
    return [
        part.name, part.quantity, part.quantity_opposite, step.order, step.kind, step.size, step.tool, step.tool_dia_mm,
        step.depth_mm, step.count, " ".join(f"({x:.6g} {y:.6g})" for x, y in step.at), step.cut_dia_mm, step.side or "",
        least, most, step.note, step.why, step.caution, step.problem,
    ]  # fmt: skip
