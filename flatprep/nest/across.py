"""Turns that lay the bends of a part across the grain of a sheet: along it, sheet metal cracks first."""

from collections.abc import Sequence
from itertools import combinations

from flatprep.practice.bends import ALONG_DEG

SAME_DEG = 1e-6


def grain_deg(grain: str) -> float:
    """Return the direction of a sheet's grain: 0 along its ``length``, 90 along its ``width``."""
    return 0.0 if grain == "length" else 90.0


def off_grain_deg(bends_deg: Sequence[float], turn_deg: float, along_deg: float, *, mirrored: bool) -> float:
    """Return the least angle, 0 to 90 degrees, between the grain and any bend line of a part at a turn."""
    lines = (((-b if mirrored else b) + turn_deg - along_deg) % 180.0 for b in bends_deg)
    return min(min(off, 180.0 - off) for off in lines)


def turns_across(
    bends_deg: Sequence[float], turns_deg: Sequence[float] | None, along_deg: float, *, mirrored: bool
) -> tuple[float, ...]:
    """Return the turns at which no bend line runs along the grain; empty where there is none.

    Parameters
    ----------
    bends_deg
        Directions of the bend lines in the drawing.
    turns_deg
        Allowed turns; None for any: then those that lay the bends as far off the grain as can be, the lines of a
        single direction square to it, lines both ways at 45 degrees.
    along_deg
        Direction of the sheet's grain.
    """
    if turns_deg is not None:
        wanted, least = list(turns_deg), ALONG_DEG
    else:
        lines = [(-b if mirrored else b) for b in bends_deg]
        middles = [(a + b) / 2.0 + more for a, b in combinations(lines, 2) for more in (0.0, 90.0)]
        square = [(along_deg + 90.0 - line) % 180.0 for line in (*lines, *middles)]
        wanted = sorted({round(t % 360.0, 9) for turn in square for t in (turn, turn + 180.0)})
        least = max(ALONG_DEG, *(off_grain_deg(bends_deg, t, along_deg, mirrored=mirrored) for t in wanted))
    return tuple(t for t in wanted if off_grain_deg(bends_deg, t, along_deg, mirrored=mirrored) >= least - SAME_DEG)
