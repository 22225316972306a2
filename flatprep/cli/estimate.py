"""``flatprep estimate``."""

import json
from pathlib import Path

import click

from flatprep.api.nest import nest_job
from flatprep.api.stored import stored_layout
from flatprep.api.work import estimate_job
from flatprep.cli.jobs import job_argument, open_job, read_drawings
from flatprep.cli.options import output_format, said_about_parts, search_budget
from flatprep.cli.progress import progress_line
from flatprep.nest.problem import Budget
from flatprep.report.estimate_json import estimate_document
from flatprep.report.estimate_text import estimate_text


@click.command("estimate")
@job_argument
@click.option("--layout", "layout_file", type=click.Path(path_type=Path), help="a layout.json, instead of a new nest")
@said_about_parts
@search_budget
@output_format
def command(
    job_file: Path,
    layout_file: Path | None,
    seconds: float,
    steps: int | None,
    seed: int,
    jobs: int,
    form: str,
    **said: object,
) -> None:
    """Mass, cut length, pierces and material cost, per part and for the job."""
    job = open_job(job_file, **said)  # type: ignore[arg-type]
    with progress_line() as progress:
        read = read_drawings(job, jobs, progress)
        if layout_file is not None:
            layout = stored_layout(layout_file)
        elif job.stock:
            layout = nest_job(read, Budget(seconds, steps, seed, jobs), progress=progress).layout
        else:
            layout = None
    result = estimate_job(read, layout)
    click.echo(json.dumps(estimate_document(result), indent=1) if form == "json" else estimate_text(result))
