"""Repair: a clean copy of an untidy drawing, written beside it or elsewhere, never over it."""

from dataclasses import dataclass
from pathlib import Path

from flatprep.api.given_up import given_up
from flatprep.base.errors import FlatprepError, UsageError
from flatprep.base.files import write_whole
from flatprep.base.workers import Caps, Lost, Pool
from flatprep.repair.clean import repair
from flatprep.repair.values import Repaired, RepairOptions

_SECONDS = 20.0
_SECONDS_A_MEGABYTE = 60.0
"""A drawing may take `_SECONDS`, and more the larger its file: it is read several times over."""


@dataclass(frozen=True, slots=True)
class _Task:
    path: Path
    options: RepairOptions


def repair_file(path: Path, out: Path, options: RepairOptions | None = None) -> Repaired:
    """Write a clean copy of a drawing; it is read in a process that can be stopped.

    Parameters
    ----------
    path
        A DXF file.
    out
        Where the clean drawing goes; an older file there is replaced.
    options
        See `flatprep.repair.values.RepairOptions`.

    Raises
    ------
    UsageError
        When `out` is the drawing itself.
    DrawingError
        When the drawing cannot be read.
    OutputError
        When `out` cannot be written.
    """
    if is_same_file(path, out):
        raise UsageError(f"{out}: is the drawing itself, which is never written over", "give another file with --out")
    task = _Task(path, options or RepairOptions())
    (answer,) = Pool(_repaired, Caps(_patience), 1).run([task])
    if isinstance(answer, Lost):
        raise given_up(path, answer)
    if isinstance(answer, FlatprepError):
        raise answer
    write_whole(out, answer.text)
    return answer


def is_same_file(path: Path, out: Path) -> bool:
    """Tell whether two paths are one file, by whatever name or link."""
    try:
        return path.samefile(out)
    except OSError:
        return path.resolve() == out.resolve()


def _repaired(task: _Task) -> Repaired | FlatprepError:
    try:
        return repair(task.path, task.options)
    except FlatprepError as err:
        return err


def _patience(task: _Task) -> float:
    try:
        size = task.path.stat().st_size
    except OSError:
        size = 0
    return _SECONDS + _SECONDS_A_MEGABYTE * size / 1e6
