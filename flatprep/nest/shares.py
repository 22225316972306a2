"""How the groups of a job share what may be spent: by difficulty, the easy ones first, and nothing is left lying.

Each group gets its part, by weight, of what is left when its turn comes. One that cannot gain any more (its bound is
met) leaves the rest of its part to those after it, which are harder; and what the last one leaves goes round again
among those that used theirs up.
"""

import time
from collections.abc import Callable, Sequence
from dataclasses import dataclass

from flatprep.nest.clock import EVALUATIONS_A_STEP, Clock

LEAST_S = 0.2
"""Less wall time than this is not worth another search."""

Work = Callable[[int, Clock, int], bool]
"""Improve a group (its number) with a clock, in a round (from 0); tell whether more time could be of use."""


@dataclass(frozen=True, slots=True)
class Means:
    """What may be spent in all.

    Attributes
    ----------
    until : float
        Time (monotonic, s) at which it ends; not looked at where `steps` is given.
    steps : int or None
    stopped : callable
        True ends it early.
    """

    until: float
    steps: int | None
    stopped: Callable[[], bool]

    def part(self, share: float, spent: int) -> Clock | None:
        """Clock of a share of what is left after so many evaluations; None where nothing worth it is left."""
        if self.stopped():
            return None
        if self.steps is not None:
            left = self.steps - spent // EVALUATIONS_A_STEP
            return Clock(steps=max(1, int(left * share)), stop=self.stopped) if left > 0 else None
        seconds = self.until - time.monotonic()
        return Clock(seconds * share, stop=self.stopped) if seconds > LEAST_S else None


def share_out(weights: Sequence[float], means: Means, work: Work) -> None:
    """Let groups work in turn until what may be spent is spent, or none of them can gain any more.

    Parameters
    ----------
    weights
        Difficulty of each group; 0 for one with nothing to gain.
    """
    waiting = sorted((n for n, weight in enumerate(weights) if weight > 0.0), key=lambda n: weights[n])
    spent = turn = 0
    while waiting:
        unmet = []
        for place, number in enumerate(waiting):
            clock = means.part(weights[number] / sum(weights[n] for n in waiting[place:]), spent)
            if clock is None:
                return
            if work(number, clock, turn):
                unmet.append(number)
            spent += clock.evaluations
        waiting, turn = unmet, turn + 1
