"""Interruptions (SIGINT, SIGTERM): work ends at once while there is nothing to keep, then with the best it has."""

import signal
import sys
import threading
from collections.abc import Iterator
from contextlib import contextmanager
from types import FrameType, TracebackType

_ASKS = (signal.SIGINT, signal.SIGTERM)
_AGAIN_S = 0.05
"""How soon to ask again where the exception was lost."""
_raised: list[int] = []
"""Signals answered by an exception that has not come to an end yet: a library may make another error of it."""


class Stop:
    """Says whether the work was asked to end.

    While it has nothing to keep, and the second time it is asked, it ends at once: by `KeyboardInterrupt`, whose
    argument is the signal.
    """

    def __init__(self) -> None:
        self.signal: int | None = None
        self._keeping = self._lost = False

    def __call__(self) -> bool:
        """Whether to end."""
        return self.signal is not None

    def keep(self, _result: object) -> None:
        """Take note that there is a result: from now on the work is to end by itself, and write it."""
        self._keeping = True

    def ask(self, number: int, _frame: FrameType | None) -> None:
        """Take a signal; noted first, for an exception may be lost in what runs just then."""
        again, self.signal = self.signal is not None and not self._lost, number
        self._lost = False
        if again or not self._keeping:
            end_at_once(number)

    def ask_again(self, what: "sys.UnraisableHookArgs") -> None:
        """Take note that a library has swallowed the exception, in a callback of its own, and ask again in a moment."""
        if self.signal is None or not isinstance(what.exc_value, KeyboardInterrupt):
            sys.__unraisablehook__(what)
            return
        self._lost = True
        later = threading.Timer(_AGAIN_S, self._raise_again)
        later.daemon = True
        later.start()

    def _raise_again(self) -> None:
        if self._lost and self.signal is not None:
            signal.raise_signal(self.signal)

    def end(self) -> None:
        """Ask no more: the work has ended."""
        self._lost = False

    @property
    def exit_status(self) -> int:
        """The status that says by which signal the work was ended."""
        return status_of(self.signal or signal.SIGINT)


def status_of(number: int) -> int:
    """128 + the signal, as shells count: 130 after SIGINT, 143 after SIGTERM."""
    return 128 + number


def end_at_once(number: int, _frame: FrameType | None = None) -> None:
    """Answer a signal by `KeyboardInterrupt`, so that workers are stopped and files cleared away on the way out."""
    _raised.append(number)
    raise KeyboardInterrupt(number)


def ended_by() -> int | None:
    """Return the signal that work has just been ended by, whatever error came of it; None where there was none."""
    number = _raised[-1] if _raised else None
    _raised.clear()
    return number


def answer_interruptions() -> None:
    """Turn SIGINT and SIGTERM into `KeyboardInterrupt`, and show nothing where a library prints that one."""
    for number in _ASKS:
        signal.signal(number, end_at_once)
    sys.excepthook = _show


def _show(kind: type[BaseException], error: BaseException, trace: TracebackType | None) -> None:
    if not issubclass(kind, KeyboardInterrupt):
        sys.__excepthook__(kind, error, trace)


@contextmanager
def stoppable() -> Iterator[Stop]:
    """Turn SIGINT and SIGTERM into `Stop` while the work goes on."""
    stop = Stop()
    before = {number: signal.signal(number, stop.ask) for number in _ASKS}
    hook, sys.unraisablehook = sys.unraisablehook, stop.ask_again
    try:
        yield stop
    finally:
        stop.end()
        sys.unraisablehook = hook
        for number, handler in before.items():
            signal.signal(number, handler)
