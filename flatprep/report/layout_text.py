"""A layout in words: sheets, use, and what found no place."""

from collections import Counter
from pathlib import Path

from flatprep.model.layout import Layout, SheetLayout
from flatprep.report.layout_json import sheet_name


def layout_text(layout: Layout, folder: Path) -> str:
    """One block a sheet, then what is left over."""
    lines = []
    for number, sheet in enumerate(layout.sheets, start=1):
        lines += _sheet(number, sheet)
    for one in layout.unplaced:
        lines.append(f"NOT PLACED: {one.count} x {one.part}: {one.why}")
    pieces = sum(len(s.placements) for s in layout.sheets)
    lines.append(
        f"{_count(pieces, 'piece')} on {_count(len(layout.sheets), 'sheet')}, spacing {layout.spacing_mm:g} mm, "
        f"margin {layout.margin_mm:g} mm; written to {folder}"
    )
    return "\n".join(lines)


def _sheet(number: int, sheet: SheetLayout) -> list[str]:
    length = float(sheet.outline[:, 0].max() - sheet.outline[:, 0].min())
    width = float(sheet.outline[:, 1].max() - sheet.outline[:, 1].min())
    counts = Counter(p.part for p in sheet.placements)
    held = ", ".join(f"{n} x {name}" for name, n in sorted(counts.items()))
    what = f"{sheet_name(number)}: {sheet.stock}, {sheet.material} {sheet.thickness_mm:g} mm"
    share = f"used length {sheet.used_length_mm:.2f} mm, {100 * sheet.utilisation:.1f} % of it parts"
    return [f"{what}, {length:.2f} x {width:.2f} mm, {share}", f"  {held}"]


def _count(n: int, what: str) -> str:
    return f"{n} {what}" if n == 1 else f"{n} {what}s"
