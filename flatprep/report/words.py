"""Sentences of the bench in the unit of the job: they are written in mm, inch shops read them in inches."""

import re

MM_PER_INCH = 25.4
_NUMBER = r"-?\d+(?:\.\d+)?"
_LENGTHS = re.compile(rf"(?<![\w.]){_NUMBER}(?:(?: to | x | ± ){_NUMBER})* mm\b")


def lengths_in(text: str, units: str) -> str:
    """Return a sentence with its millimetres turned into inches for an inch job; µm, names and angles stay.

    ``11.47 mm`` becomes ``0.452 in``: one decimal more than it was written with, and at least three.
    """
    return _LENGTHS.sub(lambda found: _inches(found[0]), text) if units in ("in", "ft") else text


def _inches(text: str) -> str:
    return re.sub(_NUMBER, lambda found: _inch(found[0]), text.removesuffix(" mm")) + " in"


def _inch(number: str) -> str:
    decimals = max(3, len(number.partition(".")[2]) + 1)
    return f"{float(number) / MM_PER_INCH:.{decimals}f}"
