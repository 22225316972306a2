"""Interruptions (SIGINT, SIGTERM): work ends at once while there is nothing to keep, then with the best it has."""

import signal
from collections.abc import Iterator
from contextlib import contextmanager
from types import FrameType

_ASKS = (signal.SIGINT, signal.SIGTERM)


class Stop:
    """Says whether the work was asked to end.

    While it has nothing to keep, and the second time it is asked, it ends at once: by `KeyboardInterrupt`, whose
    argument is the signal.
    """

    def __init__(self) -> None:
        self.signal: int | None = None
        self._keeping = False

    def __call__(self) -> bool:
        """Whether to end."""
        return self.signal is not None

    def keep(self, _result: object) -> None:
        """Take note that there is a result: from now on the work is to end by itself, and write it."""
        self._keeping = True

    def ask(self, number: int, _frame: FrameType | None) -> None:
        """Take a signal; noted first, for an exception may be lost in what runs just then."""
        again, self.signal = self.signal is not None, number
        if again or not self._keeping:
            raise KeyboardInterrupt(number)

    @property
    def exit_status(self) -> int:
        """The status that says by which signal the work was ended."""
        return status_of(self.signal or signal.SIGINT)


def status_of(number: int) -> int:
    """128 + the signal, as shells count: 130 after SIGINT, 143 after SIGTERM."""
    return 128 + number


def end_at_once(number: int, _frame: FrameType | None) -> None:
    """Answer a signal by `KeyboardInterrupt`, so that workers are stopped and files cleared away on the way out."""
    raise KeyboardInterrupt(number)


def answer_interruptions() -> None:
    """Turn SIGINT and SIGTERM into `KeyboardInterrupt`."""
    for number in _ASKS:
        signal.signal(number, end_at_once)


@contextmanager
def stoppable() -> Iterator[Stop]:
    """Turn SIGINT and SIGTERM into `Stop` while the work goes on."""
    stop = Stop()
    before = {number: signal.signal(number, stop.ask) for number in _ASKS}
    try:
        yield stop
    finally:
        for number, handler in before.items():
            signal.signal(number, handler)
