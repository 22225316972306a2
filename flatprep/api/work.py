"""Checklist and estimate of a job."""

from flatprep.api.pieces import ReadJob, bench_parts, quantity
from flatprep.bench.checklist import checklist
from flatprep.cost.estimate import Ask, Costed, estimate
from flatprep.model.estimate import Estimate
from flatprep.model.layout import Layout
from flatprep.model.work import Checklist


def checklist_job(read: ReadJob) -> Checklist:
    """List the bench work of a job's parts.

    Raises
    ------
    JobError
        When work names holes, threads or fits that do not exist.
    """
    return checklist(bench_parts(read))


def estimate_job(read: ReadJob, layout: Layout | None) -> Estimate:
    """Work out mass, cut length and material cost; without a layout the cost stays open."""
    job = read.job
    items = [
        Costed(piece.part, quantity(job, piece.ask), piece.ask.material, piece.ask.thickness_mm, piece.ask.process)
        for piece in read.pieces
    ]
    ask = Ask(job.sets, job.mass_limit_kg, job.currency, job.cost)
    return estimate(items, job.stock, layout, ask)
