"""``flatprep draft``."""

import shlex
from pathlib import Path

import click

from flatprep.api.draft import draft_job
from flatprep.base.errors import UsageError
from flatprep.base.files import write_whole
from flatprep.cli.options import said_about_parts
from flatprep.cli.talk import say
from flatprep.job.context import JobOptions
from flatprep.report.draft_toml import draft_toml, unknown
from flatprep.report.figures import counted


@click.command("draft")
@click.argument("folder", type=click.Path(path_type=Path))
@click.option("--out", type=click.Path(path_type=Path), metavar="FILE", help="the job file; default: standard output")
@said_about_parts
def command(folder: Path, out: Path | None, said: JobOptions) -> None:
    """Write a job file from a folder of drawings.

    Material, thickness and quantity are guessed from names such as bracket_5052_3mm_x2.dxf, and marked as guesses;
    --material and --thickness stand where a name tells none.
    """
    if out is not None and out.exists():
        raise UsageError(f"{out} is there already", "choose another name with --out: a job file is never overwritten")
    draft = draft_job(folder, out.parent if out else Path.cwd(), said)
    if out is None:
        click.echo(draft_toml(draft), nl=False)
    else:
        write_whole(out, draft_toml(draft))
    materials, thicknesses = unknown(draft.parts)
    drawings = counted(len(draft.parts), "drawing")
    if out is None:
        say(f"{drawings}; {materials} without a material, {thicknesses} without a thickness", err=True)
        return
    say(f"{out}: {drawings}; {materials} without a material, {thicknesses} without a thickness", err=True)
    say(f"next: mend what is marked there, then flatprep prepare {shlex.quote(str(out))} --out out", err=True)
