"""ISO 286 fits: limits of holes and shafts from 0 to 120 mm, and the standard tolerance grades."""

import re
from bisect import bisect_left
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from flatprep.base.names import nearest
from flatprep.profile.hardware.names import UnknownHardwareError, tidy
from flatprep.profile.hardware.table import HardwareTable, table
from flatprep.profile.toml_check import Table

_FIT = re.compile(
    r"(?:dia\.?|[øØ⌀∅])?\s*(\d*\.?\d+)\s*(?:mm)?\s*\(?([A-Z]{1,2}|[a-z]{1,2})\s?(\d{1,2})\)?"
    r"(?:\s*/\s*([a-z]{1,2})(\d{1,2}))?"
)
HOLE_FROM = {"D": "d", "E": "e", "F": "f", "G": "g"}
"""Holes on the plus side mirror the shaft of the same letter in every grade."""


@dataclass(frozen=True, slots=True)
class Limits:
    """A size with its limits.

    Attributes
    ----------
    nominal_mm : float
    zone : str
        Letter and grade: ``H7`` (hole), ``h6`` (shaft).
    lower_um, upper_um : float
        Deviations from the nominal size, µm.
    """

    nominal_mm: float
    zone: str
    lower_um: float
    upper_um: float
    source: str = ""

    @property
    def least_mm(self) -> float:
        """Least size that passes."""
        return self.nominal_mm + self.lower_um / 1000.0

    @property
    def most_mm(self) -> float:
        """Greatest size that passes."""
        return self.nominal_mm + self.upper_um / 1000.0

    @property
    def is_hole(self) -> bool:
        """Whether the letter stands for a hole."""
        return self.zone[0].isupper()

    @property
    def grade(self) -> int:
        """The number behind the letter."""
        return int(re.sub(r"\D", "", self.zone))

    @property
    def name(self) -> str:
        """``22 N7``."""
        return f"{self.nominal_mm:g} {self.zone}"


@dataclass(frozen=True, slots=True)
class Fit:
    """What a text such as ``22 N7`` or ``25 H7/k6`` asks for."""

    first: Limits
    second: Limits | None = None

    @property
    def clearance_um(self) -> tuple[float, float] | None:
        """Least and greatest clearance, µm, negative for interference; None for one size alone."""
        if self.second is None:
            return None
        return self.first.lower_um - self.second.upper_um, self.first.upper_um - self.second.lower_um


def parse_fit(text: str, own: Sequence[Path] = ()) -> Fit:
    """Read ``22 N7``, ``22N7``, ``Ø6 H7``, ``25H7/k6``.

    Raises
    ------
    UnknownHardwareError
        For a text that is no fit, a class that is not in the tables, a size outside 0 to 120 mm.
    """
    match = _FIT.fullmatch(re.sub(r"^([A-Z]{1,2}\d{1,2})\s+(\S+)$", r"\2 \1", tidy(text)))
    if match is None:
        raise UnknownHardwareError(f'fit "{text}" is not known', 'write size and class, such as "22 N7" or "25 H7/k6"')
    size = float(match[1])
    first = limits(size, match[2] + match[3], own)
    if match[4] is None:
        return Fit(first)
    return Fit(first, limits(size, match[4] + match[5], own))


def is_fit(text: str) -> bool:
    """Tell whether a text has the shape of a fit."""
    return _FIT.fullmatch(tidy(text)) is not None


def limits(nominal_mm: float, zone: str, own: Sequence[Path] = ()) -> Limits:
    """Return the limits of a size in a tolerance class.

    Raises
    ------
    UnknownHardwareError
        For a class that is not in the tables, or a size outside them.

    Notes
    -----
    ISO 286-2 where the table holds the class. Else by ISO 286-1 from the standard tolerance: H, h, JS and js by their
    definition; d to g and D to G from the fundamental deviation, which is the same in every grade; m to p likewise.
    """
    sheet = table("fits", own, ("incl", "deviation"))
    step = _step(nominal_mm, sheet.top.numbers("incl"))
    rows = {row.text("class"): row for row in sheet.rows}
    if zone in rows:
        row = rows[zone].only(("class", "upper", "lower"))
        lower, upper = row.numbers("lower")[step], row.numbers("upper")[step]
        return Limits(nominal_mm, zone, lower, upper, sheet.source())
    pair = _derived(zone, step, nominal_mm, sheet, own)
    if pair is None:
        known = [*rows, "H5 to H16", "h5 to h16", "JS5 to JS16", "D, E, F, G 5 to 16"]
        close = nearest(zone, rows) or tuple(z for z in rows if z[0] == zone[0])
        remedy = "did you mean " + " or ".join(close) + "?" if close else "known: " + ", ".join(known)
        raise UnknownHardwareError(f"tolerance class {zone} is not known", remedy)
    return Limits(nominal_mm, zone, *pair, source="computed by ISO 286-1 from the tables of IT grades and deviations")


def it_um(nominal_mm: float, grade: int, own: Sequence[Path] = ()) -> float:
    """Return the width of a standard tolerance grade IT5 to IT16 at a nominal size, µm.

    Raises
    ------
    UnknownHardwareError
        For a grade or a size outside the table.
    """
    sheet = table("it_grades", own, ("incl",))
    rows = {row.text("grade"): row.only(("grade", "width")) for row in sheet.rows}
    if f"IT{grade}" not in rows:
        raise UnknownHardwareError(f"tolerance grade IT{grade} is not known", "known: " + ", ".join(rows))
    return rows[f"IT{grade}"].numbers("width")[_step(nominal_mm, sheet.top.numbers("incl"))]


def _step(nominal_mm: float, incl: Sequence[float]) -> int:
    if not 0.0 < nominal_mm <= incl[-1]:
        raise UnknownHardwareError(
            f"size {nominal_mm:g} mm is outside the fit tables", f"they hold above 0 to {incl[-1]:g} mm"
        )
    return bisect_left(incl, nominal_mm)


def _derived(
    zone: str, step: int, nominal_mm: float, sheet: HardwareTable, own: Sequence[Path]
) -> tuple[float, float] | None:
    letter, grade = zone.rstrip("0123456789"), zone.lstrip("ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz")
    if not grade or not 5 <= int(grade) <= 16:
        return None
    width = it_um(nominal_mm, int(grade), own)
    about = {"H": (0.0, width), "h": (-width, 0.0), "JS": (-width / 2, width / 2), "js": (-width / 2, width / 2)}
    if letter in about:
        return about[letter]
    distance = _deviation(HOLE_FROM.get(letter, letter), step, sheet)
    if distance is None or (letter in "kmnp" and int(grade) > 7):
        return None
    low = distance if letter in HOLE_FROM or letter in ("k", "m", "n", "p") else -distance - width
    return low, low + width


def _deviation(letter: str, step: int, sheet: HardwareTable) -> float | None:
    """Least distance of the zone from the nominal size, µm, from the file or from a class of the same letter."""
    given = sheet.top.table("deviation")
    if given is not None and given.has(letter):
        return given.numbers(letter)[step]
    row: Table | None = next(
        (r for r in sheet.rows if r.text("class").rstrip("0123456789") == letter and letter in "fgkmnp"), None
    )
    if row is None:
        return None
    return min(abs(row.numbers("upper")[step]), abs(row.numbers("lower")[step]))
