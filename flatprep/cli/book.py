"""``flatprep book``."""

import json
from datetime import date
from pathlib import Path

import click

from flatprep.api.book import BookAsk, book
from flatprep.api.stored import stored
from flatprep.base.errors import UsageError
from flatprep.base.files import claimed
from flatprep.cli.options import output_format
from flatprep.cli.talk import say
from flatprep.report.book_json import book_document
from flatprep.report.book_text import book_text


@click.command("book")
@click.argument("layout_file", metavar="LAYOUT.json", type=click.Path(path_type=Path))
@click.option(
    "--rack", "folder", metavar="DIR", type=click.Path(path_type=Path), help="the rack; default: the layout's own"
)
@click.option(
    "--sheet", "sheets", metavar="N", multiple=True, type=click.IntRange(1), help="only this sheet; may be repeated"
)
@click.option("--again", is_flag=True, help="sheets that were booked have been cut once more")
@output_format
def command(layout_file: Path, folder: Path | None, sheets: tuple[int, ...], again: bool, form: str) -> None:
    """Book the sheets of a layout as cut: what they took leaves the rack, their offcuts go into it.

    All of it happens or nothing. The job file is never touched.
    """
    rack = folder or _own_rack(layout_file)
    with claimed(rack):
        done = book(BookAsk(layout_file, rack, date.today(), sheets, again))
    if form == "json":
        click.echo(json.dumps(book_document(done), indent=1))
    else:
        say(book_text(done))


def _own_rack(layout_file: Path) -> Path:
    rack = stored(layout_file).rack
    if rack is None:
        raise UsageError(f"{layout_file}: made without a rack", "say with --rack which rack its offcuts go into")
    if not rack.is_dir():
        raise UsageError(f"{layout_file}: its rack {rack} is not there", "say with --rack where the rack is now")
    return rack
