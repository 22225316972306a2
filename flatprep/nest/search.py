"""The search's front door: a task and a budget in, the best layout out.

Lengths in mm, turns in degrees. Touching is allowed, overlap is not: each layout that is reported was tested on the
exact outlines, drawn in by 2e-7 mm.
"""

from collections.abc import Callable

from flatprep.nest.clock import Clock
from flatprep.nest.engine import Spots
from flatprep.nest.parallel import run_jobs
from flatprep.nest.shapes import Best
from flatprep.nest.solo import run
from flatprep.nest.task import Task, sheets_task, strip_task

__all__ = ["search", "sheets_task", "strip_task"]


def search(task: Task, clock: Clock, seed: int, report: Callable[[Best], None], jobs: int = 1) -> Best:
    """Search for the best layout of a task until the clock has passed.

    Parameters
    ----------
    task
        Of `strip_task` or `sheets_task`.
    clock
        What may be spent; with a budget in steps (of each process) the result depends on nothing but the task, the
        seed and the number of processes.
    seed
        Of all chance.
    report
        Called with the first layout at once, then with each better one, always in this process.
    jobs
        Processes.

    Raises
    ------
    StartOverlapsError
        The task's layout to begin with overlaps.
    """
    shown = [task.start]

    def show(spots: Spots) -> None:
        if spots.cost < shown[-1].cost:
            shown.append(spots)
            report(task.best(spots))

    report(task.best(task.start))
    best = run(task, clock, seed, show) if jobs <= 1 else run_jobs(task, clock, seed, show, jobs)
    show(best)
    return task.best(best)
