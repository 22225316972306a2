"""``flatprep lint``."""

import json
from pathlib import Path

import click

from flatprep.api.lint import lint_job, lint_paths
from flatprep.api.pictures import write_pictures
from flatprep.base.errors import ExitStatus, UsageError
from flatprep.cli.options import output_format, said_about_parts
from flatprep.cli.progress import progress_line
from flatprep.cli.talk import say
from flatprep.job.context import JobOptions
from flatprep.job.load import load_job
from flatprep.model.linted import LintReport
from flatprep.report.lint_json import lint_document
from flatprep.report.lint_text import lint_text


@click.command("lint")
@click.argument("paths", nargs=-1, required=True, type=click.Path(path_type=Path), metavar="PATH...|JOB.toml")
@said_about_parts
@click.option("--jobs", type=click.IntRange(1, 64), default=1, show_default=True, help="processes")
@click.option(
    "--svg", "pictures", type=click.Path(path_type=Path), metavar="DIR", help="draw each part with its findings"
)
@output_format
@click.pass_context
def command(
    ctx: click.Context,
    paths: tuple[Path, ...],
    said: JobOptions,
    jobs: int,
    pictures: Path | None,
    form: str,
) -> None:
    """Check drawings (files, folders or a job's) against material, thickness and process."""
    units: str | None = None
    jobs_given = [p for p in paths if p.suffix.lower() == ".toml"]
    with progress_line() as progress:
        if jobs_given:
            if len(paths) > 1:
                raise UsageError(
                    f"{jobs_given[0]}: a job is checked alone", "give one job file, or drawings and folders"
                )
            job = load_job(paths[0], said)
            report, units = lint_job(job, jobs=jobs, progress=progress), job.units
        else:
            report = lint_paths(paths, said, jobs=jobs, progress=progress)
    if pictures is not None:
        write_pictures(report, pictures, units)
    say(json.dumps(lint_document(report), indent=1) if form == "json" else lint_text(report, units))
    ctx.exit(status(report))


def status(report: LintReport) -> ExitStatus:
    """Tell the exit status of a report."""
    if not report.linted:
        return ExitStatus.UNUSABLE
    loud = any(one.loud for one in report.linted)
    return ExitStatus.FINDINGS if loud or report.unreadable else ExitStatus.CLEAN
