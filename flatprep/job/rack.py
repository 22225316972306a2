"""The rack: a folder with the sheets that a workshop has (``stock.toml``) and its remnants (a drawing each)."""

from collections.abc import Iterator
from dataclasses import replace
from pathlib import Path

from flatprep.base.errors import JobError
from flatprep.base.units import MM_PER_UNIT
from flatprep.job.context import Context, money
from flatprep.job.reach import Reach
from flatprep.job.stocks import read_stock
from flatprep.job.values import Rack
from flatprep.profile.toml_check import Table, read_toml

LIST = "stock.toml"
"""Sheets of the rack, as ``[[stock]]`` tables."""
USED = "used"
"""Folder in the rack for drawings of remnants that are gone."""
KEYS = ("units", "remnant_price", "stock")
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
    if not folder.is_dir():
        raise JobError(f"{folder}: no such folder", "name the folder that the rack's drawings lie in")
    try:
        drawings = tuple(_drawings(folder))
        listed = path.exists()
    except OSError as err:
        raise JobError(f"{folder}: cannot be read ({err.strerror or err})", "check the rack's folder") from err
    if not listed:
        return Rack(folder, drawings)
    top = Table(read_toml(path, JobError), str(path), "", JobError).only(KEYS)
    unit = top.choice("units", tuple(MM_PER_UNIT), "mm")
    own = Context(unit, Reach(folder, context.reach.anywhere), context.options, context.overrides)
    sheets = tuple(replace(read_stock(one, own, fewest=0), rack_file=LIST) for one in top.tables("stock"))
    named = {s.outline.resolve() for s in sheets if isinstance(s.outline, Path)}
    loose = tuple(d for d in drawings if d.resolve() not in named)
    return Rack(folder, loose, money(top, "remnant_price"), sheets)


def _drawings(folder: Path) -> Iterator[Path]:
    """Drawings in a rack through all levels, but for those of remnants that are gone."""
    for path in sorted(folder.rglob("*")):
        inside = path.relative_to(folder).parts
        if path.suffix.lower() == ".dxf" and inside[0] != USED and path.is_file():
            yield path
