"""Clearance holes for screws: ISO 273 and ASME B18.2.8."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

from flatprep.base.units import MM_PER_UNIT
from flatprep.profile.hardware.names import screw_in, tidy, unknown
from flatprep.profile.hardware.table import HardwareTable, family, table
from flatprep.profile.toml_check import Table

_THREAD_PART = re.compile(r"(?<=\d)(?:x\d+(?:\.\d+)?|-\d{1,2}(?!/)\b)?(?:\s*-?\s*UN[CF])?$", re.IGNORECASE)
SERIES = ("fine", "medium", "coarse")
_WORDS = {"close": "fine", "normal": "medium", "free": "coarse", "loose": "coarse"}


@dataclass(frozen=True, slots=True)
class Clearance:
    """The three clearance holes of a screw, mm, the drills that make them, and the metric drills usually taken, mm."""

    screw: str
    fine_mm: float
    medium_mm: float
    coarse_mm: float
    drills: tuple[str, str, str]
    metric_mm: tuple[float, float, float]
    source: str

    def series(self, name: str) -> float:
        """Return the hole of ``fine``, ``medium`` or ``coarse``."""
        return (self.fine_mm, self.medium_mm, self.coarse_mm)[SERIES.index(name)]

    def metric_drill_mm(self, name: str) -> float:
        """Return the metric drill usually taken for a series."""
        return self.metric_mm[SERIES.index(name)]

    def drill(self, name: str) -> str:
        """Return the drill of a series as it is asked for."""
        return self.drills[SERIES.index(name)]


def all_clearances(own: Sequence[Path] = ()) -> tuple[Clearance, ...]:
    """Return every row of every table whose file name begins with ``clearance_``."""
    return _all(tuple(own))


@lru_cache(maxsize=8)
def _all(own: tuple[Path, ...]) -> tuple[Clearance, ...]:
    sheets = [table(name, own) for name in family("clearance_", own)]
    return tuple(_clearance(sheet, row) for sheet in sheets for row in sheet.rows)


def _clearance(sheet: HardwareTable, row: Table) -> Clearance:
    row.only(("screw", *SERIES, *(f"{s}_drill" for s in SERIES), *(f"{s}_mm" for s in SERIES), "from"))
    scale = MM_PER_UNIT["in"] if row.has("medium_drill") else 1.0
    sizes = [row.number(s, above=0.0) * scale for s in SERIES]
    drills = [row.text(f"{s}_drill", f"{row.number(s):g} mm") for s in SERIES]
    metric = [row.number(f"{s}_mm", size) for s, size in zip(SERIES, sizes, strict=True)]
    return Clearance(
        row.text("screw"), sizes[0], sizes[1], sizes[2], (drills[0], drills[1], drills[2]),
        (metric[0], metric[1], metric[2]), sheet.source(row),
    )  # fmt: skip


def find_clearance(name: str, own: Sequence[Path] = ()) -> Clearance:
    """Return the clearance holes of a screw: ``M6``, ``1/4``, ``#10``; a pitch or series behind it does not matter.

    Raises
    ------
    UnknownHardwareError
        With the nearest known names.
    """
    known = all_clearances(own)
    text = re.sub(r"\s*x\s*", "x", tidy(name))
    numbered = re.fullmatch(r"(\d{1,2})-\d\d(?:\s*-?\s*UN[CF])?", text, re.IGNORECASE)
    size = f"#{int(numbered[1])}" if numbered else screw_in(_THREAD_PART.sub("", text))
    found = [c for c in known if c.screw == size]
    if not found:
        raise unknown("clearance hole", name, [c.screw for c in known])
    return found[0]


def split_series(name: str) -> tuple[str, str]:
    """Split ``M5 fine`` into the screw and ``fine``; without a word the series is ``medium``."""
    words = name.replace("(", " ").replace(")", " ").split()
    for word in words:
        series = _WORDS.get(word.casefold(), word.casefold())
        if series in SERIES:
            return " ".join(w for w in words if w != word), series
    return name, "medium"
