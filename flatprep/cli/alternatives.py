"""``flatprep alternatives``."""

import json
from pathlib import Path

import click

from flatprep.api.alternatives import WhatIf, alternatives_job
from flatprep.api.stored import stored_layout
from flatprep.api.work import estimate_job
from flatprep.cli.jobs import job_argument, read_drawings
from flatprep.cli.options import said_about_parts
from flatprep.cli.progress import progress_line
from flatprep.cli.talk import say
from flatprep.cost.alternatives_job import job_alternatives
from flatprep.job.context import JobOptions
from flatprep.job.load import load_job
from flatprep.report.alternatives_json import alternatives_csv, alternatives_document
from flatprep.report.alternatives_text import alternatives_text


@click.command("alternatives")
@job_argument
@click.option("--part", "parts", multiple=True, metavar="NAME", help="only this part (may be given several times)")
@click.option("--try", "tried", multiple=True, metavar="ID", help="a material besides those of the job")
@click.option("--every", is_flag=True, help="try every material that is known")
@click.option("--layout", "layout_file", type=click.Path(path_type=Path), help="a layout.json, for the utilisation")
@said_about_parts
@click.option(
    "--format", "form", type=click.Choice(["text", "json", "csv"]), default="text", help="text, JSON or a table"
)
def command(
    job_file: Path,
    parts: tuple[str, ...],
    tried: tuple[str, ...],
    every: bool,
    layout_file: Path | None,
    form: str,
    said: JobOptions,
) -> None:
    """Show what a job's parts could be made of: other thicknesses and materials, as stiff, as strong, or as thick.

    Each option has the thickness needed and the next one sold, mass, cost, a process that cuts it, and what lint says.
    """
    job = load_job(job_file, said)
    with progress_line() as progress:
        read = read_drawings(job, 1, progress)
        now = estimate_job(read, stored_layout(layout_file) if layout_file else None)
        ask = WhatIf(parts, tried, every, said.profile_folders, now.utilisation)
        tables = alternatives_job(read, ask, progress=progress)
    whole = () if parts else job_alternatives(tables, now)
    if form == "json":
        click.echo(json.dumps(alternatives_document(tables, whole, currency=job.currency), indent=1))
    elif form == "csv":
        click.echo(alternatives_csv(tables), nl=False)
    else:
        say(alternatives_text(tables, whole, currency=job.currency, units=job.units))
