"""Lint: every drawing answered, each in a worker that can be stopped."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from pathlib import Path

from flatprep.api.find import Found, find_drawings
from flatprep.api.given_up import given_up
from flatprep.base.errors import DrawingError, FlatprepError
from flatprep.base.progress import Progress, Silent
from flatprep.base.tolerances import DEFAULT, Tolerances
from flatprep.base.workers import Caps, Lost, Pool
from flatprep.drawing.read import ReadOptions, read
from flatprep.job.context import JobOptions
from flatprep.job.values import Job, JobPart
from flatprep.measure.part import measured_parts
from flatprep.model.drawing import Role
from flatprep.model.linted import Linted, LintReport, Unreadable
from flatprep.practice.tool import tool_radius_mm
from flatprep.profile.gauges import parse_thickness_mm
from flatprep.profile.material import Material
from flatprep.profile.material_load import load_material
from flatprep.profile.process import Process
from flatprep.profile.process_load import load_process
from flatprep.rules import run
from flatprep.rules.across import near_misses
from flatprep.rules.base import Context

_SECONDS = 6.0
_SECONDS_A_MEGABYTE = 20.0
"""A drawing may take `_SECONDS`, and more the larger its file: ten times what a usual one of its size needs."""


@dataclass(frozen=True, slots=True)
class LintTask:
    """One drawing and what it is held against."""

    path: Path
    units: str | None = None
    roles: Mapping[str, Role] = field(default_factory=dict)
    process: Process | None = None
    material: Material | None = None
    thickness_mm: float | None = None
    job_part: JobPart | None = None
    measured_thickness_mm: float | None = None

    @property
    def tol(self) -> Tolerances:
        """The tolerances, with the process's own join gap."""
        return replace(DEFAULT, join_mm=self.process.join_gap_mm) if self.process else DEFAULT


def lint_paths(
    paths: Sequence[Path], said: JobOptions | None = None, *, jobs: int = 1, progress: Progress | None = None
) -> LintReport:
    """Check drawings and folders of drawings.

    Raises
    ------
    FlatprepError
        When an option, a profile or a cut list is wrong. A drawing that cannot be read is no error: it is reported.
    """
    said = said or JobOptions()
    process = load_process(said.process, said.profile_folders) if said.process else None
    found, missing = find_drawings(paths)
    tasks = [_task(one, said, process) for one in found]
    report = lint_tasks(tasks, jobs=jobs, progress=progress)
    lost = tuple(Unreadable(str(m.path), f"{m.path}: {m.why}", m.remedy) for m in missing)
    return replace(report, unreadable=(*report.unreadable, *lost), notes=(*_unknown(tasks), *_kerf(tasks)))


def lint_job(job: Job, *, jobs: int = 1, progress: Progress | None = None) -> LintReport:
    """Check every drawing of a job against its part's material, thickness and process."""
    tasks = [
        LintTask(
            part.drawing,
            part.drawing_units,
            {**job.layers, **part.layers},
            part.process,
            part.material,
            part.thickness_mm,
            part,
            calliper_mm(job, part),
        )
        for part in job.parts
    ]
    report = lint_tasks(tasks, jobs=jobs, progress=progress)
    return replace(report, linted=_with_near_misses(report.linted), notes=(*_unknown(tasks), *_kerf(tasks)))


def calliper_mm(job: Job, part: JobPart) -> float | None:
    """Return what the sheets for a part measure, where the stock says one thickness."""
    measured = {
        stock.measured_thickness_mm
        for stock in job.stock
        if stock.material == part.material and stock.thickness_mm == part.thickness_mm
    }
    return measured.pop() if len(measured) == 1 else None


def _with_near_misses(linted: Sequence[Linted]) -> tuple[Linted, ...]:
    """Add the findings between parts, each to the drawing of the part it names."""
    parts = [part for one in linted for part in measured_parts(one.drawing.parts, DEFAULT)]
    found = near_misses(parts)
    return tuple(
        replace(one, findings=(*one.findings, *(f for f in found if f.part in {p.name for p in one.drawing.parts})))
        for one in linted
    )


def lint_tasks(tasks: Sequence[LintTask], *, jobs: int = 1, progress: Progress | None = None) -> LintReport:
    """Check drawings in `jobs` processes; what hangs or dies is reported as unreadable."""
    tell = progress or Silent()
    linted: list[Linted] = []
    unreadable: list[Unreadable] = []
    pool: Pool[LintTask, Linted | Unreadable] = Pool(lint_one, Caps(_patience), jobs)
    for number, (task, answer) in enumerate(zip(tasks, pool.run(tasks), strict=True), start=1):
        if isinstance(answer, Linted):
            linted.append(answer)
        elif isinstance(answer, Unreadable):
            unreadable.append(answer)
        else:
            unreadable.append(_lost(task, answer))
        tell.update("drawings checked", done=number, total=len(tasks))
    return LintReport(tuple(linted), tuple(unreadable))


def lint_one(task: LintTask) -> Linted | Unreadable:
    """Read and check one drawing in this process."""
    file = str(task.path)
    name = task.job_part.name if task.job_part else None
    try:
        drawing = read(task.path, ReadOptions(task.units, task.roles, task.tol), name=name)
    except DrawingError as err:
        return Unreadable(file, err.message, err.remedy)
    context = Context(
        drawing, task.process, task.material, task.thickness_mm, task.job_part, task.tol, task.measured_thickness_mm
    )
    return Linted(
        file,
        drawing,
        run(context),
        process=task.process.id if task.process else None,
        material=task.material.id if task.material else None,
        thickness_mm=task.thickness_mm,
        density_kg_m3=task.material.density_kg_m3 if task.material else None,
        tool_radius_mm=tool_radius_mm(task.process, context.family, task.thickness_mm) if task.process else 0.0,
    )


def _task(one: Found, said: JobOptions, process: Process | None) -> LintTask:
    row = one.row
    try:
        material_name = (row.material if row else "") or said.material
        material = load_material(material_name, said.profile_folders) if material_name else None
        thickness = (row.thickness if row else "") or said.thickness
        thickness_mm = parse_thickness_mm(thickness, "mm", material) if thickness else None
    except FlatprepError as err:
        if row is None:
            raise
        raise type(err)(f"cutlist.csv: line {row.line} ({row.file}): {err.message}", err.remedy) from err
    return LintTask(one.path, said.units, said.layers, process, material, thickness_mm)


def _unknown(tasks: Sequence[LintTask]) -> tuple[str, ...]:
    """One line on what was not said, so that rules which need it did not run."""
    open_ends = [
        (what, sum(1 for t in tasks if getattr(t, field_name) is None))
        for what, field_name in (("process", "process"), ("material", "material"), ("thickness", "thickness_mm"))
    ]
    missing = [f"{what} ({count} of {len(tasks)} drawings)" for what, count in open_ends if count]
    if not missing:
        return ()
    return (f"not said: {', '.join(missing)}; rules that need it did not run",)


def _kerf(tasks: Sequence[LintTask]) -> tuple[str, ...]:
    """One line on how sizes change where the cut runs on the line, with the kerfs of each process."""
    kerfs: dict[str, set[float]] = {}
    for t in tasks:
        if t.process is not None:
            kerf = t.process.kerf_at(t.material.family if t.material else None, t.thickness_mm)
            kerfs.setdefault(t.process.id, set()).add(kerf)
    said = ", ".join(f"{name} {_range(sizes)} mm" for name, sizes in kerfs.items() if max(sizes) > 0.0)
    if not said:
        return ()
    return (
        "a cut that runs on the line makes holes wider and parts smaller than drawn by its kerf "
        f"({said}): have the machine offset the path, or nest with --also kerf",
    )


def _range(sizes: set[float]) -> str:
    least, most = min(sizes), max(sizes)
    return f"{least:.3g}" if most - least < 0.005 else f"{least:.3g} to {most:.3g}"


def _patience(task: LintTask) -> float:
    try:
        size = task.path.stat().st_size
    except OSError:
        size = 0
    return _SECONDS + _SECONDS_A_MEGABYTE * size / 1e6


def _lost(task: LintTask, answer: Lost) -> Unreadable:
    err = given_up(task.path, answer)
    return Unreadable(str(task.path), err.message, err.remedy)
