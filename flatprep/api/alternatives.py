"""What a job's parts could be made of instead, each option put through lint."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from pathlib import Path

from flatprep.api.pieces import Piece, ReadJob, quantity
from flatprep.base.errors import UsageError
from flatprep.base.names import did_you_mean
from flatprep.base.progress import Progress, Silent
from flatprep.base.tolerances import DEFAULT
from flatprep.cost.alternatives import Choice, Judge, alternatives
from flatprep.cost.estimate import Costed
from flatprep.cost.prices import priced
from flatprep.job.values import Job
from flatprep.model.alternative import PartAlternatives
from flatprep.model.finding import Severity
from flatprep.profile.gauges import inch_stock_mm
from flatprep.profile.material import Material
from flatprep.profile.material_load import all_materials, load_material
from flatprep.profile.process import Process
from flatprep.profile.process_load import load_process
from flatprep.profile.where import ids
from flatprep.rules import run
from flatprep.rules.base import Context


@dataclass(frozen=True, slots=True)
class WhatIf:
    """What is asked.

    Attributes
    ----------
    parts : tuple of str
        Names; empty for all.
    materials : tuple of str
        Ids or designations to try besides those of the job; with `every` all that are known.
    folders : tuple of Path
        Own profiles.
    utilisation : float or None
        Share of the sheets that the parts take now, for the cost.
    """

    parts: tuple[str, ...] = ()
    materials: tuple[str, ...] = ()
    every: bool = False
    folders: tuple[Path, ...] = ()
    utilisation: float | None = None


def alternatives_job(
    read: ReadJob, ask: WhatIf | None = None, *, progress: Progress | None = None
) -> tuple[PartAlternatives, ...]:
    """Return the what-if table of each part; parts without material or thickness have none.

    Raises
    ------
    UsageError
        When no part is called that.
    ProfileError
        When a material is not known.
    """
    ask = ask or WhatIf()
    tell = progress or Silent()
    materials, processes = _materials(read.job, ask), _processes(read.job, ask.folders)
    out = []
    pieces = _asked(read, ask.parts)
    for number, piece in enumerate(pieces, start=1):
        tell.update("parts looked at", done=number, total=len(pieces))
        choice = Choice(materials, processes, ask.utilisation, _judge(piece))
        found = alternatives(_costed(read.job, piece), choice)
        if found is not None:
            out.append(found)
    return tuple(out)


def _asked(read: ReadJob, names: Sequence[str]) -> list[Piece]:
    known = [piece.name for piece in read.pieces]
    for name in names:
        if name not in known:
            raise UsageError(f'no part is called "{name}"', did_you_mean(name, known))
    return [piece for piece in read.pieces if not names or piece.name in names]


def _costed(job: Job, piece: Piece) -> Costed:
    ask = piece.ask
    return Costed(piece.part, quantity(job, ask), _sold(job, ask.material), ask.thickness_mm, ask.process)


def _materials(job: Job, ask: WhatIf) -> tuple[Material, ...]:
    """Return the materials of the job, those named, or all: each once, with the job's own thicknesses and prices."""
    of_job = [p.material for p in job.parts if p.material] + [s.material for s in job.stock]
    named = [load_material(name, ask.folders) for name in ask.materials]
    others = list(all_materials(ask.folders)) if ask.every else []
    once = {m.id: m for m in reversed([*of_job, *named, *others])}
    sold = [_sold(job, material) for material in sorted(once.values(), key=lambda m: m.id)]
    return priced([m for m in sold if m is not None], job.stock)


def _sold(job: Job, material: Material | None) -> Material | None:
    """Return the material with the thicknesses sold in the job's unit and those of its own stock, and its price."""
    if material is None:
        return None
    own = {s.thickness_mm for s in job.stock if s.material.id == material.id}
    usual = inch_stock_mm(material) if job.units in ("in", "ft") and material.stock_mm else material.stock_mm
    return priced([replace(material, stock_mm=tuple(sorted({*usual, *own})))], job.stock)[0]


def _processes(job: Job, folders: Sequence[Path]) -> tuple[Process, ...]:
    """Those of the job first, then all that are known."""
    of_job = {p.process.id: p.process for p in job.parts}
    return (*of_job.values(), *(load_process(i, folders) for i in ids("processes", folders) if i not in of_job))


def _judge(piece: Piece) -> Judge:
    """Return lint of one part: the ids of the rules that warn or worse, each once."""
    known: dict[tuple[str, float, str], tuple[str, ...]] = {}

    def judge(material: Material, thickness_mm: float, process: Process) -> tuple[str, ...]:
        key = (material.id, thickness_mm, process.id)
        if key not in known:
            known[key] = _loud_rules(piece, material, thickness_mm, process)
        return known[key]

    return judge


def _loud_rules(piece: Piece, material: Material, thickness_mm: float, process: Process) -> tuple[str, ...]:
    drawing = replace(piece.drawing, parts=(piece.part,))
    ask = replace(piece.ask, material=material, thickness_mm=thickness_mm, process=process)
    tol = replace(DEFAULT, join_mm=process.join_gap_mm)
    found = run(Context(drawing, process, material, thickness_mm, ask, tol))
    return tuple(dict.fromkeys(f.rule for f in found if f.severity is not Severity.NOTE))
