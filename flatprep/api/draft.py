"""Draft a job file from a folder of drawings."""

import os
from collections import Counter
from collections.abc import Sequence
from pathlib import Path

from flatprep.api.find import Found, find_drawings
from flatprep.base.errors import UsageError
from flatprep.job.cutlist import find_cutlist
from flatprep.job.guess import guess_from_name
from flatprep.profile.material import Material
from flatprep.profile.material_load import all_materials
from flatprep.profile.process_load import load_process
from flatprep.report.draft_toml import Draft, DraftPart, DraftStock, stock_name

SHEET_MM = {"wood": (1525, 1525), "acrylic": (1000, 600), "plastic": (1220, 610)}
"""Usual sheets by family, common practice; the others are metal."""
METAL_SHEET_MM = (2000, 1000)


def draft_job(folder: Path, target: Path, *, process: str | None = None, profiles: Sequence[Path] = ()) -> Draft:
    """Guess a job from the names of a folder's drawings.

    Parameters
    ----------
    folder
        Searched through all levels.
    target
        The folder that the job file will stand in: its paths are seen from there.
    process
        Id or file of a process profile; checked here.
    profiles
        Own profiles.

    Raises
    ------
    FlatprepError
        When there is no drawing, a cut list has a mistake, or there is no such process.
    """
    if process:
        load_process(process, profiles)
    found, missing = find_drawings([folder])
    if not found:
        raise UsageError(f"{folder}: {missing[0].why}", missing[0].remedy)
    materials = all_materials(profiles)
    listed = find_cutlist(folder)
    parts = _parts([one for one in found if one.row is None], folder, target, materials)
    return Draft(
        name=folder.resolve().name,
        process=_seen_from(target, Path(process)) if process and process.endswith(".toml") else process,
        parts=parts,
        stock=_stock(parts, materials),
        cutlist=_seen_from(target, listed) if listed else None,
    )


def _parts(found: Sequence[Found], folder: Path, target: Path, materials: Sequence[Material]) -> tuple[DraftPart, ...]:
    stems = Counter(one.path.stem for one in found)
    return tuple(
        DraftPart(
            drawing=_seen_from(target, one.path),
            guess=guess_from_name(one.path.stem, materials),
            name=_long_name(one.path, folder) if stems[one.path.stem] > 1 else None,
        )
        for one in found
    )


def _long_name(path: Path, folder: Path) -> str:
    return "_".join(path.relative_to(folder).with_suffix("").parts)


def _stock(parts: Sequence[DraftPart], materials: Sequence[Material]) -> tuple[DraftStock, ...]:
    family = {material.id: material.family for material in materials}
    needed = {
        (p.guess.material, p.guess.thickness): None for p in parts if p.guess.material and p.guess.thickness
    }  # a dict keeps the order
    return tuple(
        DraftStock(
            stock_name(material, thickness), material, thickness, *SHEET_MM.get(family[material], METAL_SHEET_MM)
        )
        for material, thickness in needed
    )


def _seen_from(folder: Path, path: Path) -> str:
    return Path(os.path.relpath(path, folder)).as_posix()
