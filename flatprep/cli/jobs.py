"""What the commands that take a job share: its argument, and reading its drawings."""

from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, Any, TypeVar

import click

from flatprep.api.pieces import ReadJob, read_job
from flatprep.base.progress import Progress
from flatprep.cli.talk import note, tell, warn
from flatprep.job.values import Job
from flatprep.report.figures import counted

if TYPE_CHECKING:  # a checklist does not pay for the search
    from flatprep.api.nest import Nested

Command = TypeVar("Command", bound=Callable[..., Any])


def job_argument(command: Command) -> Command:
    """Add the job file and ``--anywhere``."""
    command = click.option(
        "--anywhere", is_flag=True, help="let the job read files that lie neither under its folder nor beside it"
    )(command)
    return click.argument("job_file", metavar="JOB.toml", type=click.Path(path_type=Path))(command)


def read_drawings(job: Job, jobs: int, progress: Progress) -> ReadJob:
    """Read and check the job's drawings; what cannot be read is said on stderr and kept for the result."""
    read = read_job(job, jobs=jobs, progress=progress)
    for one in read.lost:
        warn(f"{one.part}: {one.why}")
    for linted in read.report.linted:
        units = f"{linted.drawing.units} ({linted.drawing.units_from})"
        mended = ", recovered" if linted.drawing.recovered else ""
        tell(f"{linted.file}: {counted(len(linted.drawing.parts), 'part')}, {units}{mended}")
    return read


def say_of_nest(nested: "Nested") -> None:
    """Say on stderr what a nest warns of, and what is worth knowing of it."""
    for warning in nested.warnings:
        warn(warning)
    for words in nested.notes:
        note(words)
