"""A job with its drawings read: every part of it with its shape, as it will be cut."""

from collections.abc import Sequence
from dataclasses import dataclass, replace

from flatprep.api.lint import calliper_mm, lint_job
from flatprep.api.mates import as_asked, check_measured
from flatprep.base.errors import DrawingError
from flatprep.base.progress import Progress
from flatprep.bench.part import BenchPart, bench_part
from flatprep.bench.pilots import apply_pilots
from flatprep.geom.polygons import polygon
from flatprep.job.values import Job, JobPart
from flatprep.model.drawing import Drawing, Part
from flatprep.model.layout import Unplaced
from flatprep.model.linted import Linted, LintReport

_FAULTS_OF_A_COPY = {"self-crossing", "duplicate-line", "off-plane", "open-contour", "layer-role"}
"""A drawing with one of these is not what is cut: a clean copy stands in for it."""

_CHORD_MM = 0.01


@dataclass(frozen=True, slots=True)
class Piece:
    """One part of a job.

    Attributes
    ----------
    part : Part
        Its shape as it will be cut: holes that bench work opens up are changed as the job's `pilots` says, slots and
        corners as `slots` and `relief` say.
    drawn : Part
        Its shape as drawn.
    ask : JobPart
    drawing : Drawing
    changed : bool
        Whether the shape, or the lines around it, differ from the drawing: a copy is written for the cutter.
    changes : tuple of str
        What was changed, in words.
    """

    part: Part
    drawn: Part
    ask: JobPart
    drawing: Drawing
    bench: BenchPart
    changed: bool
    changes: tuple[str, ...] = ()

    @property
    def name(self) -> str:
        """The part's name."""
        return self.part.name

    @property
    def digest(self) -> str:
        """Tell this content of the drawing apart from any other, in a few digits."""
        return self.drawing.short_digest


@dataclass(frozen=True, slots=True)
class ReadJob:
    """A job, what lint says of it, its pieces, and parts whose drawing gives none."""

    job: Job
    report: LintReport
    pieces: tuple[Piece, ...]
    lost: tuple[Unplaced, ...] = ()


def read_job(job: Job, *, jobs: int = 1, progress: Progress | None = None) -> ReadJob:
    """Read and check every drawing of a job.

    Raises
    ------
    DrawingError
        When no drawing of the job can be used.
    JobError
        When bench work names holes that are not there, or slots are to fit sheets that nobody measured.
    """
    check_measured(job)
    report = lint_job(job, jobs=jobs, progress=progress)
    answers = {one.file: one for one in report.linted}
    pieces: list[Piece] = []
    lost: list[Unplaced] = []
    for ask in job.parts:
        answer = _of_part(report, ask, answers)
        if answer is None or not answer.drawing.parts:
            why = _why_lost(report, ask) if answer is None else "its drawing holds no closed outline"
            lost.append(Unplaced(ask.name, quantity(job, ask), why))
            continue
        for part in answer.drawing.parts:
            if polygon(part.outer.xyb, [h.xyb for h in part.holes], chord_mm=_CHORD_MM).is_valid:
                pieces.append(_piece(job, ask, answer.drawing, part))
            else:
                lost.append(Unplaced(part.name, quantity(job, ask), "its outlines cross each other"))
    if not pieces:
        raise DrawingError(f"{job.path}: none of its drawings can be used: {lost[0].why if lost else 'it names none'}")
    return ReadJob(job, report, tuple(pieces), tuple(lost))


def _of_part(report: LintReport, ask: JobPart, answers: dict[str, Linted]) -> Linted | None:
    """Find the answer for a part: two parts may share a drawing, with other materials and names."""
    for one in report.linted:
        named = {name for p in one.drawing.parts for name in (p.name, p.name.rpartition("#")[0])}
        if one.file == str(ask.drawing) and (ask.name in named or not named):
            return one
    found = answers.get(str(ask.drawing))
    return found if found is not None and not found.drawing.parts else None


def _why_lost(report: LintReport, ask: JobPart) -> str:
    for one in report.unreadable:
        if one.file == str(ask.drawing):
            return one.message
    return "its drawing could not be read"


def _piece(job: Job, ask: JobPart, drawing: Drawing, part: Part) -> Piece:
    bench = bench_part(ask, part, job, drawing)
    mated, mates = as_asked(part, ask, calliper_mm(job, ask))
    done = apply_pilots(replace(bench, part=mated))
    faulty = any(f.kind in _FAULTS_OF_A_COPY for f in drawing.faults)
    changed = done.part is not part or faulty or bool(drawing.loose)
    return Piece(done.part, part, ask, drawing, bench, changed, (*mates, *done.changes))


def quantity(job: Job, ask: JobPart) -> int:
    """Pieces of a part, all sets and both hands."""
    return (ask.quantity + ask.quantity_opposite) * job.sets


def revision(job: Job, ask: JobPart) -> str:
    """Return the revision of a part: its own, else that of the job; empty where neither has one."""
    return ask.revision or job.revision


def bench_parts(read: ReadJob) -> Sequence[BenchPart]:
    """Return the parts as the bench sees them: as drawn, for that is what they will be in the end."""
    return [piece.bench for piece in read.pieces]
