"""Lengths with units: text in, millimetres inside, text out."""

import re
from fractions import Fraction
from math import isfinite

from flatprep.base.errors import FlatprepError

MM_PER_UNIT: dict[str, float] = {"mm": 1.0, "cm": 10.0, "m": 1000.0, "in": 25.4, "ft": 304.8}
"""Exact millimetres of the units that may be named (international inch and foot)."""

_LENGTH = re.compile(
    r"""\s*(?P<sign>[+-]?)\s*
        (?:(?P<whole>\d+)[\s-]+(?=\d+/))?
        (?P<number>\d+/\d+|\d+\.?\d*(?:[eE][+-]?\d+)?|\.\d+(?:[eE][+-]?\d+)?)
        \s*(?P<unit>mm|cm|m|in|ft|"|”|'|)\s*""",
    re.VERBOSE,
)
_SYMBOLS = {'"': "in", "”": "in", "'": "ft"}


class LengthError(FlatprepError):
    """A text that is no length."""


def parse_length_mm(value: float | str, unit: str = "mm") -> float:
    """Read a length such as ``3``, ``"3 mm"``, ``"0.125in"``, ``"1/8in"`` or ``"1 1/2in"``.

    Parameters
    ----------
    value
        A number, taken in `unit`, or a text, whose own unit goes before `unit`.
    unit
        A key of `MM_PER_UNIT`.

    Returns
    -------
    float
        Millimetres.

    Raises
    ------
    LengthError
        When the text is no length, or the number is not finite.
    """
    if isinstance(value, bool) or not isinstance(value, int | float | str):
        raise LengthError(f"{value!r} is not a length", "write a number or a text such as 3mm or 1/8in")
    if isinstance(value, str):
        match = _LENGTH.fullmatch(value)
        if match is None:
            raise LengthError(f"{value!r} is not a length", "write a number or a text such as 3mm or 1/8in")
        try:
            size = Fraction(match["whole"] or 0) + Fraction(match["number"])
        except ZeroDivisionError:
            raise LengthError(f"{value!r} divides by zero", "write a number or a text such as 1/8in") from None
        unit = _SYMBOLS.get(match["unit"], match["unit"]) or unit
        number = float(-size if match["sign"] == "-" else size)
    else:
        number = float(value)
    if not isfinite(number):
        raise LengthError(f"{value!r} is not a finite length", "write a number or a text such as 3mm")
    return number * MM_PER_UNIT[unit]
