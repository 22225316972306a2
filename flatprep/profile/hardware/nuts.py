"""Hexagon nuts: across flats, across corners, height."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

from flatprep.base.units import MM_PER_UNIT
from flatprep.profile.hardware.names import screw_in, tidy, unknown
from flatprep.profile.hardware.table import table

STANDARDS = ("ISO 4032", "ASME B18.2.2", "DIN 934", "ASME B18.6.3")
"""In the order in which a bare screw size takes them."""
_ASKED = {
    "ISO 4032": r"ISO[\s-]*4032|DIN[\s-]*EN[\s-]*24032", "DIN 934": r"DIN[\s-]*934",
    "ASME B18.2.2": r"(?:ASME[\s-]*)?B18\.2\.2", "ASME B18.6.3": r"(?:ASME[\s-]*)?B18\.6\.3|machine[\s-]+screw",
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class Nut:
    """A hexagon nut, mm; corners are sharp, so a nut is never wider."""

    standard: str
    screw: str
    flats_mm: float
    corners_mm: float
    height_mm: float
    source: str

    @property
    def name(self) -> str:
        """``M8 ISO 4032``."""
        return f"{self.screw} {self.standard}"


def all_nuts(own: Sequence[Path] = ()) -> tuple[Nut, ...]:
    """Return every nut of the table."""
    return _all(tuple(own))


@lru_cache(maxsize=8)
def _all(own: tuple[Path, ...]) -> tuple[Nut, ...]:
    sheet = table("nuts", own)
    out = []
    for row in sheet.rows:
        row.only(("standard", "screw", "flats", "corners", "height", "unit", "from"))
        scale = MM_PER_UNIT[row.choice("unit", tuple(MM_PER_UNIT))]
        flats, corners, height = (row.number(key, above=0.0) * scale for key in ("flats", "corners", "height"))
        out.append(Nut(row.text("standard"), row.text("screw"), flats, corners, height, sheet.source(row)))
    return tuple(out)


def find_nut(name: str, own: Sequence[Path] = ()) -> Nut:
    """Return a nut: ``M8`` (ISO 4032), ``M10 DIN 934``, ``1/4`` (ASME B18.2.2), ``#10`` (machine screw nut).

    Raises
    ------
    UnknownHardwareError
        With the nearest known names.
    """
    known = all_nuts(own)
    text, asked = re.sub(r"\b(?:hex(?:agon)?\s+)?nut\b", " ", tidy(name), flags=re.IGNORECASE), None
    for standard, pattern in _ASKED.items():
        if re.search(rf"\b(?:{pattern})\b", text, re.IGNORECASE):
            text, asked = re.sub(rf"\b(?:{pattern})\b", " ", text, flags=re.IGNORECASE), standard
    size = screw_in(text)
    found = [n for n in known if n.screw == size and asked in (None, n.standard)]
    if not found:
        raise unknown("nut", name, [n.name for n in known if n.screw == size] or [n.name for n in known])
    return min(found, key=lambda n: STANDARDS.index(n.standard) if n.standard in STANDARDS else len(STANDARDS))
