"""Checklist and estimate of a job."""

from collections.abc import Sequence

from flatprep.api.pieces import Piece, ReadJob, bench_parts, quantity
from flatprep.bench.checklist import checklist
from flatprep.cost.estimate import Ask, Costed, estimate
from flatprep.cost.mass import bench_removed_mm3
from flatprep.job.values import Job
from flatprep.model.estimate import Estimate
from flatprep.model.layout import Layout
from flatprep.model.work import Checklist, Step


def checklist_job(read: ReadJob) -> Checklist:
    """List the bench work of a job's parts.

    Raises
    ------
    JobError
        When work names holes, threads or fits that do not exist.
    """
    return checklist(bench_parts(read), read.job.joints)


def estimate_job(read: ReadJob, layout: Layout | None, bench: Checklist | None = None) -> Estimate:
    """Work out mass, cut length and material cost; without a layout the cost stays open.

    Parameters
    ----------
    bench
        Of `checklist_job`, where it is known already.

    Raises
    ------
    JobError
        When work names holes, threads or fits that do not exist, or the layout is another job's.
    """
    job = read.job
    steps = {done.name: done.steps for done in (bench or checklist_job(read)).parts}
    items = [_costed(job, piece, steps.get(piece.name, ())) for piece in read.pieces]
    ask = Ask(job.sets, job.mass_limit_kg, job.currency, job.cost)
    return estimate(items, job.stock, layout, ask)


def _costed(job: Job, piece: Piece, steps: Sequence[Step]) -> Costed:
    ask = piece.ask
    removed = bench_removed_mm3(piece.part, steps, ask.thickness_mm) if ask.thickness_mm else 0.0
    return Costed(piece.part, quantity(job, ask), ask.material, ask.thickness_mm, ask.process, removed)
