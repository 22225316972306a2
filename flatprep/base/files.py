"""Files are written whole or not at all."""

import os
import tempfile
from collections.abc import Iterable, Iterator
from concurrent.futures import ThreadPoolExecutor
from contextlib import contextmanager, suppress
from pathlib import Path

from flatprep.base.errors import OutputError

try:
    import fcntl
except ImportError:  # pragma: no cover - not on every system
    fcntl = None  # type: ignore[assignment]

_ASIDE, _PART = ".flatprep-", ".part"
_FLUSHED_AT_ONCE = 8
"""Files whose way to the disk is waited for together: one after the other takes three times as long."""


def write_whole(path: Path, data: str | bytes) -> None:
    """Write one file: `write_together`."""
    write_together([(path, data)])


def write_together(files: Iterable[tuple[Path, str | bytes | None]]) -> tuple[Path, ...]:
    """Write every file beside its place, then flush all to the disk; once they are there, rename them in order.

    Parameters
    ----------
    files
        Paths and what they are to hold; None removes an older file.

    Returns
    -------
    tuple of Path
        Files written.

    Raises
    ------
    OutputError
        When one of them cannot be written; older files then stay as they were.
    """
    asides: list[tuple[str | None, Path]] = []
    try:
        for path, data in files:
            with _told(path):
                asides.append((None if data is None else _aside(path, data), path))
        with ThreadPoolExecutor(_FLUSHED_AT_ONCE) as pool:
            for _ in pool.map(lambda made: _flush(*made), asides):
                pass  # raises what was raised there
        for number, (aside, path) in enumerate(asides):
            with _told(path):
                _put(aside, path)
            asides[number] = (None, path)
    finally:
        for aside, _ in asides:
            if aside is not None:
                _drop(aside)
    return tuple(path for path, written in ((p, p.exists()) for _, p in asides) if written)


def _aside(path: Path, data: str | bytes) -> str:
    """Write a file beside `path`; its name."""
    handle, aside = tempfile.mkstemp(prefix=_ASIDE, suffix=_PART, dir=path.parent)
    try:
        with os.fdopen(handle, "wb") as out:
            out.write(data.encode("utf-8", "replace") if isinstance(data, str) else data)
        os.chmod(aside, 0o666 & ~_umask())
    except BaseException:
        _drop(aside)
        raise
    return aside


def _flush(aside: str | None, path: Path) -> None:
    """Wait until what `path` is to hold is on the disk; done for all files at the end, most wait for nothing."""
    if aside is not None:
        with _told(path), open(aside, "rb+") as out:
            os.fsync(out.fileno())


def _put(aside: str | None, path: Path) -> None:
    if aside is None:
        path.unlink(missing_ok=True)
    else:
        os.replace(aside, path)


def _drop(aside: str) -> None:
    with suppress(OSError):
        os.unlink(aside)


@contextmanager
def _told(path: Path) -> Iterator[None]:
    try:
        yield
    except OSError as err:
        raise OutputError(
            f"{path}: cannot be written ({err.strerror or err})", "choose another folder, or make room"
        ) from err


def make_folder(path: Path) -> None:
    """Make `path` and its parents.

    Raises
    ------
    OutputError
        When it cannot be made or cannot be written into.
    """
    try:
        path.mkdir(parents=True, exist_ok=True)
        with tempfile.NamedTemporaryFile(prefix=_ASIDE, suffix=_PART, dir=path):
            pass
    except OSError as err:
        raise OutputError(
            f"{path}: cannot be written into ({err.strerror or err})", "choose another folder with --out"
        ) from err


@contextmanager
def claimed(folder: Path) -> Iterator[None]:
    """Make a folder and keep other runs out of it; the claim ends with the process, however it ends.

    What a run that was killed had not yet finished to write is cleared away.

    Raises
    ------
    OutputError
        When it cannot be written into, or another run is writing into it.
    """
    make_folder(folder)
    if fcntl is None:  # a system without such locks
        yield
        return
    handle = os.open(folder, os.O_RDONLY)
    try:
        fcntl.flock(handle, fcntl.LOCK_EX | fcntl.LOCK_NB)
    except OSError as err:
        os.close(handle)
        raise OutputError(f"{folder}: another run is writing into it", "wait for it, or choose another folder") from err
    try:
        _clear(folder)
        yield
    finally:
        os.close(handle)


def _clear(folder: Path) -> None:
    for left in folder.rglob(f"{_ASIDE}*{_PART}"):
        with suppress(OSError):
            left.unlink()


def _umask() -> int:
    mask = os.umask(0)
    os.umask(mask)
    return mask
