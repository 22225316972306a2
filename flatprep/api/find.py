"""Which drawings are meant by paths, and what the cut list beside them says."""

from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from flatprep.base.errors import JobError
from flatprep.job.cutlist import CutRow, find_cutlist, load_cutlist


@dataclass(frozen=True, slots=True)
class Found:
    """A drawing that was asked for, with its row of a cut list where there is one."""

    path: Path
    row: CutRow | None = None


@dataclass(frozen=True, slots=True)
class Missing:
    """A path that gives no drawing, and why."""

    path: Path
    why: str
    remedy: str


def find_drawings(paths: Sequence[Path]) -> tuple[list[Found], list[Missing]]:
    """Look through files and, through all levels, folders for drawings.

    Raises
    ------
    JobError
        When a cut list has a mistake, or names a drawing that is not there.
    """
    found: list[Found] = []
    missing: list[Missing] = []
    for path in paths:
        if path.is_dir():
            drawings = sorted(p for p in path.rglob("*") if p.suffix.lower() == ".dxf" and p.is_file())
            if not drawings:
                missing.append(
                    Missing(path, "no .dxf drawing in this folder", "give the folder that holds the drawings")
                )
            found += _with_rows(path, drawings)
        elif path.exists():
            found.append(Found(path))
        else:
            missing.append(Missing(path, "no such file or folder", "check the path"))
    return found, missing


def _with_rows(folder: Path, drawings: Sequence[Path]) -> list[Found]:
    listing = find_cutlist(folder)
    if listing is None:
        return [Found(p) for p in drawings]
    rows = {(folder / row.file).resolve(): row for row in load_cutlist(listing)}
    known = {p.resolve() for p in drawings}
    for place, row in rows.items():
        if place not in known:
            raise JobError(
                f"{listing}: line {row.line}: no drawing {row.file!r}", "mend the name, or take the line out"
            )
    return [Found(p, rows.get(p.resolve())) for p in drawings]
