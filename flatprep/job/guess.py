"""What a drawing's file name seems to say of its part: always a guess, and said as one."""

import re
from collections.abc import Iterable
from dataclasses import dataclass

from flatprep.base.names import plain
from flatprep.base.units import MM_PER_UNIT
from flatprep.profile.material import Material

_THICKNESS = (
    (re.compile(r"(?<![\w.,])t?\s?=?\s?(\d+(?:[.,]\d+)?)\s?(?:mm|millimet(?:er|re)s?)\b"), "mm"),
    (re.compile(r"(?<![\w.,])(\d*[.,]\d+)\s?in(?:ch)?\b"), "in"),
    (re.compile(r"(?<![\w.,])(\d{1,2})\s?ga(?:uge)?\b"), "ga"),
)
_THICKEST_MM = 30.0
"""A larger number is some other size of the part."""
_QUANTITY = (
    re.compile(r"(?<![\w.,])x\s?(\d{1,4})(?![\w.,])"),
    re.compile(r"(?<![\w.,])(\d{1,4})\s?x(?![\w.,]|\s\d)"),
    re.compile(r"(?<![\w.,])(\d{1,4})\s?(?:pcs|pc|off|stk)\b"),
    re.compile(r"\bqty\s?(\d{1,4})\b"),
)
_LONGEST_RUN = 4
_LEAST_LETTERS = 3
"""Shorter names of materials (``Cu``, ``A4``) mean too many other things."""


@dataclass(frozen=True, slots=True)
class NameGuess:
    """Guesses from one name; None where it says nothing.

    Attributes
    ----------
    thickness : str or None
        With its unit, as a job file takes it.
    quantity : int or None
    material : str or None
        An id.
    """

    thickness: str | None = None
    quantity: int | None = None
    material: str | None = None


def guess_from_name(stem: str, materials: Iterable[Material]) -> NameGuess:
    """Read ``bracket_5052_3mm_x2`` as 2 pieces of 5052 aluminium, 3 mm.

    Parameters
    ----------
    stem
        File name without its ending.
    materials
        Those whose ids and aliases are looked for; the longest name wins.
    """
    words = re.sub(r"[_\-()\[\]+]+", " ", stem.lower()).strip()
    thickness = _thickness(words)
    return NameGuess(thickness, _quantity(words), _material(words, materials, numbers=thickness is not None))


def _thickness(words: str) -> str | None:
    numbers = ((found[1].replace(",", "."), unit) for pattern, unit in _THICKNESS for found in pattern.finditer(words))
    return next((f"{number}{unit}" for number, unit in numbers if _is_thickness(float(number), unit)), None)


def _is_thickness(number: float, unit: str) -> bool:
    return number > 0 and (unit == "ga" or number * MM_PER_UNIT[unit] <= _THICKEST_MM)


def _quantity(words: str) -> int | None:
    found = next((match for pattern in _QUANTITY if (match := pattern.search(words))), None)
    return int(found[1]) if found and int(found[1]) > 0 else None


def _material(words: str, materials: Iterable[Material], *, numbers: bool) -> str | None:
    """Id of the material named by a run of words; a bare number counts only where a thickness stands beside it."""
    parts = words.split()
    runs = {plain("".join(parts[i:j])) for i in range(len(parts)) for j in range(i + 1, i + 1 + _LONGEST_RUN)}
    named = [
        (len(name), material.id)
        for material in materials
        for name in {plain(word) for word in (material.id, material.name, *material.aliases)}
        if name in runs and len(name) >= _LEAST_LETTERS and (numbers or not name.isdigit())
    ]
    return max(named)[1] if named else None
