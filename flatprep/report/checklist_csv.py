"""The checklist as a table, one row a step."""

import csv
import io

from flatprep.model.work import Checklist, PartSteps, Step

COLUMNS = (
    "part", "quantity", "quantity_opposite", "order", "kind", "size", "tool", "tool_dia_mm", "depth_mm", "count",
    "at_mm", "cut_dia_mm", "side", "least_mm", "most_mm", "note", "why", "caution", "problem",
)  # fmt: skip


def checklist_csv(checklist: Checklist) -> str:
    """Return the steps as CSV with a header: lengths in mm, places as ``x y; x y``."""
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(COLUMNS)
    writer.writerows(_row(part, step) for part in checklist.parts for step in part.steps)
    return out.getvalue()


def _row(part: PartSteps, step: Step) -> list[object]:
    least, most = step.limits_mm or ("", "")
    values = [
        part.name, part.quantity, part.quantity_opposite, step.order, step.kind, step.size, step.tool, step.tool_dia_mm,
        step.depth_mm, step.count, "; ".join(f"{x:.6g} {y:.6g}" for x, y in step.at), step.cut_dia_mm, step.side or "",
        least, most, step.note, step.why, step.caution, step.problem,
    ]  # fmt: skip
    return [_safe(value) for value in values]


def _safe(value: object) -> object:
    """Keep a spreadsheet from taking a text for a formula."""
    if isinstance(value, str) and value[:1] in ("=", "+", "-", "@", "\t"):
        return "'" + value
    return "" if value is None else value
