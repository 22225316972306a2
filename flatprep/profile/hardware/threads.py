"""Screw threads: pitch, tap drill and minor diameter limits, found by any usual way of writing the name."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

from flatprep.base.units import MM_PER_UNIT
from flatprep.profile.hardware.names import inch_size, tidy, unknown
from flatprep.profile.hardware.table import HardwareTable, family, table
from flatprep.profile.toml_check import Table

INCH = MM_PER_UNIT["in"]
_CLASS = re.compile(r"[\s-]*\b(?:[4-8][GHgh]{1,2}|[123][AB])\b|[\s-]*\b(?:LH|RH)\b")
_METRIC = re.compile(r"[mM]\s*(\d+(?:\.\d+)?)(?:x(\d+(?:\.\d+)?))?")
_UNIFIED = re.compile(r"(.+?)(?:-(\d{1,2}))?\s*-?\s*(UNC|UNF|UNEF|UN|UNR)?", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class Thread:
    """An internal thread.

    Attributes
    ----------
    name : str
        As the trade writes it: ``M8x1``, ``1/4-20 UNC``.
    screw : str
        The screw size without pitch: ``M8``, ``1/4``.
    series : str
        ``coarse``, ``fine``, ``UNC`` or ``UNF``.
    major_mm, pitch_mm : float
    drill_mm : float
        Recommended tap drill.
    drill : str
        The drill as it is asked for at the counter: ``5 mm``, ``#7``, ``27/64``.
    metric_drill_mm : float
        The metric drill usually taken; for metric threads the tap drill itself.
    minor_min_mm, minor_max_mm : float
        Limits of the minor diameter, class 6H or 2B.
    source : str
    """

    name: str
    screw: str
    series: str
    major_mm: float
    pitch_mm: float
    drill_mm: float
    drill: str
    metric_drill_mm: float
    minor_min_mm: float
    minor_max_mm: float
    source: str

    @property
    def is_inch(self) -> bool:
        """Whether it is a unified thread."""
        return self.series.startswith("UN")

    @property
    def limits(self) -> str:
        """Name of the tolerance class of the minor diameter."""
        return "2B" if self.is_inch else "6H"

    def admits(self, diameter_mm: float, slack_mm: float = 0.001) -> bool:
        """Tell whether a hole of that diameter lies within the minor diameter limits."""
        return self.minor_min_mm - slack_mm <= diameter_mm <= self.minor_max_mm + slack_mm


def all_threads(own: Sequence[Path] = ()) -> tuple[Thread, ...]:
    """Return every thread of every table whose file name begins with ``threads_``."""
    return _all(tuple(own))


@lru_cache(maxsize=8)
def _all(own: tuple[Path, ...]) -> tuple[Thread, ...]:
    out: list[Thread] = []
    for name in family("threads_", own):
        sheet = table(name, own)
        out += [_unified(sheet, row) if row.has("tpi") else _metric(sheet, row) for row in sheet.rows]
    return tuple(out)


def _metric(sheet: HardwareTable, row: Table) -> Thread:
    row.only(("thread", "series", "d", "pitch", "drill", "minor_min", "minor_max", "drill_from", "minor_from", "note"))
    drill = row.number("drill", above=0.0)
    major = row.number("d", above=0.0)
    return Thread(
        name=row.text("thread"), screw=f"M{major:g}", series=row.text("series"), major_mm=major,
        pitch_mm=row.number("pitch", above=0.0), drill_mm=drill, drill=f"{drill:g} mm", metric_drill_mm=drill,
        minor_min_mm=row.number("minor_min"), minor_max_mm=row.number("minor_max"),
        source=sheet.source(row, "drill_from", "minor_from"),
    )  # fmt: skip


def _unified(sheet: HardwareTable, row: Table) -> Thread:
    row.only((
        "thread", "series", "d", "tpi", "drill", "drill_in", "drill_mm", "minor_min", "minor_max", "drill_from",
        "minor_from", "note",
    ))  # fmt: skip
    metric = row.number("drill_mm", above=0.0)
    drill_in = row.optional_number("drill_in", above=0.0)
    return Thread(
        name=f"{row.text('thread')} {row.text('series')}", screw=row.text("thread").rpartition("-")[0],
        series=row.text("series"), major_mm=row.number("d", above=0.0) * INCH, pitch_mm=INCH / row.integer("tpi"),
        drill_mm=metric if drill_in is None else drill_in * INCH, drill=row.text("drill"), metric_drill_mm=metric,
        minor_min_mm=row.number("minor_min") * INCH, minor_max_mm=row.number("minor_max") * INCH,
        source=sheet.source(row, "drill_from", "minor_from"),
    )  # fmt: skip


def find_thread(name: str, own: Sequence[Path] = ()) -> Thread:
    """Return a thread by name: ``M6``, ``M8×1``, ``M6x1-6H``, ``1/4-20``, ``#10-24 UNC-2B``, ``1/4 UNF``.

    Raises
    ------
    UnknownHardwareError
        With the nearest known names; also for an inch size without threads per inch or series.
    """
    known = all_threads(own)
    asked = _bare(name)
    match = _METRIC.fullmatch(asked)
    found = _find_metric(match, known) if match else _find_unified(asked, known)
    if len(found) == 1:
        return found[0]
    if found:
        raise unknown("thread", name, [t.name for t in found], "several threads have that size")
    raise unknown("thread", name, _near(asked, known))


def _bare(name: str) -> str:
    """Return a name without tolerance class, hand and words; the series of ``UNC 1/4-20`` goes behind."""
    text = _CLASS.sub("", re.sub(r"\s*x\s*", "x", tidy(name), flags=re.IGNORECASE))
    text = re.sub(r"\b(?:ISO|metric|thread|coarse)\b", " ", text, flags=re.IGNORECASE).strip(" -")
    return re.sub(r"^(UN[CF])\s+(.+)$", r"\2 \1", text, flags=re.IGNORECASE)


def _near(asked: str, known: Sequence[Thread]) -> list[str]:
    size = re.split(r"x|-", asked, maxsplit=1)[0].strip()
    same = [t.name for t in known if t.screw.casefold() == size.casefold()]
    return same or [t.name for t in known]


def _find_metric(match: re.Match[str], known: Sequence[Thread]) -> list[Thread]:
    major, pitch = float(match[1]), match[2]
    sized = [t for t in known if not t.is_inch and abs(t.major_mm - major) < 1e-9]
    if pitch is None:
        return [t for t in sized if t.series == "coarse"]
    return [t for t in sized if abs(t.pitch_mm - float(pitch)) < 1e-9]


def _find_unified(asked: str, known: Sequence[Thread]) -> list[Thread]:
    match = _UNIFIED.fullmatch(asked)
    size = _size(match[1]) if match else None
    if match is None or size is None:
        return []
    tpi, series = match[2], (match[3] or "").upper()
    return [
        t
        for t in known
        if t.is_inch and t.screw == size and (not tpi or round(INCH / t.pitch_mm) == int(tpi))
        and (series in ("", "UN", "UNR") or t.series == series)
    ]  # fmt: skip


def _size(text: str) -> str | None:
    """``10`` in ``10-24`` is the number size 10, not ten inches."""
    if re.fullmatch(r"\d{1,2}", text.strip()) and int(text) in (0, 2, 3, 4, 5, 6, 8, 10, 12):
        return f"#{int(text)}"
    return inch_size(text)
