"""What a search may spend: wall time, or steps that do not depend on the machine."""

import time
from collections.abc import Callable

EVALUATIONS_A_STEP = 10_000


class Clock:
    """Counts down seconds or steps; a step is 10 000 positions tried for one piece.

    Parameters
    ----------
    seconds
        Wall time from now on; not looked at when `steps` is given.
    steps
        A budget that makes the result the same on every machine.
    now
        Where the time comes from.
    stop
        Asked whenever the budget is: True ends the search early.
    """

    def __init__(
        self,
        seconds: float = 30.0,
        steps: int | None = None,
        now: Callable[[], float] = time.monotonic,
        stop: Callable[[], bool] = lambda: False,
    ) -> None:
        self._now = now
        self.stopped = stop
        self._start = now()
        self.seconds = seconds
        self.steps = steps
        self.evaluations = 0

    def spend(self, evaluations: int) -> None:
        """Note positions tried."""
        self.evaluations += evaluations

    @property
    def elapsed_s(self) -> float:
        """Wall time since the start."""
        return self._now() - self._start

    @property
    def spent(self) -> float:
        """Share of the budget that is gone, 0 to 1 or more."""
        if self.steps is not None:
            return self.evaluations / (max(self.steps, 1) * EVALUATIONS_A_STEP)
        return self.elapsed_s / max(self.seconds, 1e-9)

    def passed(self) -> bool:
        """Tell whether the budget is used up, or the search is to stop."""
        return self.spent >= 1.0 or self.stopped()
