"""One search in one process."""

from collections.abc import Callable

import numpy as np

from flatprep.nest.bounds import Bounds
from flatprep.nest.clock import Clock
from flatprep.nest.engine import Engine, Spots
from flatprep.nest.squeeze import Squeeze
from flatprep.nest.task import Task

Exchange = Callable[[Spots], Spots]


class StartOverlapsError(ValueError):
    """The layout to begin with overlaps, as the search sees its outlines."""


def alone(best: Spots) -> Spots:
    """Exchange with nobody."""
    return best


def run(task: Task, clock: Clock, seed: int, found: Callable[[Spots], None], exchange: Exchange = alone) -> Spots:
    """Search until the clock has passed; return the best layout.

    Parameters
    ----------
    found
        Told of each layout that is better than the one before.
    exchange
        Called between tries with the best layout; returns a better one of another process, or the same.

    Raises
    ------
    StartOverlapsError
    """
    rng = np.random.default_rng(seed)
    engine = Engine(task.outlines, task.free, task.field, task.start, clock, rng)
    if not engine.is_free():
        raise StartOverlapsError("the layout to begin with overlaps")
    return Squeeze(engine, task.start, Bounds.of(engine, task.area_mm2), found, exchange).run()
