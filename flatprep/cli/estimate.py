"""``flatprep estimate``."""

import json
from pathlib import Path

import click

from flatprep.api.breaks import break_table
from flatprep.api.nest import nest_job
from flatprep.api.remnants import with_remnants
from flatprep.api.stored import stored_layout
from flatprep.api.work import estimate_job
from flatprep.cli.jobs import job_argument, read_drawings, say_of_nest
from flatprep.cli.options import rack_option, said_about_parts, search_budget
from flatprep.cli.progress import progress_line
from flatprep.cli.talk import say
from flatprep.job.context import JobOptions
from flatprep.job.load import load_job
from flatprep.nest.problem import Budget
from flatprep.report.estimate_csv import estimate_csv
from flatprep.report.estimate_json import estimate_document
from flatprep.report.estimate_text import estimate_text


@click.command("estimate")
@job_argument
@click.option("--layout", "layout_file", type=click.Path(path_type=Path), help="a layout.json, instead of a new nest")
@click.option("--breaks", "with_breaks", is_flag=True, help="also what one set costs when several are made together")
@rack_option
@said_about_parts
@search_budget
@click.option(
    "--format", "form", type=click.Choice(["text", "json", "csv"]), default="text", help="text, JSON or a table"
)
def command(
    job_file: Path,
    layout_file: Path | None,
    with_breaks: bool,
    budget: Budget,
    form: str,
    said: JobOptions,
) -> None:
    """Mass, cut length, pierces and material cost, per part and for the job."""
    job = load_job(job_file, said)
    with progress_line() as progress:
        read = read_drawings(job, budget.jobs, progress)
        layout = None
        if layout_file is not None:
            layout = stored_layout(layout_file)
            read, _ = with_remnants(read, progress, gone=True)
        elif job.stock or job.rack:
            nested = nest_job(read, budget, progress=progress)
            say_of_nest(nested)
            read, layout = nested.read, nested.layout
        breaks = break_table(read, budget, progress=progress) if with_breaks else ()
    result = estimate_job(read, layout)
    if form == "json":
        click.echo(json.dumps(estimate_document(result, breaks), indent=1))
    elif form == "csv":
        click.echo(estimate_csv(result), nl=False)
    else:
        say(estimate_text(result, breaks, units=job.units))
