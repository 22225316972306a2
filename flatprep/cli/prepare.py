"""``flatprep prepare``."""

from dataclasses import replace
from pathlib import Path

import click

from flatprep.api.prepare import Prepared, prepare_job, write_prepared
from flatprep.api.shared import check_forms, with_forms
from flatprep.base.errors import ExitStatus, FlatprepError
from flatprep.base.files import claimed
from flatprep.cli.interrupt import stoppable
from flatprep.cli.jobs import job_argument, read_drawings, say_of_nest
from flatprep.cli.options import cutting_wishes, other_forms, rack_option, said_about_parts, search_budget
from flatprep.cli.progress import progress_line
from flatprep.cli.talk import say
from flatprep.cli.watch import inputs, stamps, wait_for_change
from flatprep.drawing.forms import Form
from flatprep.job.context import JobOptions
from flatprep.job.load import load_job
from flatprep.model.finding import Severity
from flatprep.nest.problem import Budget
from flatprep.report.figures import counted

_NAMED = 5
"""So many parts without a place are named."""


@click.command("prepare")
@job_argument
@click.option("--out", "folder", required=True, type=click.Path(path_type=Path), help="folder for everything")
@click.option(
    "--watch", is_flag=True, help="run again whenever the job or one of its drawings changes; ends with Ctrl-C"
)
@rack_option
@cutting_wishes
@said_about_parts
@search_budget
@other_forms
@click.pass_context
def command(
    ctx: click.Context,
    /,
    job_file: Path,
    folder: Path,
    watch: bool,
    budget: Budget,
    said: JobOptions,
    also: tuple[Form, ...],
) -> None:
    """Check, nest, list the bench work and estimate a job, all into one folder with report.html.

    Ends with 0 when there is nothing to look at, else 1. Stopped by SIGINT or SIGTERM it writes the best layout so far
    and ends with 130 or 143; before there is a first one, it leaves the folder as it was.
    """
    if not watch:
        ctx.exit(_once(job_file, folder, budget, said, also))
    while True:
        before = stamps(inputs(job_file, said))  # what is saved while a run lasts counts for the next one
        try:
            status = _once(job_file, folder, budget, said, also)
        except FlatprepError as err:
            say(f"error: {err.message}", err=True)
            status = err.exit_status
        if status > ExitStatus.UNUSABLE:
            ctx.exit(status)
        say("waiting for a change", err=True)
        wait_for_change(before)


def _once(job_file: Path, folder: Path, budget: Budget, said: JobOptions, also: tuple[Form, ...]) -> int:
    job = load_job(job_file, said)
    with claimed(folder), progress_line() as progress:
        read = read_drawings(job, budget.jobs, progress)
        check_forms(read, also)
        with stoppable() as stop:
            done = prepare_job(read, budget, progress=progress, on_better=stop.keep, stop=stop)
            if done.nested:
                nested = with_forms(done.nested, also)
                say_of_nest(nested)
                done = replace(done, nested=nested)
            write_prepared(done, folder)
    say(summary(done, folder))
    status = ExitStatus.FINDINGS if done.loud or done.unplaced else ExitStatus.CLEAN
    return stop.exit_status if stop() else status


def summary(done: Prepared, folder: Path) -> str:
    """Say it in a few lines for people; the last one names what asks for a look."""
    changes = sum(len(piece.changes) for piece in done.read.pieces)
    sheets = len(done.nested.layout.sheets) if done.nested else 0
    money, mass = done.estimate.material_cost, done.estimate.mass_kg
    lines = [
        f"{counted(len(done.bundle.cards), 'part')} on {counted(sheets, 'sheet')}",
        "mass of a set: not known" if mass is None else f"mass of a set: {mass:.3g} kg",
        "material cost: not known"
        if money is None
        else f"material cost: {money:.2f} {done.estimate.currency or ''}".rstrip(),
        *([f"{counted(changes, 'change')} against the drawings, told on the parts' pages"] if changes else []),
        *_left_out(done),
        f"report: {folder / 'report.html'}",
    ]
    errors, warnings = done.bundle.count(Severity.ERROR), done.bundle.count(Severity.WARNING)
    unreadable = len(done.read.report.unreadable)
    said = [f"{counted(errors, 'error')}, {counted(warnings, 'warning')}"] if errors or warnings else []
    said += [f"{counted(unreadable, 'drawing')} not readable"] if unreadable else []
    said += [f"{counted(done.unplaced, 'piece')} not placed"] if done.unplaced else []
    return "\n".join([*lines, "to look at: " + "; ".join(said) if said else "nothing to look at"])


def _left_out(done: Prepared) -> list[str]:
    """Name the first parts without a place, and why."""
    unplaced = done.nested.layout.unplaced if done.nested else ()
    lines = [f"NOT PLACED: {u.count} x {u.part}: {u.why}" for u in unplaced[:_NAMED]]
    return [*lines, f"NOT PLACED: {len(unplaced) - _NAMED} more parts"] if len(unplaced) > _NAMED else lines
