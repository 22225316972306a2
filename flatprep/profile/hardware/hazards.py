"""Cautions by their id, from ``hazards.toml``."""

from collections.abc import Sequence
from pathlib import Path

from flatprep.profile.hardware.names import unknown
from flatprep.profile.hardware.table import table


def caution(hazard: str, own: Sequence[Path] = ()) -> str:
    """Return the text of a caution.

    Raises
    ------
    UnknownHardwareError
        For an id that the table does not hold.
    """
    rows = {row.text("id"): row for row in table("hazards", own).rows}
    if hazard not in rows:
        raise unknown("hazard", hazard, rows)
    return rows[hazard].only(("id", "text", "from")).text("text")


def first_caution(own: Sequence[Path] = ()) -> str:
    """Return the sentence that stands before all others: what goes before this list."""
    head = table("hazards", own).top.table("source")
    return head.text("first") if head else ""
