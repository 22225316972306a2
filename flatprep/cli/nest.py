"""``flatprep nest``."""

import json
from pathlib import Path

import click

from flatprep.api.nest import Nested, nest_job
from flatprep.api.shared import check_forms, with_forms
from flatprep.api.sheets import write_layout
from flatprep.api.stored import stored_layout
from flatprep.base.errors import ExitStatus
from flatprep.base.files import claimed
from flatprep.cli.interrupt import stoppable
from flatprep.cli.jobs import job_argument, read_drawings, say_of_nest
from flatprep.cli.options import (
    cutting_wishes,
    other_forms,
    output_format,
    rack_option,
    said_about_parts,
    search_budget,
)
from flatprep.cli.progress import progress_line
from flatprep.cli.talk import say, warn
from flatprep.drawing.forms import Form
from flatprep.job.context import JobOptions
from flatprep.job.load import load_job
from flatprep.nest.problem import Budget
from flatprep.report.layout_text import layout_text


@click.command("nest")
@job_argument
@click.option("--out", "folder", required=True, type=click.Path(path_type=Path), help="folder for layout and sheets")
@click.option("--keep", type=click.Path(path_type=Path), metavar="LAYOUT.json", help="placements that stay as they are")
@rack_option
@cutting_wishes
@said_about_parts
@search_budget
@other_forms
@output_format
@click.pass_context
def command(
    ctx: click.Context,
    /,
    job_file: Path,
    folder: Path,
    keep: Path | None,
    budget: Budget,
    form: str,
    said: JobOptions,
    also: tuple[Form, ...],
) -> None:
    """Lay a job's parts on its stock; writes layout.json and a DXF and SVG for each sheet.

    Stopped by SIGINT or SIGTERM it writes the best layout so far and ends with 130 or 143; before there is a first
    one, it leaves the folder as it was.
    """
    job = load_job(job_file, said)
    kept = stored_layout(keep) if keep else None
    with claimed(folder), progress_line() as progress:
        read = read_drawings(job, budget.jobs, progress)
        check_forms(read, also)
        with stoppable() as stop:
            nested = nest_job(read, budget, progress=progress, on_better=stop.keep, stop=stop, keep=kept)
            nested = with_forms(nested, also)
            say_of_nest(nested)
            write_layout(nested, folder)
    if (folder / "report.html").exists():
        warn(f"{folder / 'report.html'} is of an earlier run: its sheets are no longer these; prepare makes it anew")
    if form == "json":
        click.echo(json.dumps(json.loads((folder / "layout.json").read_text()), indent=1))
    else:
        say(layout_text(nested.layout, folder, {piece.name: piece.changes for piece in read.pieces}, job.units))
    ctx.exit(stop.exit_status if stop() else status(nested))


def status(nested: Nested) -> ExitStatus:
    """Tell the exit status: 1 where a piece found no place."""
    return ExitStatus.FINDINGS if nested.wanting else ExitStatus.CLEAN
