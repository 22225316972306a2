"""Parts, findings and sheets as CSV tables: one row a thing, plain figures, units in the heads."""

from collections import Counter

from flatprep.report.bundle import Bundle
from flatprep.report.csv_table import csv_table
from flatprep.report.sheet_figure import sheet_box

Cell = str | float | int | None


def parts_csv(bundle: Bundle) -> str:
    """Return one row a part: what it is, how many, how large, how heavy, what it costs."""
    head = (
        "part", "drawing", "drawing_hash", "revision", "material", "thickness_mm", "process", "quantity",
        "quantity_opposite", "width_mm", "height_mm", "area_mm2", "cut_length_mm", "pierces", "mass_kg",
        "material_cost", "line_cost", "errors", "warnings", "notes", "note",
    )  # fmt: skip
    return csv_table(head, (_part_row(bundle, i) for i in range(len(bundle.cards))))


def _part_row(bundle: Bundle, index: int) -> tuple[Cell, ...]:
    card = bundle.cards[index]
    estimate, part = card.estimate, card.part
    width, height = part.size_mm if part else (None, None)
    loud = Counter(finding.severity.value for finding in card.findings)
    return (
        card.name, card.drawing, card.digest, card.revision, card.material, card.thickness_mm, card.process,
        card.quantity, card.quantity_opposite, width, height,
        part.area_mm2 if part else None, part.cut_length_mm if part else None, part.pierces if part else None,
        estimate.mass_kg if estimate else None, estimate.material_cost if estimate else None,
        str(estimate.line_cost) if estimate and estimate.line_cost is not None else None,
        loud["error"], loud["warning"], loud["note"], card.note,
    )  # fmt: skip


def findings_csv(bundle: Bundle) -> str:
    """Return one row a finding, in the order of the report; unreadable drawings come last."""
    head = (
        "part", "drawing", "number", "severity", "rule", "message", "x_mm", "y_mm", "measured", "limit", "unit",
        "remedy", "entities",
    )  # fmt: skip
    rows: list[tuple[Cell, ...]] = [
        (
            card.name, card.drawing, number, f.severity.value, f.rule, f.message, *(f.at or (None, None)), f.measured,
            f.limit, f.unit, f.remedy, " ".join(f.handles),
        )
        for card in bundle.cards
        for number, f in enumerate(card.findings, start=1)
    ]  # fmt: skip
    rows += [
        (None, file, None, "error", "unreadable", message, None, None, None, None, None, "", "")
        for file, message in bundle.unreadable
    ]
    return csv_table(head, rows)


def sheets_csv(bundle: Bundle) -> str:
    """Return one row a sheet and kind of part on it, so that a sheet's rows add up to its pieces."""
    head = (
        "sheet", "stock", "material", "thickness_mm", "length_mm", "width_mm", "used_length_mm", "utilisation",
        "part", "pieces",
    )  # fmt: skip
    rows: list[tuple[Cell, ...]] = []
    for number, sheet in enumerate(bundle.layout.sheets if bundle.layout else (), start=1):
        x0, y0, x1, y1 = sheet_box(sheet)
        known = (
            number, sheet.stock, sheet.material, sheet.thickness_mm, x1 - x0, y1 - y0, sheet.used_length_mm,
            sheet.utilisation,
        )  # fmt: skip
        counts = Counter(placement.part for placement in sheet.placements)
        rows += [(*known, name, count) for name, count in sorted(counts.items())]
    return csv_table(head, rows)
