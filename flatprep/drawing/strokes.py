"""A single-stroke alphabet of our own: letters as lines that a beam or a cutter follows once.

Capitals, figures and a few signs, each drawn on a grid 4 wide and 6 high; zero is crossed, so that it is no O.
"""

import unicodedata

import numpy as np

from flatprep.geom.bulge import Floats

CAP, WIDE, PITCH = 6.0, 4.0, 6.0
"""Grid units: height of a letter, its width, distance from letter to letter."""

_GLYPHS = {
    "A": "00 04 26 44 40|02 42", "B": "00 06 36 45 44 33 03|33 42 41 30 00", "C": "45 36 16 05 01 10 30 41",
    "D": "00 06 26 44 42 20 00", "E": "46 06 00 40|03 33", "F": "46 06 00|03 33", "G": "45 36 16 05 01 10 30 41 43 23",
    "H": "00 06|40 46|03 43", "I": "16 36|26 20|10 30", "J": "26 46|36 31 20 10 01", "K": "00 06|46 03 40",
    "L": "06 00 40", "M": "00 06 23 46 40", "N": "00 06 40 46", "O": "10 01 05 16 36 45 41 30 10",
    "P": "00 06 36 45 44 33 03", "Q": "10 01 05 16 36 45 41 30 10|22 40", "R": "00 06 36 45 44 33 03|23 40",
    "S": "45 36 16 05 04 13 33 42 41 30 10 01", "T": "06 46|26 20", "U": "06 01 10 30 41 46", "V": "06 20 46",
    "W": "06 10 23 30 46", "X": "00 46|06 40", "Y": "06 23 46|23 20", "Z": "06 46 00 40",
    "0": "10 01 05 16 36 45 41 30 10|12 34", "1": "15 26 20|10 30", "2": "05 16 36 45 44 00 40",
    "3": "05 16 36 45 44 33 13|33 42 41 30 10 01", "4": "30 36 02 42", "5": "46 06 03 33 42 41 30 10 01",
    "6": "45 36 16 05 01 10 30 41 42 33 03", "7": "06 46 10",
    "8": "13 04 05 16 36 45 44 33 13 02 01 10 30 41 42 33", "9": "01 10 30 41 45 36 16 05 04 13 43",
    "-": "13 33", ".": "20 21", "_": "00 40", "/": "00 46", "+": "13 33|22 24", "#": "10 16|30 36|02 42|04 44", " ": "",
}  # fmt: skip
"""Strokes of each sign, apart by bars; a point is two figures, x and y."""


def spelled(text: str) -> str | None:
    """Return a text in the signs of the alphabet: capitals, accents left off; None where a sign is none of them."""
    plain = "".join(c for c in unicodedata.normalize("NFKD", text) if not unicodedata.combining(c)).upper()
    return plain if plain.strip() and all(sign in _GLYPHS for sign in plain) else None


def width_over_height(text: str) -> float:
    """Return how wide a spelled text is over its height."""
    return (PITCH * (len(text) - 1) + WIDE) / CAP


def strokes(text: str, height_mm: float) -> tuple[Floats, ...]:
    """Return the lines of a spelled text, lower left corner at the origin, reading along x.

    Returns
    -------
    tuple of ndarray, shape (n, 2)
        Open lines, mm.
    """
    unit = height_mm / CAP
    lines = []
    for place, sign in enumerate(text):
        for stroke in filter(None, _GLYPHS[sign].split("|")):
            points = np.array([[int(p[0]) + PITCH * place, int(p[1])] for p in stroke.split()], dtype=np.float64)
            lines.append(points * unit)
    return tuple(lines)
