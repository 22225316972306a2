"""Quantity breaks of a job: a nest and an estimate for each number of sets."""

from dataclasses import replace

from flatprep.api.nest import nest_job
from flatprep.api.pieces import ReadJob
from flatprep.api.work import estimate_job
from flatprep.base.progress import Progress
from flatprep.cost.breaks import bought, quantity_breaks
from flatprep.model.estimate import QuantityBreak
from flatprep.nest.problem import Budget


def break_table(read: ReadJob, budget: Budget, *, progress: Progress | None = None) -> tuple[QuantityBreak, ...]:
    """Nest the job for each number of sets of its ``[cost] breaks``, and tell what one set costs.

    Parameters
    ----------
    read
        The job with its drawings.
    budget
        For all nests together; each has its share of the time.
    progress
        Told of the nest at work.

    Notes
    -----
    Full sheets count as many as are needed, remnants as many as there are.

    Raises
    ------
    JobError
        When the job names no stock.
    """
    numbers = read.job.cost.breaks
    share = replace(budget, seconds=budget.seconds / len(numbers))
    done = []
    for sets in numbers:
        several = replace(read, job=replace(read.job, sets=sets, stock=bought(read.job.stock)))
        nested = nest_job(several, share, progress=progress)
        done.append(estimate_job(nested.read, nested.layout))
    return quantity_breaks(done)
