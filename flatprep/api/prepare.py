"""Everything about a job in one folder: findings, layout, bench sheets, estimate, and the page that joins them."""

import json
import re
import time
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace
from pathlib import Path

from flatprep import __version__
from flatprep.api.nest import Nested, OnBetter, Stop, nest_job, never
from flatprep.api.pieces import Piece, ReadJob, quantity, revision
from flatprep.api.sheets import layout_files, make_layout_folders, rests_of
from flatprep.api.work import checklist_job, estimate_job
from flatprep.base.files import make_folder, write_together
from flatprep.base.manifest import with_manifest
from flatprep.base.progress import Progress
from flatprep.base.safe_names import safe_stems
from flatprep.bench.opposite import opposite_part, opposite_steps
from flatprep.drawing.forms import Form
from flatprep.model.drawing import Part
from flatprep.model.estimate import Estimate
from flatprep.model.finding import Finding
from flatprep.model.layout import Layout
from flatprep.model.linted import Linted
from flatprep.model.work import Checklist
from flatprep.nest.offcut import Offcut as Rest
from flatprep.nest.problem import Budget
from flatprep.report.bundle import Bundle, Offcut, PartCard, SearchPoint
from flatprep.report.checklist_csv import checklist_csv
from flatprep.report.checklist_json import checklist_document
from flatprep.report.estimate_csv import estimate_csv
from flatprep.report.estimate_json import estimate_document
from flatprep.report.html import bench_sheet_html, report_html
from flatprep.report.lint_json import lint_document
from flatprep.report.tables_csv import findings_csv, parts_csv, sheets_csv

_TABLES = {
    "parts.csv": "parts",
    "findings.csv": "findings",
    "steps.csv": "bench work",
    "sheets.csv": "sheets",
    "estimate.csv": "mass and cost",
}
_SHEETS = {
    None: "for the cutter",
    "tabs": "with the gaps of its tabs, the kerf allowed for",
    "rest": "what is left of it",
    str(Form.CUT_ONLY): "contours alone",
    str(Form.R12): "as DXF R12",
    str(Form.KERF): "the kerf allowed for",
    str(Form.SHARED): "one cut for two parts",
}
"""What the sheet's drawings are, by the ends of their names."""


@dataclass(frozen=True, slots=True)
class Prepared:
    """All results of a job.

    Attributes
    ----------
    papers : mapping of str to str
        Files that the layout has no part in, by their place in the folder.
    rests : tuple
        What is left of each sheet, None where nothing worth keeping is.
    """

    read: ReadJob
    checklist: Checklist
    estimate: Estimate
    nested: Nested | None
    bundle: Bundle
    papers: Mapping[str, str]
    rests: tuple[Rest | None, ...] = ()

    @property
    def loud(self) -> bool:
        """Whether there is an error or warning, or a drawing that could not be read."""
        return any(one.loud for one in self.read.report.linted) or bool(self.read.report.unreadable)

    @property
    def unplaced(self) -> int:
        """Pieces without a place, fillers left aside."""
        return self.nested.wanting if self.nested else 0


def prepare_job(
    read: ReadJob,
    budget: Budget,
    *,
    progress: Progress | None = None,
    on_better: OnBetter | None = None,
    stop: Stop = never,
) -> Prepared:
    """Check, nest, list the bench work and estimate a job; `on_better` and `stop` as for `nest_job`.

    Raises
    ------
    FlatprepError
        When the job cannot be used; nothing is written here.
    """
    steps = checklist_job(read)
    papers = _papers(read, steps)  # before the search: when it is interrupted, less is left to be done
    points: list[SearchPoint] = []
    began = time.monotonic()

    def note(layout: Layout) -> None:
        if budget.steps is None:  # a budget in steps gives the same page every time
            points.append(_point(layout, time.monotonic() - began))

    def better(layout: Layout) -> None:
        note(layout)
        if on_better is not None:
            on_better(layout)

    nested = None
    if read.job.stock or read.job.rack:
        nested = nest_job(read, budget, progress=progress, on_better=better, stop=stop)
        read = nested.read
        note(nested.layout)
    money = estimate_job(read, nested.layout if nested else None, steps)
    rests = rests_of(nested) if nested else ()
    bundle = replace(_bundle(read, steps, money, nested, points), offcuts=_offcuts(rests))
    return Prepared(read, steps, money, nested, bundle, papers, rests)


def write_prepared(done: Prepared, folder: Path) -> None:
    """Write everything into `folder`, all together or not at all; what an earlier run left there and is no more goes.

    Raises
    ------
    OutputError
        When the folder cannot be written into.
    """
    if done.nested:
        make_layout_folders(done.nested, folder)
    make_folder(folder / "bench")
    write_together(with_manifest(folder, _files(done, folder)))


def _files(done: Prepared, folder: Path) -> Iterator[tuple[Path, str | None]]:
    """Yield every file with its text; report.html comes last and names those before it."""
    listed: list[tuple[str, str]] = []
    for path, text in _results(done, folder):
        yield path, text
        what = _told(path.name) if path.parent == folder and text is not None else ""
        listed += [(path.name, what)] if what else []
    yield folder / "report.html", report_html(replace(done.bundle, files=tuple(listed)))


def _results(done: Prepared, folder: Path) -> Iterator[tuple[Path, str | None]]:
    """Yield all but the page."""
    if done.nested:
        yield from layout_files(done.nested, folder, done.rests)
    yield folder / "estimate.json", _json(estimate_document(done.estimate))
    yield folder / "parts.csv", parts_csv(done.bundle)
    yield folder / "sheets.csv", sheets_csv(done.bundle)
    yield folder / "estimate.csv", estimate_csv(done.estimate)
    for name, text in done.papers.items():
        yield folder / name, text


def _papers(read: ReadJob, steps: Checklist) -> dict[str, str]:
    """Return the files of findings and bench work, and a bench sheet a part."""
    bundle = _bundle(read, steps, estimate_job(read, None, steps), None, ())
    papers = {
        "lint.json": _json(lint_document(read.report)),
        "checklist.json": _json(checklist_document(steps)),
        "findings.csv": findings_csv(bundle),
        "steps.csv": checklist_csv(steps),
    }
    stems = safe_stems([card.name for card in bundle.cards])
    for stem, card in zip(stems, bundle.cards, strict=True):
        papers[f"bench/{stem}.html"] = bench_sheet_html(bundle, card)
        if card.part and card.quantity_opposite:
            papers[f"bench/{stem}-opposite.html"] = bench_sheet_html(bundle, _opposite(card, card.part))
    return papers


def _json(document: object) -> str:
    return json.dumps(document, indent=1) + "\n"


def _told(name: str) -> str:
    """Say what a file is for; empty for those that people do not open from the page."""
    if name in _TABLES:
        return _TABLES[name]
    found = re.fullmatch(r"sheet-(\d+)(?:-([a-z0-9-]+))?\.dxf", name)
    return f"sheet {int(found[1])}, {_SHEETS[found[2]]}" if found else ""


def _opposite(card: PartCard, part: Part) -> PartCard:
    """Return the card of a handed part's turned-over pieces: their own outline, mirrored."""
    return replace(
        card, name=f"{card.name} (opposite hand)", part=opposite_part(part), quantity=card.quantity_opposite,
        quantity_opposite=0, findings=(), steps=opposite_steps(card.steps),
    )  # fmt: skip


def _bundle(
    read: ReadJob, steps: Checklist, money: Estimate, nested: Nested | None, points: Sequence[SearchPoint]
) -> Bundle:
    job = read.job
    return Bundle(
        name=job.name,
        revision=job.revision,
        units=job.units,
        sets=job.sets,
        cards=tuple(_card(read, piece, steps, money) for piece in read.pieces),
        layout=nested.layout if nested else None,
        estimate=money,
        checklist=steps,
        unreadable=tuple((u.file, u.message) for u in read.report.unreadable),
        assumed=(*read.report.notes, *((*nested.warnings, *nested.notes) if nested else ()), *drawn_twice(read.pieces)),
        cautions=steps.cautions,
        search=tuple(points),
        version=__version__,
    )


def drawn_twice(pieces: Sequence[Piece]) -> Iterator[str]:
    """Say which parts of different drawings are alike: a folder may hold each part alone and all of them together.

    Alike, or mirrored, seem parts of one material and thickness whose area, length of cut and number of holes agree.
    """
    kinds: dict[tuple[object, ...], list[Piece]] = {}
    for piece in pieces:
        part, ask = piece.drawn, piece.ask
        shape = (round(part.area_mm2, 1), round(part.cut_length_mm, 1), len(part.holes))
        kinds.setdefault((*shape, ask.material and ask.material.id, ask.thickness_mm), []).append(piece)
    for alike in kinds.values():
        first = {str(piece.ask.drawing): piece.name for piece in reversed(alike)}
        if len(first) > 1:
            names = " and ".join(reversed(first.values()))
            yield f"{names} seem alike or mirrored, from different drawings: all of them are cut"


def _offcuts(rests: Sequence[Rest | None]) -> tuple[Offcut, ...]:
    """Return the largest usable rectangle left of each sheet that has one."""
    return tuple(Offcut(number, *rest.rectangle) for number, rest in enumerate(rests, start=1) if rest is not None)


def _card(read: ReadJob, piece: Piece, steps: Checklist, money: Estimate) -> PartCard:
    ask, job = piece.ask, read.job
    findings = _findings(read, piece)
    return PartCard(
        name=piece.name,
        part=piece.drawn,
        drawing=str(ask.drawing),
        digest=piece.digest,
        material=ask.material.id if ask.material else "",
        material_name=ask.material.name if ask.material else "",
        thickness_mm=ask.thickness_mm,
        process=ask.process.id,
        quantity=ask.quantity * job.sets,
        quantity_opposite=quantity(job, ask) - ask.quantity * job.sets,
        revision=revision(job, ask),
        note=ask.note,
        findings=findings,
        steps=next((p.steps for p in steps.parts if p.name == piece.name), ()),
        estimate=next((p for p in money.parts if p.name == piece.name), None),
        assumed=(*_assumed(piece), *piece.changes),
    )


def _findings(read: ReadJob, piece: Piece) -> tuple[Finding, ...]:
    """Pick the findings of the piece itself, and those of its drawing that name no part (with its first piece)."""
    for one in read.report.linted:
        if one.drawing is piece.drawing:
            return tuple(f for f in one.findings if f.part == piece.name or (f.part is None and _first(one, piece)))
    return ()


def _first(one: Linted, piece: Piece) -> bool:
    return one.drawing.parts[0].name == piece.name


def _assumed(piece: Piece) -> tuple[str, ...]:
    drawing = piece.drawing
    out = [] if drawing.units_from != "assumed" else [f"no unit in the drawing: taken as {drawing.units}"]
    if drawing.recovered:
        out.append("the file was damaged and has been recovered while reading")
    return tuple(out)


def _point(layout: Layout, seconds: float) -> SearchPoint:
    return SearchPoint(seconds, len(layout.sheets), sum(sheet.used_length_mm for sheet in layout.sheets))
