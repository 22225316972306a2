"""Progress as one line on a terminal's stderr; silent elsewhere."""

import shutil
import sys
import time
from collections.abc import Iterator
from contextlib import contextmanager

from flatprep.base.progress import Progress, Silent
from flatprep.cli.talk import Talk, level

_FIRST_AFTER_S = 1.0
_EVERY_S = 0.1


class _Line:
    """Redraws one line, at most ten times a second, and only for work that lasts over a second."""

    def __init__(self) -> None:
        self._start = time.monotonic()
        self._last = 0.0
        self._drawn = 0

    def update(self, what: str, *, done: float | None = None, total: float | None = None) -> None:
        """Draw the line anew."""
        now = time.monotonic()
        if now - self._start < _FIRST_AFTER_S or now - self._last < _EVERY_S:
            return
        self._last = now
        share = "" if done is None or not total else f"{done:.0f} of {total:.0f} "
        text = f"{share}{what}"[: shutil.get_terminal_size().columns - 1]
        sys.stderr.write("\r" + text.ljust(self._drawn))
        sys.stderr.flush()
        self._drawn = len(text)

    def clear(self) -> None:
        """Leave the line empty."""
        if self._drawn:
            sys.stderr.write("\r" + " " * self._drawn + "\r")
            sys.stderr.flush()


@contextmanager
def progress_line() -> Iterator[Progress]:
    """Give a progress that a terminal shows, unless it is to be quiet; the line is gone when the work ends."""
    if not sys.stderr.isatty() or level() is Talk.QUIET:
        yield Silent()
        return
    line = _Line()
    try:
        yield line
    finally:
        line.clear()
