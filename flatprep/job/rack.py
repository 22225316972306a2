"""The rack: a folder with the sheets that a workshop has (``stock.toml``) and its remnants (a drawing each)."""

from dataclasses import replace
from pathlib import Path

from flatprep.base.errors import JobError
from flatprep.base.journal import is_unfinished
from flatprep.base.keys import keys_of
from flatprep.base.units import MM_PER_UNIT
from flatprep.job import reference
from flatprep.job.booked import load_bookings
from flatprep.job.context import Context, money
from flatprep.job.reach import Reach
from flatprep.job.stocks import read_stock
from flatprep.job.values import Rack
from flatprep.profile.toml_check import Table, read_toml

LIST = "stock.toml"
"""Sheets of the rack, as ``[[stock]]`` tables."""
USED = "used"
"""Folder in the rack for drawings of remnants that are gone."""
KEYS = keys_of(reference.RACK)
"""Every key at the top of a rack's ``stock.toml``."""


def load_rack(folder: Path, context: Context) -> Rack:
    """Read a rack's list and find its drawings; the drawings themselves are not opened.

    Parameters
    ----------
    context
        The job's: its own figures of materials hold here, too.

    Raises
    ------
    JobError
        When the folder cannot be read, or its list has a mistake.
    """
    path = folder / LIST
    if is_unfinished(folder):
        raise JobError(
            f"{folder}: a booking was broken off half way", "run that flatprep book again: it finishes first"
        )
    if not folder.is_dir():
        raise JobError(f"{folder}: no such folder", "name the folder that the rack's drawings lie in")
    try:
        every = tuple(sorted(p for p in folder.rglob("*") if p.suffix.lower() == ".dxf" and p.is_file()))
        listed = path.exists()
    except OSError as err:
        raise JobError(f"{folder}: cannot be read ({err.strerror or err})", "check the rack's folder") from err
    gone = tuple(p for p in every if p.relative_to(folder).parts[0] == USED)
    drawings = tuple(p for p in every if p not in gone)
    bookings = len(load_bookings(folder))
    if not listed:
        return Rack(folder, drawings, gone=gone, bookings=bookings)
    top = Table(read_toml(path, JobError), str(path), "", JobError).only(KEYS)
    unit = top.choice("units", tuple(MM_PER_UNIT), "mm")
    own = Context(unit, Reach(folder, context.reach.anywhere), context.options, context.overrides)
    sheets = tuple(replace(read_stock(one, own, fewest=0), rack_file=LIST) for one in top.tables("stock"))
    named = {s.outline.resolve() for s in sheets if isinstance(s.outline, Path)}
    loose = tuple(d for d in drawings if d.resolve() not in named)
    if top.has("offcut_least"):
        own.sides_mm(top, "offcut_least")
    return Rack(folder, loose, money(top, "remnant_price"), sheets, gone, bookings)
