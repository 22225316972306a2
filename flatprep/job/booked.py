"""The rack's book: which sheets have been cut, what was taken out of the rack for them, what they left."""

import json
from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from pathlib import Path

from flatprep.base.errors import JobError
from flatprep.profile.toml_check import Table, read_toml

FILE = "booked.toml"
KEYS = ("date", "job", "layout", "sheet", "stock", "taken_from", "offcut")
"""Every key of a ``[[booked]]``."""


@dataclass(frozen=True, slots=True)
class Booking:
    """One sheet that has been cut.

    Attributes
    ----------
    day : date
    job : str
        Name and revision.
    layout : str
        Digest of the layout that it was a sheet of.
    sheet : int
        From 1.
    stock, taken_from : str
        The stock's name, and where it stood in the rack; the latter is empty for stock of the job itself.
    offcut : str
        Label of what was left; empty where nothing was.
    """

    day: date
    job: str
    layout: str
    sheet: int
    stock: str
    taken_from: str = ""
    offcut: str = ""


def load_bookings(folder: Path) -> tuple[Booking, ...]:
    """Read the book of a rack; a rack without one has no bookings.

    Raises
    ------
    JobError
        When it cannot be read or has a mistake.
    """
    path = folder / FILE
    if not path.exists():
        return ()
    top = Table(read_toml(path, JobError), str(path), "", JobError).only(("booked",))
    return tuple(_booking(one.only(KEYS)) for one in top.tables("booked"))


def _booking(table: Table) -> Booking:
    day = table.get("date")
    if not isinstance(day, date):
        raise table.fail("date", "a day, such as 2026-03-14")
    return Booking(
        day,
        table.text("job", ""),
        table.text("layout"),
        table.integer("sheet", least=1),
        table.text("stock"),
        table.text("taken_from", ""),
        table.text("offcut", ""),
    )


def with_bookings(text: str, more: Sequence[Booking]) -> str:
    """Return the book's text with more bookings at its end; what stands in it stays as it is."""
    head = text or "# What has been cut from this rack, written by flatprep book.\n"
    head += "" if head.endswith("\n") else "\n"
    return head + "".join(f"\n[[booked]]\n{_lines(one)}" for one in more)


def _lines(one: Booking) -> str:
    said: dict[str, str | int] = {
        "job": one.job, "layout": one.layout, "sheet": one.sheet, "stock": one.stock, "taken_from": one.taken_from,
        "offcut": one.offcut,
    }  # fmt: skip
    pairs = (f"{key} = {_value(value)}\n" for key, value in said.items() if value)
    return f"date = {one.day.isoformat()}\n" + "".join(pairs)


def _value(value: str | int) -> str:
    """Return a value as TOML writes it; its texts are JSON's, but for DEL."""
    return json.dumps(value, ensure_ascii=False).replace("\x7f", "\\u007f")
