"""``flatprep checklist``."""

import json
from pathlib import Path

import click

from flatprep.api.work import checklist_job
from flatprep.cli.jobs import job_argument, read_drawings
from flatprep.cli.options import output_format, said_about_parts
from flatprep.cli.progress import progress_line
from flatprep.cli.talk import say
from flatprep.job.context import JobOptions
from flatprep.job.load import load_job
from flatprep.report.checklist_json import checklist_document
from flatprep.report.checklist_text import checklist_text


@click.command("checklist")
@job_argument
@said_about_parts
@output_format
def command(job_file: Path, form: str, said: JobOptions) -> None:
    """List the bench work of a job's parts: drill, ream, countersink, tap, bend, deburr, in order."""
    job = load_job(job_file, said)
    with progress_line() as progress:
        steps = checklist_job(read_drawings(job, 1, progress))
    say(json.dumps(checklist_document(steps), indent=1) if form == "json" else checklist_text(steps, job.units))
