"""What became of a rack when the sheets of a layout were booked as cut."""

from dataclasses import dataclass
from enum import StrEnum
from pathlib import Path


class Taken(StrEnum):
    """What a sheet was."""

    COUNTED = "counted"
    UNCOUNTED = "uncounted"
    REMNANT = "remnant"
    OWN = "own"
    """Stock of the job itself, not of the rack."""


@dataclass(frozen=True, slots=True)
class Offcut:
    """What is left of a sheet, added to the rack; sizes of its largest rectangle, mm."""

    label: str
    material: str
    thickness_mm: float
    length_mm: float
    width_mm: float


@dataclass(frozen=True, slots=True)
class BookedSheet:
    """One sheet that was booked.

    Attributes
    ----------
    number : int
        From 1.
    left : int or None
        Sheets of that stock still in the rack, where they are counted.
    offcut : Offcut or None
        None where nothing is left that is worth keeping.
    """

    number: int
    stock: str
    taken: Taken
    left: int | None
    offcut: Offcut | None


@dataclass(frozen=True, slots=True)
class Booked:
    """All of it."""

    rack: Path
    sheets: tuple[BookedSheet, ...]
