"""A layout in words: sheets, use, and what found no place."""

from collections import Counter
from collections.abc import Iterator, Mapping, Sequence
from pathlib import Path

from flatprep.model.layout import Layout, SheetLayout
from flatprep.report.layout_json import sheet_name

TOLD = 12
"""So many changes of a part are told one by one."""


def layout_text(layout: Layout, folder: Path, changed: Mapping[str, Sequence[str]] | None = None) -> str:
    """One block a sheet, then what is left over.

    Parameters
    ----------
    layout
    folder
        Where it was written.
    changed
        What is cut otherwise than drawn, in words, by part.
    """
    lines = []
    for number, sheet in enumerate(layout.sheets, start=1):
        lines += _sheet(number, sheet)
    for one in layout.unplaced:
        lines.append(f"NOT PLACED: {one.count} x {one.part}: {one.why}")
    for name, changes in (changed or {}).items():
        lines += _changes(name, changes)
    pieces = sum(len(s.placements) for s in layout.sheets)
    lines.append(
        f"{_count(pieces, 'piece')} on {_count(len(layout.sheets), 'sheet')}, spacing {layout.spacing_mm:g} mm, "
        f"margin {layout.margin_mm:g} mm; written to {folder}"
    )
    return "\n".join(lines)


def _changes(name: str, changes: Sequence[str]) -> Iterator[str]:
    if changes:
        yield f"{name}: not cut as drawn, {_count(len(changes), 'change')}"
    shown = changes if len(changes) <= TOLD else changes[: TOLD - 2]
    for words in shown:
        yield f"  {words}"
    if len(shown) < len(changes):
        yield f"  and {len(changes) - len(shown)} more"


def _sheet(number: int, sheet: SheetLayout) -> list[str]:
    length = float(sheet.outline[:, 0].max() - sheet.outline[:, 0].min())
    width = float(sheet.outline[:, 1].max() - sheet.outline[:, 1].min())
    counts = Counter(p.part for p in sheet.placements)
    held = ", ".join(f"{n} x {name}" for name, n in sorted(counts.items()))
    what = f"{sheet_name(number)}: {sheet.stock}, {sheet.material} {sheet.thickness_mm:g} mm"
    share = f"used length {sheet.used_length_mm:.2f} mm, {100 * sheet.utilisation:.1f} % of it parts"
    first = [f"{p.part} {p.copy}{' (turned over)' if p.mirrored else ''}" for p in sheet.placements if p.first]
    told = [f"  first articles, cut first: {', '.join(first)}"] if first else []
    return [f"{what}, {length:.2f} x {width:.2f} mm, {share}", f"  {held}", *told]


def _count(n: int, what: str) -> str:
    return f"{n} {what}" if n == 1 else f"{n} {what}s"
