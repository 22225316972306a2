"""A layout in words: sheets, use, and what found no place."""

from collections import Counter
from collections.abc import Iterator, Mapping, Sequence
from pathlib import Path

import numpy as np

from flatprep.model.layout import Layout, SheetLayout
from flatprep.report.figures import counted, length, percent, size
from flatprep.report.layout_json import sheet_name
from flatprep.report.words import lengths_in

TOLD = 12
"""So many changes of a part are told one by one."""


def layout_text(
    layout: Layout, folder: Path, changed: Mapping[str, Sequence[str]] | None = None, units: str = "mm"
) -> str:
    """One block a sheet, then what is left over.

    Parameters
    ----------
    layout
    folder
        Where it was written.
    changed
        What is cut otherwise than drawn, in words, by part.
    units
        Of the lengths shown.
    """
    lines = []
    for number, sheet in enumerate(layout.sheets, start=1):
        lines += _sheet(number, sheet, units)
    for one in layout.unplaced:
        lines.append(f"NOT PLACED: {one.count} x {one.part}: {lengths_in(one.why, units)}")
    for name, changes in (changed or {}).items():
        lines += _changes(name, [lengths_in(words, units) for words in changes])
    pieces = sum(len(s.placements) for s in layout.sheets)
    lines.append(
        f"{counted(pieces, 'piece')} on {counted(len(layout.sheets), 'sheet')}, "
        f"spacing {length(layout.spacing_mm, units)}, margin {length(layout.margin_mm, units)}; written to {folder}"
    )
    return "\n".join(lines)


def _changes(name: str, changes: Sequence[str]) -> Iterator[str]:
    if changes:
        yield f"{name}: not cut as drawn, {counted(len(changes), 'change')}"
    shown = changes if len(changes) <= TOLD else changes[: TOLD - 2]
    for words in shown:
        yield f"  {words}"
    if len(shown) < len(changes):
        yield f"  and {len(changes) - len(shown)} more"


def _sheet(number: int, sheet: SheetLayout, units: str) -> list[str]:
    wide, high = (float(v) for v in np.ptp(sheet.outline, axis=0))
    counts = Counter(p.part for p in sheet.placements)
    held = ", ".join(f"{n} x {name}" for name, n in sorted(counts.items()))
    what = f"{sheet_name(number)}: {sheet.stock}, {sheet.material} {length(sheet.thickness_mm, units)}"
    share = f"used length {length(sheet.used_length_mm, units)}, {percent(sheet.utilisation)} of the sheet is parts"
    first = [f"{p.part} {p.copy}{' (turned over)' if p.mirrored else ''}" for p in sheet.placements if p.first]
    told = [f"  first articles, cut first: {', '.join(first)}"] if first else []
    return [f"{what}, {size(wide, high, units)}, {share}", f"  {held}", *told]
