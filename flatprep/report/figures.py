"""Figures as people read them: rounded here and nowhere else, always with their unit."""

from decimal import Decimal
from math import floor, log10

from flatprep.base.units import MM_PER_UNIT

UNKNOWN = "–"
"""Stands where a figure is not known."""

_DECIMALS = {"mm": 2, "cm": 3, "m": 5, "in": 3, "ft": 4}
_GAP = "\u00a0"  # no-break space between figure and unit


def number(value: float, decimals: int) -> str:
    """Return fixed decimals without trailing zeros; never ``-0``."""
    text = f"{value:.{decimals}f}"
    if "." in text:
        text = text.rstrip("0").rstrip(".")
    return "0" if text == "-0" else text


def length(mm: float | None, units: str = "mm") -> str:
    """Length to 0.01 mm or 0.001 in, with its unit."""
    if mm is None:
        return UNKNOWN
    return f"{bare_length(mm, units)}{_GAP}{units}"


def bare_length(mm: float, units: str = "mm") -> str:
    """Length to 0.01 mm or 0.001 in without the unit, for columns whose head names it."""
    return number(mm / MM_PER_UNIT[units], _DECIMALS[units])


def size(width_mm: float, height_mm: float, units: str = "mm") -> str:
    """Two lengths with one unit: ``120 × 40 mm``."""
    return f"{bare_length(width_mm, units)} × {bare_length(height_mm, units)}{_GAP}{units}"


def place(at: tuple[float, float] | None, units: str = "mm") -> str:
    """Coordinates, ``(12.5, 40)``, in the unit of the page."""
    if at is None:
        return UNKNOWN
    x, y = (bare_length(v, units).replace("-", "−") for v in at)
    return f"({x},{_GAP}{y})"


def measure(value: float | None, unit: str | None, units: str = "mm") -> str:
    """Return a measured value or a limit in its own unit; millimetres follow the unit of the page."""
    if value is None:
        return UNKNOWN
    if unit == "mm":
        return length(value, units)
    return number(value, 3) + (f"{_GAP}{unit}" if unit else "")


def mass(kg: float | None) -> str:
    """Mass to three significant digits, in g below 1 kg."""
    if kg is None:
        return UNKNOWN
    return f"{significant(kg)}{_GAP}kg" if abs(kg) >= 0.9995 else f"{significant(kg * 1000)}{_GAP}g"


def significant(value: float, digits: int = 3) -> str:
    """Value to so many significant digits, no exponent."""
    if value == 0:
        return "0"
    decimals = digits - 1 - floor(log10(abs(value)))
    rounded = round(value, decimals)
    if rounded:
        decimals = digits - 1 - floor(log10(abs(rounded)))  # 9.996 becomes 10.0, not 10.00
    return f"{rounded:.{max(decimals, 0)}f}"


def money(amount: Decimal | float | None, currency: str | None = None) -> str:
    """Amount with two decimals and its currency, if one is known."""
    if amount is None:
        return UNKNOWN
    return f"{amount:.2f}" + (f"{_GAP}{currency}" if currency else "")


def percent(share: float | None) -> str:
    """Share as per cent with one decimal."""
    return UNKNOWN if share is None else f"{100 * share:.1f}{_GAP}%"


def area(mm2: float, units: str = "mm") -> str:
    """Area in cm² to 0.01, or in² to 0.001 for inch jobs."""
    if units in ("in", "ft"):
        return f"{number(mm2 / 645.16, 3)}{_GAP}in²"
    return f"{number(mm2 / 100, 2)}{_GAP}cm²"


def duration(seconds: float | None) -> str:
    """Time in seconds below a minute, else minutes and seconds, else hours and minutes."""
    if seconds is None:
        return UNKNOWN
    whole = round(seconds)
    if whole < 60:
        return f"{whole}{_GAP}s"
    minutes, rest = divmod(whole, 60)
    if minutes < 60:
        return f"{minutes}{_GAP}min {rest}{_GAP}s"
    return f"{minutes // 60}{_GAP}h {minutes % 60}{_GAP}min"


def capital(words: str) -> str:
    """Turn the first letter into a capital, leave the rest alone."""
    return words[:1].upper() + words[1:]


def sentence(words: str) -> str:
    """Return the words with a capital first and one stop last."""
    stop = "" if words.rstrip().endswith(("?", "!", ".")) or not words.strip() else "."
    return capital(words.strip()) + stop


def counted(count: int, one: str, many: str = "") -> str:
    """``1 part``, ``3 parts``."""
    return f"{count} {one if count == 1 else many or one + 's'}"
