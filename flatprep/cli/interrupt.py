"""An interruption (SIGINT, SIGTERM) that lets a search end with what it has."""

import signal
from collections.abc import Iterator
from contextlib import contextmanager
from types import FrameType


class Stop:
    """Says whether the work was asked to end; the second time it is asked, it ends at once."""

    def __init__(self) -> None:
        self.signal: int | None = None

    def __call__(self) -> bool:
        """Whether to end."""
        return self.signal is not None

    def ask(self, number: int, _frame: FrameType | None) -> None:
        """Take a signal."""
        if self.signal is not None:
            raise KeyboardInterrupt
        self.signal = number

    @property
    def exit_status(self) -> int:
        """128 + the signal, as shells count: 130 after SIGINT, 143 after SIGTERM."""
        return 128 + (self.signal or signal.SIGINT)


@contextmanager
def stoppable() -> Iterator[Stop]:
    """Turn SIGINT and SIGTERM into `Stop` while the work goes on."""
    stop = Stop()
    numbers = (signal.SIGINT, signal.SIGTERM)
    before = {number: signal.signal(number, stop.ask) for number in numbers}
    try:
        yield stop
    finally:
        for number, handler in before.items():
            signal.signal(number, handler)
