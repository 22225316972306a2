"""Twist drills: which one is asked for at the counter for a size."""

from collections.abc import Sequence
from fractions import Fraction
from functools import lru_cache
from math import floor
from pathlib import Path

from flatprep.base.units import MM_PER_UNIT
from flatprep.profile.hardware.names import inch_size, inches, tidy, unknown
from flatprep.profile.hardware.table import table

INCH = MM_PER_UNIT["in"]
_HALF_MM_FROM = 14.0


@lru_cache(maxsize=8)
def _inch(own: tuple[Path, ...]) -> tuple[tuple[float, str], ...]:
    sheet = table("drills_inch", own)
    named = [(row.number("size", above=0.0) * INCH, row.text("drill")) for row in sheet.rows]
    parts = [(float(Fraction(n, 64)) * INCH, inch_size(f"{n}/64") or "") for n in range(1, 97)]
    return tuple(sorted([*named, *parts]))


def inch_drill(size_mm: float, own: Sequence[Path] = ()) -> tuple[float, str]:
    """Return the number, letter or fractional drill nearest to a size: its diameter in mm and its name."""
    return min(_inch(tuple(own)), key=lambda drill: (abs(drill[0] - size_mm), "/" not in drill[1]))


def inch_drill_below(size_mm: float, own: Sequence[Path] = ()) -> tuple[float, str] | None:
    """Return the largest number, letter or fractional drill that is not above a size."""
    below = [drill for drill in _inch(tuple(own)) if drill[0] <= size_mm + 1e-9]
    return below[-1] if below else None


def metric_drill_below(size_mm: float) -> float:
    """Return the largest usual metric drill that is not above a size: steps of 0.1 mm, from 14 mm on of 0.5 mm."""
    step = 0.5 if size_mm >= _HALF_MM_FROM else 0.1
    return round(floor(size_mm / step + 1e-9) * step, 3)


def find_drill(name: str, own: Sequence[Path] = ()) -> float:
    """Return the diameter in mm of ``#7``, ``F``, ``17/64``, ``5.1``, ``5.1 mm``.

    Raises
    ------
    UnknownHardwareError
        With the nearest known names.
    """
    text = tidy(name)
    metric = text.removesuffix("mm").strip()
    try:
        size = float(metric)
    except ValueError:
        size = 0.0
    if 0.0 < size < 1000.0:
        return size
    by_name = {label: mm for mm, label in _inch(tuple(own))}
    key = text.upper() if len(text) == 1 else inch_size(text) or text
    if key in by_name:
        return by_name[key]
    if "/" in key:
        return inches(key) * INCH
    raise unknown("drill", name, by_name)
