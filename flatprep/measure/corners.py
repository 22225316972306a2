"""Inside corners: where the void turns sharper than a round tool can follow."""

from dataclasses import dataclass
from math import cos, pi, sin

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.measure.boundary import Boundary, Ints

LEAST_GAP_MM = 0.05
"""Where a tool leaves less than this, a joint still closes (common practice for wood and plastics)."""
SQUARE_RAD = 0.02
"""Corners this near to a right angle are square."""


@dataclass(frozen=True, slots=True)
class Corner:
    """An inside corner or fillet.

    Attributes
    ----------
    at : tuple of float
        The corner, or the middle of the fillet's arc, mm.
    radius_mm : float
        As drawn; 0 for a sharp corner.
    turn_rad : float
        By how much the edge turns there; the void's angle is π less this.
    gap_mm : float
        What the tool leaves between itself and the corner, along the bisector.
    contour : int
        0 the outer one, then the holes.
    rows : tuple of int
        Rows of the boundary's edges that form it.
    ends : tuple of (float, float)
        Where the walls beside it end, mm: twice the corner, or both ends of the fillet.
    """

    at: tuple[float, float]
    radius_mm: float
    turn_rad: float
    gap_mm: float
    contour: int
    rows: tuple[int, ...]
    ends: tuple[tuple[float, float], tuple[float, float]]

    @property
    def is_square(self) -> bool:
        """Whether a square mate may seat in it."""
        return abs(self.turn_rad - pi / 2.0) <= SQUARE_RAD


def leftover_gap_mm(tool_radius_mm: float, drawn_radius_mm: float, turn_rad: float) -> float:
    """Return what a round tool leaves in a corner, along its bisector, mm.

    Notes
    -----
    In a corner of angle θ = π - turn a circle of radius r stays r (1 / sin(θ / 2) - 1) away from the apex: 0.414 r
    at 90 degrees, 0.155 r at 120. With a fillet drawn in it, the difference of both.
    """
    return (tool_radius_mm - drawn_radius_mm) * (1.0 / cos(turn_rad / 2.0) - 1.0)


def inside_corners(b: Boundary, *, tool_radius_mm: float, least_gap_mm: float) -> tuple[Corner, ...]:
    """Corners and fillets of the void that a tool cannot fill, by what it would leave.

    Parameters
    ----------
    b
        Boundary with the material to the left: where it turns right, the void has an inside corner.
    tool_radius_mm
    least_gap_mm
        Corners where less is left are no matter.
    """
    sharp = np.nonzero(b.turn < -1e-6)[0]
    left = tool_radius_mm * (1.0 / np.cos(b.turn[sharp] / 2.0) - 1.0)
    out = [_sharp(b, int(k), float(gap)) for k, gap in zip(sharp, left, strict=True) if gap > least_gap_mm]
    small = np.nonzero((b.sweep < 0) & (b.radius < tool_radius_mm - 1e-3))[0]
    for fillet in _fillets(b, small):
        corner = _fillet(b, fillet, tool_radius_mm)
        if corner.gap_mm > least_gap_mm:
            out.append(corner)
    return tuple(out)


def _sharp(b: Boundary, k: int, gap_mm: float) -> Corner:
    x, y = b.end[k].tolist()
    return Corner((x, y), 0.0, abs(float(b.turn[k])), gap_mm, int(b.contour[k]), (k, int(b.next[k])), ((x, y), (x, y)))


def _fillets(b: Boundary, small: Ints) -> list[list[int]]:
    """Collect runs of arcs that follow each other about the same centre."""
    runs: list[list[int]] = []
    for k in small.tolist():
        before = runs[-1][-1] if runs else -1
        same = before >= 0 and int(b.next[before]) == k and float(np.hypot(*(b.centre[k] - b.centre[before]))) < 1e-3
        if same:
            runs[-1].append(k)
        else:
            runs.append([k])
    return runs


def _fillet(b: Boundary, rows: list[int], tool_radius_mm: float) -> Corner:
    turn = min(abs(float(b.sweep[rows].sum())), 0.9 * np.pi)  # beyond that it is a round end: the tool does not enter
    first = rows[0]
    radius = float(b.radius[first])
    middle = float(b.angle[first] + b.sweep[rows].sum() / 2.0)
    centre: Floats = b.centre[first]
    at = float(centre[0]) + radius * cos(middle), float(centre[1]) + radius * sin(middle)
    gap = leftover_gap_mm(tool_radius_mm, radius, turn)
    (x0, y0), (x1, y1) = b.start[first].tolist(), b.end[rows[-1]].tolist()
    return Corner(at, radius, turn, gap, int(b.contour[first]), tuple(rows), ((x0, y0), (x1, y1)))
