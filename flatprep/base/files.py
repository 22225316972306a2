"""Files are written whole or not at all."""

import os
import tempfile
from collections.abc import Iterator
from contextlib import contextmanager, suppress
from pathlib import Path

from flatprep.base.errors import OutputError

try:
    import fcntl
except ImportError:  # pragma: no cover - not on every system
    fcntl = None  # type: ignore[assignment]

_ASIDE, _PART = ".flatprep-", ".part"


def write_whole(path: Path, data: str | bytes) -> None:
    """Write `data` beside `path`, flush it to the disk, then rename it over `path`.

    Raises
    ------
    OutputError
        When the folder or the file cannot be written; an older file then stays as it was.
    """
    raw = data.encode("utf-8", "replace") if isinstance(data, str) else data
    aside = None
    try:
        handle, aside = tempfile.mkstemp(prefix=_ASIDE, suffix=_PART, dir=path.parent)
        with os.fdopen(handle, "wb") as out:
            out.write(raw)
            out.flush()
            os.fsync(out.fileno())
        os.chmod(aside, 0o666 & ~_umask())
        os.replace(aside, path)
        aside = None
    except OSError as err:
        raise OutputError(
            f"{path}: cannot be written ({err.strerror or err})", "choose another folder, or make room"
        ) from err
    finally:
        if aside is not None:
            with suppress(OSError):
                os.unlink(aside)


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
