"""Wait until one of a job's files changes."""

import time
from collections.abc import Iterable, Mapping
from contextlib import suppress
from pathlib import Path

from flatprep.base.errors import FlatprepError
from flatprep.job.context import JobOptions
from flatprep.job.load import load_job
from flatprep.job.rack import LIST

_EVERY_S = 0.5
Stamps = Mapping[Path, tuple[int, int] | None]


def inputs(job_file: Path, said: JobOptions) -> tuple[Path, ...]:
    """Files that a job reads; the job alone while it has a mistake."""
    files = [job_file, *job_file.parent.glob("*.csv"), *(p for f in said.profile_folders for p in f.rglob("*.toml"))]
    with suppress(FlatprepError):
        job = load_job(job_file, said)
        files += [part.drawing for part in job.parts]
        files += [*job.rack.drawings, job.rack.folder / LIST, job.rack.folder] if job.rack else []
        files += [stock.outline for stock in job.stock if isinstance(stock.outline, Path)]
    return tuple(dict.fromkeys(files))


def stamps(files: Iterable[Path]) -> Stamps:
    """Return what tells a file from its next version: time and size; None where there is no such file."""
    return {path: _stamp(path) for path in files}


def wait_for_change(before: Stamps, *, every_s: float = _EVERY_S) -> None:
    """Return once a file is no longer as it was, has come or gone, and has then been left alone for a moment.

    A program that saves a drawing writes it in pieces: half a file is not to be read.
    """
    while (now := stamps(before)) == before:
        time.sleep(every_s)
    while True:
        time.sleep(every_s)
        later = stamps(before)
        if later == now:
            return
        now = later


def _stamp(path: Path) -> tuple[int, int] | None:
    try:
        status = path.stat()
    except OSError:
        return None
    return status.st_mtime_ns, status.st_size
