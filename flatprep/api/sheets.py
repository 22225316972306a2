"""The files of a layout: sheets as DXF and SVG, what is left of them, changed drawings, layout.json."""

import json
import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace
from pathlib import Path

from flatprep.api.nest import Nested
from flatprep.api.pieces import Piece, quantity, revision
from flatprep.api.shared import sheet_shared
from flatprep.api.tabs import job_tabs, tabs_drawing
from flatprep.base.files import make_folder, write_together
from flatprep.base.safe_names import safe_stems
from flatprep.drawing.forms import FORMS, Form, with_kerf
from flatprep.drawing.label import RemnantLabel, label_lines, thickness_text
from flatprep.drawing.words import Words
from flatprep.drawing.write import border_drawing, lines_drawing, part_drawing, sheet_drawing
from flatprep.job.values import Job, JobPart
from flatprep.model.drawing import Part
from flatprep.model.layout import SheetLayout
from flatprep.nest.offcut import Offcut, offcut_of
from flatprep.report.layout_json import LayoutSource, PartSource, StockSource, layout_document, sheet_name
from flatprep.report.sheet_svg import Extras, sheet_svg


def write_layout(nested: Nested, folder: Path) -> tuple[Path, ...]:
    """Write sheets, changed drawings and layout.json, all together or not at all.

    Returns
    -------
    tuple of Path
        What was written.

    Raises
    ------
    OutputError
        When the folder cannot be written into.
    """
    make_layout_folders(nested, folder)
    return write_together(layout_files(nested, folder))


def make_layout_folders(nested: Nested, folder: Path) -> None:
    """Make the folders of a layout.

    Raises
    ------
    OutputError
        When one cannot be written into.
    """
    make_folder(folder)
    if any(piece.changed for piece in nested.read.pieces):
        make_folder(folder / "parts")


def rests_of(nested: Nested) -> tuple[Offcut | None, ...]:
    """Return the usable rest of each sheet, None where nothing worth keeping is left."""
    parts = {piece.name: piece.part for piece in nested.read.pieces}
    keep_out = {stock.name: stock.keep_out for stock in nested.read.job.stock}
    return tuple(
        offcut_of(sheet, parts, nested.layout.spacing_mm, keep_out[sheet.stock]) for sheet in nested.layout.sheets
    )


def layout_files(
    nested: Nested, folder: Path, rests: Sequence[Offcut | None] | None = None
) -> Iterator[tuple[Path, str | None]]:
    """Yield the files of a layout with their text, layout.json last; None where an older sheet is to go.

    Parameters
    ----------
    rests
        Of `rests_of`, where they are known already.
    """
    job, pieces, sheets = nested.read.job, nested.read.pieces, nested.layout.sheets
    copies = _copy_names(pieces)
    for piece in pieces:
        if piece.changed:
            yield folder / copies[piece.name], part_drawing(piece.part)
    parts = {piece.name: piece.part for piece in pieces}
    tabs = job_tabs(nested.read)
    title = (job.name, f"revision {job.revision}") if job.revision else (job.name,)
    origin = _origin(job)
    known = {piece.name: _identity(job, piece) for piece in pieces}
    rests = rests_of(nested) if rests is None else rests
    for number, (sheet, rest) in enumerate(zip(sheets, rests, strict=True), start=1):
        stem = sheet_name(number)
        words = Words((*title, f"sheet {number}"), known, nested.etched)
        yield folder / f"{stem}.dxf", sheet_drawing(sheet, parts, words=words, tabs=tabs)
        for form in nested.also:
            if form is Form.SHARED:
                yield folder / f"{stem}-{form}.dxf", lines_drawing(sheet_shared(sheet, nested.read).lines)
                continue
            shapes = _with_kerf(pieces) if form is Form.KERF else parts
            yield folder / f"{stem}-{form}.dxf", sheet_drawing(sheet, shapes, words=words, form=FORMS[form])
        gaps = tabs_drawing(sheet, nested.read, tabs)
        if gaps is not None or (folder / f"{stem}-tabs.dxf").exists():
            yield folder / f"{stem}-tabs.dxf", gaps
        stock = origin.stock.get(sheet.stock, StockSource())
        extras = Extras(
            job.units, rest.rectangle if rest else None, tabs, known, nested.etched, stock.margins_mm, stock.keep_out
        )
        svg = sheet_svg(sheet, number, parts, margin_mm=job.margin_mm, job=_called(job), extras=extras)
        yield folder / f"{stem}.svg", svg
        if rest is not None:
            written = (*label_lines(_label(job, sheet, number)), _size(rest))
            yield folder / f"{stem}-rest.dxf", border_drawing(rest.outline, rest.holes, notes=written)
        elif (folder / f"{stem}-rest.dxf").exists():
            yield folder / f"{stem}-rest.dxf", None
    for older in _older_sheets(folder, len(sheets), nested.also):
        yield older, None
    sources = [_source(job, piece, folder / copies[piece.name]) for piece in pieces]
    document = layout_document(nested.layout, sources, folder, origin)
    yield folder / "layout.json", json.dumps(document, indent=1) + "\n"


def _label(job: Job, sheet: SheetLayout, number: int) -> RemnantLabel:
    """Say what is to be written on the rest of a sheet."""
    grain = next((stock.grain for stock in job.stock if stock.name == sheet.stock), None)
    label = f"{_called(job)}, rest of sheet {number}"
    return RemnantLabel(sheet.material, thickness_text(sheet.thickness_mm), label, grain)


def _size(rest: Offcut) -> str:
    x0, y0, x1, y1 = rest.rectangle
    return f"largest rectangle {x1 - x0:.0f} x {y1 - y0:.0f} mm"


def _origin(job: Job) -> LayoutSource:
    stock = {s.name: StockSource(s.rack_file, s.grain, s.margins_mm, s.keep_out) for s in job.stock}
    rack, bookings = (job.rack.folder, job.rack.bookings) if job.rack else (None, 0)
    return LayoutSource(_called(job), rack, bookings, stock)


def _called(job: Job) -> str:
    return f"{job.name} {job.revision}".rstrip()


def _identity(job: Job, piece: Piece) -> str:
    """Tell which drawing a piece is of: its revision, and the first digits of the digest of its content."""
    known = revision(job, piece.ask)
    return f"rev. {known} {piece.digest}" if known else piece.digest


def _older_sheets(folder: Path, count: int, also: Sequence[Form]) -> Iterator[Path]:
    """Sheets of an earlier run that this layout has no more: they would be cut by mistake."""
    kept = {"", "-rest", "-tabs", *(f"-{form}" for form in also)}
    for path in sorted(folder.glob("sheet-[0-9]*")):
        found = re.fullmatch(r"sheet-(\d+)((?:-[a-z0-9-]+)?)\.(?:dxf|svg)", path.name)
        if found and (int(found[1]) > count or found[2] not in kept):
            yield path


def _with_kerf(pieces: Sequence[Piece]) -> dict[str, Part]:
    return {piece.name: with_kerf(piece.part, _kerf_mm(piece.ask)) for piece in pieces}


def _kerf_mm(ask: JobPart) -> float:
    if ask.material is None or ask.thickness_mm is None:
        return ask.process.kerf_mm
    return ask.process.kerf_at(ask.material.family, ask.thickness_mm)


def _copy_names(pieces: tuple[Piece, ...]) -> Mapping[str, str]:
    """Where a changed copy of each part goes, relative to the folder; no two alike."""
    names: dict[str, str] = {}
    for piece, stem in zip(pieces, safe_stems([piece.name for piece in pieces]), strict=True):
        names[piece.name] = f"parts/{stem}.dxf"
    return names


def _source(job: Job, piece: Piece, copy: Path) -> PartSource:
    count = quantity(job, piece.ask)
    if piece.changed:
        return PartSource(_as_copied(piece.part), copy, "mm", count)
    return PartSource(piece.part, piece.ask.drawing, piece.drawing.units, count)


def _as_copied(part: Part) -> Part:
    """Return the part with the layers that its copy has."""
    contours = [replace(c, layers=("CUT",)) for c in part.contours]
    return replace(part, outer=contours[0], holes=tuple(contours[1:]))
