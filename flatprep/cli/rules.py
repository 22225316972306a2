"""``flatprep rules``."""

import json
from pathlib import Path

import click

from flatprep.api.rules import rules_in_force
from flatprep.cli.options import output_format
from flatprep.cli.talk import say
from flatprep.job.context import JobOptions
from flatprep.report.rules_text import rules_document, rules_text


@click.command("rules")
@click.option("--process", metavar="ID|FILE", help="process id or profile file")
@click.option("--material", metavar="ID", help="material id or designation")
@click.option("--thickness", metavar="VALUE", help="3, 3mm, 0.125in, 1/8in or 16ga")
@click.option(
    "--profiles", "folders", metavar="DIR", multiple=True, type=click.Path(path_type=Path), help="own profiles"
)
@output_format
def command(
    process: str | None, material: str | None, thickness: str | None, folders: tuple[Path, ...], form: str
) -> None:
    """List the rules: what each looks for, why, what to do, and the limits in force with their sources."""
    shown = rules_in_force(JobOptions(folders, process=process, material=material, thickness=thickness))
    say(json.dumps(rules_document(shown), indent=1) if form == "json" else rules_text(shown))
