"""Deep groove ball bearings and plain bushes by designation."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

from flatprep.profile.hardware.names import tidy, unknown
from flatprep.profile.hardware.table import HardwareTable, table
from flatprep.profile.toml_check import Table

_SEALS = re.compile(
    r"[\s-]*(?:2?RSR?1?|2RSH|2RZ|DDU?|LLU|VV|2RS1|RS1|Z{1,2}|2Z|C[2-5]|M?P6|TN9?)(?=$|[\s-])", re.IGNORECASE
)
_SHIELD = re.compile(r"RS|RZ|Z|DD|LL|VV", re.IGNORECASE)
_WORD = re.compile(r"\b(?:ball\s+)?bearing\b|\bdeep groove\b|\bDIN[\s-]*625(?:-1)?\b|\bISO[\s-]*15\b", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class Bearing:
    """Boundary dimensions of a bearing, mm; `shielded_mm` is the width with shields where it differs."""

    name: str
    bore_mm: float
    outside_mm: float
    width_mm: float
    shielded_mm: float | None
    source: str


@dataclass(frozen=True, slots=True)
class Bush:
    """A plain bush, mm: ``wrapped`` or ``sintered``."""

    kind: str
    bore_mm: float
    outside_mm: float
    source: str

    @property
    def name(self) -> str:
        """``10 x 12 wrapped bush``."""
        return f"{self.bore_mm:g} x {self.outside_mm:g} {self.kind} bush"


def all_bearings(own: Sequence[Path] = ()) -> tuple[Bearing, ...]:
    """Return every bearing of the table."""
    return _bearings(tuple(own))


@lru_cache(maxsize=8)
def _bearings(own: tuple[Path, ...]) -> tuple[Bearing, ...]:
    sheet = table("bearings", own)
    return tuple(_bearing(sheet, row) for row in sheet.rows)


def _bearing(sheet: HardwareTable, row: Table) -> Bearing:
    row.only(("name", "bore", "outside", "width", "shielded", "shielded_from", "note", "from"))
    source = sheet.source(row)
    if row.has("shielded"):
        source += f"; width with shields from {row.text('shielded_from', 'the same')}"
    bore, outside, width = (row.number(key, above=0.0) for key in ("bore", "outside", "width"))
    return Bearing(row.text("name"), bore, outside, width, row.optional_number("shielded"), source)


def find_bearing(name: str, own: Sequence[Path] = ()) -> tuple[Bearing, bool]:
    """Return a bearing and whether the name asks for shields or seals: ``608``, ``6205-2RS``, ``688ZZ``, ``61804``.

    Raises
    ------
    UnknownHardwareError
        With the nearest known names.
    """
    known = {b.name: b for b in all_bearings(own)}
    text = _WORD.sub(" ", tidy(name)).strip().upper()
    bare = text
    while (shorter := _SEALS.sub("", bare)) != bare:
        bare = shorter
    if bare not in known and _SEALS.search("-" + bare[-2:]) and bare[:-2] in known:
        bare = bare[:-2]
    for designation in (bare, re.sub(r"(?:2RS1?|ZZ|2Z|Z|RS)$", "", bare)):
        found = known.get(_trade_name(designation))
        if found is not None:
            return found, bool(_SHIELD.search(text[len(designation) :]))
    raise unknown("bearing", name, known)


def _trade_name(designation: str) -> str:
    """Turn the ISO series 618 and 619 into 68 and 69: ``61804`` is ``6804``, ``618/8`` is ``688``."""
    small = re.fullmatch(r"6(?:18|19)/([3-9])", designation)
    if small:
        return f"6{designation[2]}{small[1]}"
    large = re.fullmatch(r"61([89])(\d\d)", designation)
    return f"6{large[1]}{large[2]}" if large else designation.replace(" ", "")


def all_bushes(own: Sequence[Path] = ()) -> tuple[Bush, ...]:
    """Return every plain bush of the table."""
    sheet = table("bushings", own)
    return tuple(
        Bush(row.choice("kind", ("wrapped", "sintered")), row.number("bore"), row.number("outside"), sheet.source(row))
        for row in sheet.rows
    )


def find_bush(name: str, own: Sequence[Path] = ()) -> Bush:
    """Return a plain bush by its bore: ``10``, ``10 mm bush``, ``10 x 16 bush``, ``12 sintered``.

    A wrapped one where nothing is said.

    Raises
    ------
    UnknownHardwareError
        With the nearest known names.
    """
    known = all_bushes(own)
    text = tidy(name).casefold()
    kind = next((k for k in ("wrapped", "sintered") if k in text), None)
    match = re.fullmatch(r"\D*?(\d+(?:\.\d+)?)\s*(?:mm)?(?:\s*x\s*(\d+(?:\.\d+)?))?\D*", text)
    sized = [b for b in known if match and b.bore_mm == float(match[1])]
    found = [
        b for b in sized if kind in (None, b.kind) and (not match or not match[2] or b.outside_mm == float(match[2]))
    ]
    if not found:
        raise unknown("bush", name, [b.name for b in sized or known])
    return found[0]


def is_bush(text: str) -> bool:
    """Tell whether a text speaks of a bush."""
    return re.search(r"\bbush(?:ing|es)?\b", text, re.IGNORECASE) is not None
