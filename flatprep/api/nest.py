"""Nest a job, and write its layout: sheets as DXF and SVG, changed drawings, layout.json."""

import json
import re
from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from pathlib import Path

import numpy as np

from flatprep.api.pieces import Piece, ReadJob, quantity
from flatprep.base.errors import DrawingError, JobError
from flatprep.base.files import make_folder, write_together
from flatprep.base.progress import Progress, Silent
from flatprep.base.safe_names import safe_stems
from flatprep.bench.sides import side_bound
from flatprep.drawing.forms import FORMS, Form, with_kerf
from flatprep.drawing.read import ReadOptions, read
from flatprep.drawing.remnant import outline_of
from flatprep.drawing.write import part_drawing, sheet_drawing
from flatprep.geom.bulge import Floats
from flatprep.job.values import Job, JobPart, Stock
from flatprep.model.drawing import Part
from flatprep.model.layout import Layout
from flatprep.nest.problem import Budget, Item, NestAsk, StockSheet
from flatprep.nest.solve import nest
from flatprep.report.layout_json import PartSource, layout_document, sheet_name
from flatprep.report.sheet_svg import sheet_svg

OnBetter = Callable[[Layout], None]
Stop = Callable[[], bool]


def never() -> bool:
    """Do not stop."""
    return False


@dataclass(frozen=True, slots=True)
class Nested:
    """A layout and what it is made of."""

    read: ReadJob
    layout: Layout
    ask: NestAsk
    warnings: tuple[str, ...] = ()
    also: tuple[Form, ...] = ()
    """Other forms that each sheet is written in."""

    @property
    def wanting(self) -> int:
        """Pieces without a place; fillers only take room that is left, they are not missed."""
        fillers = {piece.name for piece in self.read.pieces if piece.ask.filler}
        return sum(u.count for u in self.layout.unplaced if u.part not in fillers)


def nest_job(
    read_job: ReadJob,
    budget: Budget,
    *,
    progress: Progress | None = None,
    on_better: OnBetter | None = None,
    stop: Stop = never,
) -> Nested:
    """Lay a job's parts on its stock.

    `stop` is asked now and then: once it says True, the search ends with the best it has.

    Raises
    ------
    JobError
        When the job names no stock, or a remnant's outline cannot be used.
    """
    ask = nest_ask(read_job)
    layout = nest(ask, budget, progress or Silent(), on_better, stop)
    layout = replace(layout, unplaced=(*layout.unplaced, *read_job.lost))
    return Nested(read_job, layout, ask, spacing_warnings(read_job.job))


def nest_ask(read_job: ReadJob) -> NestAsk:
    """Put a job into the words of the nest."""
    job = read_job.job
    if not job.stock:
        raise JobError(f"{job.path}: no [[stock]]: nothing to lay the parts on", "add a [[stock]] table with its size")
    windows = job.windows if job.windows is not None else job.process.windows
    items = tuple(_item(job, piece) for piece in read_job.pieces)
    stock = tuple(_sheet(job, one) for one in job.stock)
    return NestAsk(items, stock, job.spacing_mm, job.margin_mm, windows)


def spacing_warnings(job: Job) -> tuple[str, ...]:
    """Say what the spacing cannot do; it is never raised in silence."""
    out = []
    for process in {p.process.id: p.process for p in job.parts}.values():
        least, what = (process.tool_diameter_mm, "tool") if process.tool_diameter_mm else (process.kerf_mm, "kerf")
        if job.spacing_mm < least:
            out.append(
                f"spacing {job.spacing_mm:g} mm is less than the {what} of {process.id} ({least:g} mm): "
                "neighbouring parts will be cut into; the job's spacing is kept as it is"
            )
    return tuple(out)


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


def layout_files(nested: Nested, folder: Path) -> Iterator[tuple[Path, str | None]]:
    """Yield the files of a layout with their text, layout.json last; None where an older sheet is to go."""
    job, pieces, sheets = nested.read.job, nested.read.pieces, nested.layout.sheets
    copies = _copy_names(pieces)
    for piece in pieces:
        if piece.changed:
            yield folder / copies[piece.name], part_drawing(piece.part)
    parts = {piece.name: piece.part for piece in pieces}
    title = (job.name, f"revision {job.revision}") if job.revision else (job.name,)
    for number, sheet in enumerate(sheets, start=1):
        stem = sheet_name(number)
        yield folder / f"{stem}.dxf", sheet_drawing(sheet, parts, title=title)
        for form in nested.also:
            shapes = _with_kerf(pieces) if form is Form.KERF else parts
            yield folder / f"{stem}-{form}.dxf", sheet_drawing(sheet, shapes, title=title, form=FORMS[form])
        yield folder / f"{stem}.svg", sheet_svg(sheet, number, parts, margin_mm=job.margin_mm, job=job.name)
    for older in _older_sheets(folder, len(sheets), nested.also):
        yield older, None
    sources = [_source(job, piece, folder / copies[piece.name]) for piece in pieces]
    yield folder / "layout.json", json.dumps(layout_document(nested.layout, sources, folder), indent=1) + "\n"


def _older_sheets(folder: Path, count: int, also: Sequence[Form]) -> Iterator[Path]:
    """Sheets of an earlier run that this layout has no more: they would be cut by mistake."""
    kept = {"", *(f"-{form}" for form in also)}
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


def _item(job: Job, piece: Piece) -> Item:
    ask = piece.ask
    if ask.material is None or ask.thickness_mm is None:
        missing = "material" if ask.material is None else "thickness"
        raise JobError(
            f"{job.path}: part {ask.name!r}: no {missing}", f"add {missing} to the part, or give --{missing}"
        )
    return Item(
        part=piece.part,
        material=ask.material.id,
        thickness_mm=ask.thickness_mm,
        quantity=ask.quantity * job.sets,
        quantity_opposite=ask.quantity_opposite * job.sets,
        turns_deg=ask.turns_deg,
        may_flip=ask.may_flip and not _keeps_its_side(piece),
        grain=ask.grain,
        filler=ask.filler,
    )


def _keeps_its_side(piece: Piece) -> bool:
    """Tell whether side-bound work, a bend's direction or a good face forbids turning over; handed parts may be."""
    ask = piece.ask
    return not ask.quantity_opposite and bool(side_bound(ask.work, ask.bends, ask.good_face))


def _sheet(job: Job, stock: Stock) -> StockSheet:
    outline: Floats | None = None
    holes: tuple[Floats, ...] = ()
    if stock.outline is not None:
        outline, holes = _remnant(job, stock)
    length, width = stock.length_mm, stock.width_mm
    if outline is not None:
        width = float(outline[:, 1].max() - outline[:, 1].min())
    if width is None:
        raise JobError(f"{job.path}: stock {stock.name!r}: no width", "give length and width, or an outline")
    return StockSheet(
        name=stock.name,
        material=stock.material.id,
        thickness_mm=stock.thickness_mm,
        length_mm=length,
        width_mm=width,
        outline=outline,
        holes=holes,
        count=stock.count,
        price=None if stock.price_per_sheet is None else float(stock.price_per_sheet),
        price_per_metre=None if stock.price_per_metre is None else float(stock.price_per_metre),
        grain=stock.grain,
        margins_mm=stock.margins_mm,
        keep_out=stock.keep_out,
    )


def _remnant(job: Job, stock: Stock) -> tuple[Floats, tuple[Floats, ...]]:
    if isinstance(stock.outline, Path):
        drawing = read(stock.outline, ReadOptions())
        try:
            return outline_of(drawing)
        except DrawingError as err:
            raise JobError(f"{job.path}: stock {stock.name!r}: {err.message}", err.remedy) from err
    return np.array(stock.outline, dtype=np.float64), ()
