"""Draft a job file from a folder of drawings."""

import os
from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from flatprep.api.find import Found, find_drawings
from flatprep.base.errors import UsageError
from flatprep.job.context import JobOptions
from flatprep.job.cutlist import find_cutlist
from flatprep.job.guess import NameGuess, guess_from_name
from flatprep.profile.gauges import parse_thickness_mm
from flatprep.profile.material import Material
from flatprep.profile.material_load import all_materials, load_material
from flatprep.profile.process_load import load_process
from flatprep.report.draft_toml import Draft, DraftPart, DraftStock, stock_name

SHEET_MM = {"wood": (1525, 1525), "acrylic": (1000, 600), "plastic": (1220, 610)}
"""Usual sheets by family, common practice; the others are metal."""
METAL_SHEET_MM = (2000, 1000)


@dataclass(frozen=True, slots=True)
class _Ground:
    """What every part is drafted on; `fill` is what was said for parts whose names tell nothing."""

    folder: Path
    target: Path
    materials: tuple[Material, ...]
    fill: NameGuess


def draft_job(folder: Path, target: Path, said: JobOptions | None = None) -> Draft:
    """Guess a job from the names of a folder's drawings.

    Parameters
    ----------
    folder
        Searched through all levels.
    target
        The folder that the job file will stand in: its paths are seen from there.
    said
        Process, own profiles, and the material and thickness of the parts whose names tell none.

    Raises
    ------
    FlatprepError
        When there is no drawing, a cut list has a mistake, or there is no such process or material.
    """
    said = said or JobOptions()
    if said.process:
        load_process(said.process, said.profile_folders)
    found, missing = find_drawings([folder])
    if not found:
        raise UsageError(f"{folder}: {missing[0].why}", missing[0].remedy)
    fill = _said(said)
    materials = all_materials(said.profile_folders)
    listed = find_cutlist(folder)
    parts = _parts([one for one in found if one.row is None], _Ground(folder, target, materials, fill))
    return Draft(
        name=folder.resolve().name,
        process=_process(said.process, target),
        parts=parts,
        stock=_stock(parts, materials),
        cutlist=_seen_from(target, listed) if listed else None,
    )


def _said(said: JobOptions) -> NameGuess:
    """Material and thickness for the parts whose names tell none, checked."""
    material = load_material(said.material, said.profile_folders) if said.material else None
    if said.thickness:
        parse_thickness_mm(said.thickness, "mm", material)
    return NameGuess(said.thickness, None, material.id if material else None)


def _process(said: str | None, target: Path) -> str | None:
    return _seen_from(target, Path(said)) if said and said.endswith(".toml") else said


def _parts(found: Sequence[Found], ground: _Ground) -> tuple[DraftPart, ...]:
    stems = Counter(one.path.stem for one in found)
    return tuple(_part(one.path, ground, own=stems[one.path.stem] == 1) for one in found)


def _part(path: Path, ground: _Ground, *, own: bool) -> DraftPart:
    guess = guess_from_name(path.stem, ground.materials)
    told = {"material": guess.material, "thickness": guess.thickness, "quantity": guess.quantity}
    return DraftPart(
        drawing=_seen_from(ground.target, path),
        material=guess.material or ground.fill.material,
        thickness=guess.thickness or ground.fill.thickness,
        quantity=guess.quantity or 1,
        guessed=frozenset(key for key, value in told.items() if value is not None),
        name=None if own else _long_name(path, ground.folder),
    )


def _long_name(path: Path, folder: Path) -> str:
    return "_".join(path.relative_to(folder).with_suffix("").parts)


def _stock(parts: Sequence[DraftPart], materials: Sequence[Material]) -> tuple[DraftStock, ...]:
    family = {material.id: material.family for material in materials}
    needed = {(p.material, p.thickness): None for p in parts if p.material and p.thickness}  # a dict keeps the order
    return tuple(
        DraftStock(
            stock_name(material, thickness), material, thickness, *SHEET_MM.get(family[material], METAL_SHEET_MM)
        )
        for material, thickness in needed
    )


def _seen_from(folder: Path, path: Path) -> str:
    return Path(os.path.relpath(path, folder)).as_posix()
