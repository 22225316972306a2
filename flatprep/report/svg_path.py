"""Bulge polylines as SVG path data with true arcs; y is turned over, as SVG counts it downwards."""

from collections.abc import Iterable
from functools import lru_cache

import numpy as np

from flatprep.geom import bulge
from flatprep.geom.bulge import Floats
from flatprep.model.drawing import Part
from flatprep.report.figures import number


def path_data(xyb: Floats, *, closed: bool, decimals: int = 3) -> str:
    """Path data (``M x y A r r 0 0 0 x y ... Z``) of a polyline in mm.

    Parameters
    ----------
    xyb : ndarray, shape (n, 3)
        See `flatprep.geom.bulge`.
    closed
        Whether the last segment runs back to the start.
    decimals
        Of the figures, mm.
    """
    seg = bulge.segments(xyb, closed=closed)
    words = [f"M{_pair(xyb[0, 0], xyb[0, 1], decimals)}"]
    last = len(seg) - 1
    for i, ((x, y), b, radius) in enumerate(zip(seg.end, seg.bulge, seg.radius, strict=True)):
        if b != 0.0:
            r = number(radius, decimals)
            # on screen y runs down: an anticlockwise arc has sweep flag 0
            words.append(f"A{r} {r} 0 {int(abs(b) > 1)} {int(b < 0)} {_pair(x, y, decimals)}")
        elif not (closed and i == last):
            words.append(f"L{_pair(x, y, decimals)}")
    return "".join(words) + ("Z" if closed else "")


@lru_cache(maxsize=1024)
def part_path(part: Part, *, decimals: int = 3) -> str:
    """Outer contour and holes as one path, for ``fill-rule="evenodd"``; written once for all pieces of a part."""
    return "".join(path_data(c.xyb, closed=True, decimals=decimals) for c in part.contours)


def ring_data(points: Floats, *, decimals: int = 2) -> str:
    """Return the closed path through points, shape (n, 2)."""
    return path_data(np.column_stack([points, np.zeros(len(points))]), closed=True, decimals=decimals)


def joined(polylines: Iterable[Floats], *, decimals: int = 3) -> str:
    """Open polylines as one path."""
    return "".join(path_data(xyb, closed=False, decimals=decimals) for xyb in polylines)


def _pair(x: float, y: float, decimals: int) -> str:
    return f"{number(x, decimals)} {number(-y, decimals)}"
