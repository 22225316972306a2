"""Dowel pins and shoulder screws."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

from flatprep.base.units import MM_PER_UNIT
from flatprep.profile.hardware.names import inch_size, inches, tidy, unknown
from flatprep.profile.hardware.table import HardwareTable, table
from flatprep.profile.toml_check import Table

_SERIES = {
    "ISO 7379": r"ISO[\s-]*7379|h8", "trade f9": r"trade\s+f9|f9", "ASME B18.3": r"(?:ASME[\s-]*)?B18\.3",
}  # fmt: skip
_INCH_UNDER = (0.004 * 25.4, 0.002 * 25.4)


@dataclass(frozen=True, slots=True)
class Pin:
    """A dowel pin: nominal diameter in mm, and the hole classes for pressing in and for sliding."""

    standard: str
    diameter_mm: float
    pin_class: str
    press: str
    slip: str
    note: str
    source: str


@dataclass(frozen=True, slots=True)
class ShoulderScrew:
    """A shoulder screw, mm.

    Attributes
    ----------
    shoulder : str
        As it is asked for: ``8``, ``1/4``.
    under_mm : (float, float) or None
        The most and the least that the shoulder is under its nominal size (inch series), where it is published so.
    fit : str
        Class of the shoulder, ``h8`` or ``f9``; empty for the inch series.
    """

    standard: str
    shoulder: str
    shoulder_mm: float
    thread: str
    thread_length_mm: float | None
    head_dia_mm: float
    head_height_mm: float
    fit: str
    under_mm: tuple[float, float] | None
    source: str

    @property
    def is_inch(self) -> bool:
        """Whether it is of the inch series."""
        return self.under_mm is not None

    @property
    def name(self) -> str:
        """``1/4 ASME B18.3``."""
        return f"{self.shoulder} {self.standard}"


def all_pins(own: Sequence[Path] = ()) -> tuple[Pin, ...]:
    """Return every dowel pin of the table, hardened ones last."""
    sheet = table("pins", own)
    return tuple(pin for row in sheet.rows for pin in _pins(sheet, row))


def _pins(sheet: HardwareTable, row: Table) -> list[Pin]:
    row.only(("standard", "text", "d", "pin", "press", "slip", "note", "from"))
    return [
        Pin(
            row.text("standard"), d, row.texts("pin")[0], row.text("press"), row.text("slip"), row.text("note"),
            sheet.source(row),
        )
        for d in row.numbers("d")
    ]  # fmt: skip


def find_pin(name: str, own: Sequence[Path] = ()) -> Pin:
    """Return a dowel pin: ``6``, ``6 ISO 8734``, ``dowel 6 m6``; hardened (ISO 8734) where nothing is said.

    Raises
    ------
    UnknownHardwareError
        With the nearest known names.
    """
    known = all_pins(own)
    text = tidy(name)
    asked = next(
        (s for s in ("ISO 2338", "ISO 8734") if re.search(s.replace(" ", r"[\s-]*"), text, re.IGNORECASE)), None
    )
    bare = re.sub(r"ISO[\s-]*\d{4}|\bm6\b|\bh[68]\b|\bmm\b|\b(?:dowel|parallel|pin)\b", " ", text, flags=re.IGNORECASE)
    match = re.fullmatch(r"\s*[ØøD]?\s*(\d+(?:\.\d+)?)\s*", bare)
    found = [p for p in known if match and p.diameter_mm == float(match[1]) and asked in (None, p.standard)]
    if not found:
        raise unknown("dowel pin", name, [f"{p.diameter_mm:g} {p.standard}" for p in known])
    return found[-1]


def all_shoulder_screws(own: Sequence[Path] = ()) -> tuple[ShoulderScrew, ...]:
    """Return every shoulder screw of the table."""
    return _screws(tuple(own))


@lru_cache(maxsize=8)
def _screws(own: tuple[Path, ...]) -> tuple[ShoulderScrew, ...]:
    sheet = table("shoulder_screws", own)
    return tuple(_screw(sheet, row) for row in sheet.rows)


def _screw(sheet: HardwareTable, row: Table) -> ShoulderScrew:
    row.only(("standard", "shoulder", "thread", "thread_length", "head_dia", "height", "unit", "fit", "from"))
    scale = MM_PER_UNIT[row.choice("unit", tuple(MM_PER_UNIT))]
    length = row.optional_number("thread_length", above=0.0)
    shoulder = row.text("shoulder")
    return ShoulderScrew(
        standard=row.text("standard"), shoulder=shoulder,
        shoulder_mm=inches(shoulder) * scale if scale > 1 else float(shoulder),
        thread=row.text("thread"), thread_length_mm=None if length is None else length * scale,
        head_dia_mm=row.number("head_dia") * scale, head_height_mm=row.number("height") * scale,
        fit=row.text("fit", ""), under_mm=_INCH_UNDER if scale > 1 else None, source=sheet.source(row),
    )  # fmt: skip


def find_shoulder_screw(name: str, own: Sequence[Path] = ()) -> ShoulderScrew:
    """Return a shoulder screw by its shoulder: ``8``, ``13 ISO 7379``, ``1/4``, ``1/4 in``, ``1 in``.

    A bare whole number is metric, an inch mark or a fraction makes it inch.

    Raises
    ------
    UnknownHardwareError
        With the nearest known names; also for a thread, which does not tell the series.
    """
    known = all_shoulder_screws(own)
    raw = re.sub(r"\bshoulder(?:\s+screw)?\b", " ", name, flags=re.IGNORECASE).strip()
    is_inch = re.search(r"/|\"|”|\bin\b|\binch\b|\d\.\d{2,}", raw) is not None
    text, asked = tidy(raw), None
    for standard, pattern in _SERIES.items():
        if re.search(rf"\b(?:{pattern})\b", text, re.IGNORECASE):
            text, asked = re.sub(rf"\b(?:{pattern})\b", " ", text, flags=re.IGNORECASE).strip(), standard
    is_inch = is_inch or asked == "ASME B18.3"
    size = inch_size(text) if is_inch else re.sub(r"\s*mm$|^[ØøD]\s*", "", text)
    sized = [s for s in known if s.shoulder == size and asked in (None, s.standard)]
    found = [s for s in sized if s.is_inch == is_inch] or ([] if is_inch else sized)
    if not found:
        raise unknown("shoulder screw", name, [s.name for s in known], "name the shoulder, not the thread")
    return found[0]
