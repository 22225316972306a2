"""``flatprep compare``."""

import json
from pathlib import Path

import click

from flatprep.api.compare import Revisions, compare_files
from flatprep.base.errors import ExitStatus
from flatprep.base.files import write_whole
from flatprep.base.units import MM_PER_UNIT
from flatprep.cli.options import output_format, parse_roles
from flatprep.cli.talk import say
from flatprep.report.compare_json import compare_document
from flatprep.report.compare_svg import compare_svg
from flatprep.report.compare_text import compare_text


@click.command("compare")
@click.argument("old", type=click.Path(path_type=Path))
@click.argument("new", type=click.Path(path_type=Path))
@click.option("--svg", type=click.Path(path_type=Path), metavar="FILE", help="write a picture of both")
@click.option("--units", type=click.Choice(list(MM_PER_UNIT)), help="unit of both drawings, whatever they say")
@click.option("--new-units", type=click.Choice(list(MM_PER_UNIT)), help="unit of the new drawing, if it is another")
@click.option(
    "--layer", "layers", metavar="NAME=ROLE", multiple=True, help="what a layer is for: cut, mark, bend, ignore"
)
@output_format
@click.pass_context
def command(
    ctx: click.Context,
    old: Path,
    new: Path,
    svg: Path | None,
    units: str | None,
    new_units: str | None,
    layers: tuple[str, ...],
    form: str,
) -> None:
    """Tell what changed from one drawing to the next, and whether pieces already cut can be reworked.

    Ends with 0 where nothing changed, 1 where something did.
    """
    found = compare_files(Revisions(old, new, units, new_units, parse_roles(layers)))
    if svg is not None:
        write_whole(svg, compare_svg(found))
    say(json.dumps(compare_document(found), indent=1) if form == "json" else compare_text(found))
    ctx.exit(ExitStatus.CLEAN if found.same else ExitStatus.FINDINGS)
