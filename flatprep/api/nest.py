"""Nest a job: its parts and stock in the words of the search, and what may stay as it is."""

from collections.abc import Callable
from dataclasses import dataclass, field, replace
from pathlib import Path

import numpy as np

from flatprep.api.etch import etched_labels
from flatprep.api.grain import bends_deg, grain_notes, grain_warnings, must_cross
from flatprep.api.pieces import Piece, ReadJob
from flatprep.api.remnants import with_remnants
from flatprep.api.tabs import tab_notes, tab_warnings
from flatprep.base.errors import DrawingError, JobError
from flatprep.base.progress import Progress, Silent
from flatprep.bench.sides import side_bound
from flatprep.drawing.forms import Form
from flatprep.drawing.read import ReadOptions, read
from flatprep.drawing.remnant import outline_of
from flatprep.drawing.words import Etched
from flatprep.geom.bulge import Floats
from flatprep.job.values import Job, Stock
from flatprep.model.layout import Layout
from flatprep.nest.first_article import late_kinds, nest_first_articles
from flatprep.nest.objective import is_open
from flatprep.nest.problem import Budget, Item, KeptSheet, NestAsk, StockSheet
from flatprep.nest.solve import nest

OnBetter = Callable[[Layout], None]
Stop = Callable[[], bool]


def never() -> bool:
    """Do not stop."""
    return False


@dataclass(frozen=True, slots=True)
class Nested:
    """A layout and what it is made of.

    Attributes
    ----------
    read : ReadJob
        The job, with the remnants of its rack that it can use among its stock.
    """

    read: ReadJob
    layout: Layout
    ask: NestAsk
    warnings: tuple[str, ...] = ()
    notes: tuple[str, ...] = ()
    also: tuple[Form, ...] = ()
    """Other forms that each sheet is written in."""
    etched: Etched = field(default_factory=dict)
    """Labels that the job wants etched on its parts."""

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
    keep: Layout | None = None,
) -> Nested:
    """Lay a job's parts on its stock.

    Parameters
    ----------
    stop
        Asked now and then: once it says True, the search ends with the best it has.
    keep
        A layout whose placements stay, cut already or moved by hand: the rest is laid around them.

    Raises
    ------
    JobError
        When the job names no stock, or an outline of its stock cannot be used; a remnant of the rack that cannot be
        used is left out, with a warning.
    KeepError
        When what is kept does not fit the job, or is not sound; the faults are named.
    """
    read_job, shelf = with_remnants(read_job, progress)
    ask = nest_ask(read_job)
    if keep is not None:
        ask = replace(ask, keep=tuple(KeptSheet(s.stock, s.placements) for s in keep.sheets if s.placements))
    lay = nest_first_articles if read_job.job.first_article else nest
    layout = lay(ask, budget, progress or Silent(), on_better, stop)
    layout = replace(layout, unplaced=(*layout.unplaced, *read_job.lost))
    warnings = (
        *spacing_warnings(read_job.job),
        *wide_spacing(ask),
        *tab_warnings(read_job),
        *grain_warnings(ask),
        *shelf.warnings,
    )
    labels = etched_labels(read_job, layout)
    notes = (*shelf.notes, *tab_notes(read_job), *grain_notes(read_job, ask, layout), *labels.notes)
    notes += late_articles(layout, ask) if read_job.job.first_article else ()
    return Nested(read_job, layout, ask, warnings, notes, etched=labels.etched)


def nest_ask(read_job: ReadJob) -> NestAsk:
    """Put a job into the words of the nest."""
    job = read_job.job
    if not job.stock:
        rack = f" and nothing of use in the rack {job.rack.folder}" if job.rack else ""
        raise JobError(
            f"{job.path}: no [[stock]]{rack}: nothing to lay the parts on", "add a [[stock]] table with its size"
        )
    windows = job.windows if job.windows is not None else job.process.windows
    items = tuple(_item(job, piece) for piece in read_job.pieces)
    stock = tuple(_sheet(job, one) for one in job.stock)
    return NestAsk(items, stock, job.spacing_mm, job.margin_mm, windows)


def late_articles(layout: Layout, ask: NestAsk) -> tuple[str, ...]:
    """Say which first articles are not on the first sheet of their material."""
    late = [f"{name}{' (turned over)' if over else ''}" for name, over in late_kinds(layout, ask)]
    if not late:
        return ()
    return (f"first articles that find no place on the first sheet without more stock: {', '.join(late)}",)


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


def wide_spacing(ask: NestAsk) -> tuple[str, ...]:
    """Say on which sheets no two pieces can lie, for the spacing is larger than they are."""
    small = [s.name for s in ask.stock if not is_open(s) and _diagonal_mm(s) <= ask.spacing_mm]
    if not small:
        return ()
    return (
        f"spacing {ask.spacing_mm:g} mm is larger than {', '.join(small)}: no two pieces go on one such sheet; "
        "give the spacing between parts, in the job's unit",
    )


def _diagonal_mm(stock: StockSheet) -> float:
    if stock.outline is not None:
        return float(np.hypot(*np.ptp(stock.outline, axis=0)))
    return float(np.hypot(stock.length_mm or 0.0, stock.width_mm))


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
        bends_deg=bends_deg(piece),
        must_cross=must_cross(piece),
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
    return np.array(stock.outline, dtype=np.float64), tuple(np.array(h, dtype=np.float64) for h in stock.holes)
