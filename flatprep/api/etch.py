"""The labels that a job wants etched on its parts."""

from collections.abc import Sequence
from dataclasses import dataclass, field

from flatprep.api.pieces import Piece, ReadJob, revision
from flatprep.api.work import checklist_job
from flatprep.bench.etch import EtchAsk, Etching, etch_faults, etching
from flatprep.drawing.words import Etched
from flatprep.job.values import Job
from flatprep.model.drawing import Curve
from flatprep.model.layout import Layout
from flatprep.model.work import Step


@dataclass(frozen=True, slots=True)
class Labels:
    """Labels by part, and a line for each that is left out."""

    etched: Etched = field(default_factory=dict)
    notes: tuple[str, ...] = ()


def etched_labels(read: ReadJob, layout: Layout) -> Labels:
    """Return the labels of all parts that lie on a layout, as far as the job wants them.

    Raises
    ------
    JobError
        When bench work, which labels keep clear of, names holes that are not there.
    """
    laid = {p.part for sheet in layout.sheets for p in sheet.placements}
    pieces = [piece for piece in read.pieces if piece.name in laid and _is_wanted(read.job, piece)]
    if not pieces:
        return Labels()
    steps = {part.name: part.steps for part in checklist_job(read).parts}
    etched: dict[tuple[str, bool], Sequence[Curve]] = {}
    notes = []
    for piece in pieces:
        found = _label(read.job, piece, steps.get(piece.name, ()))
        if found.why:
            notes.append(f"{piece.name}: no label etched: {found.why}")
        etched[piece.name, False], etched[piece.name, True] = found.drawn, found.over
    return Labels(etched, tuple(notes))


def _label(job: Job, piece: Piece, steps: Sequence[Step]) -> Etching:
    """Return a part's label, checked apart from how it was placed."""
    ask = EtchAsk(*job.etch_height_mm)
    found = etching(piece.bench, piece.part, steps, f"{piece.name} {revision(job, piece.ask)}".rstrip(), ask)
    for lines in (found.drawn, found.over):
        fault = etch_faults(piece.bench, piece.part, steps, lines, ask.clear_mm) if lines else ""
        if fault:
            raise RuntimeError(f"a label that is not sound: {piece.name}: {fault}")
    return found


def _is_wanted(job: Job, piece: Piece) -> bool:
    own = piece.ask.etch_label
    return job.etch_labels if own is None else own
