"""Shapes that the tests of the search share, and their true regions."""

from collections.abc import Sequence

import numpy as np
from shapely import affinity
from shapely.geometry import Polygon

from flatprep.nest.shapes import Best, Shape

SQUARE = np.array([[0.0, 0.0], [10.0, 0.0], [10.0, 10.0], [0.0, 10.0]])
WEDGE = np.array([[0.0, 0.0], [12.0, 0.0], [0.0, 7.0]])
ELBOW = np.array([[0.0, 0.0], [20.0, 0.0], [20.0, 6.0], [6.0, 6.0], [6.0, 15.0], [0.0, 15.0]])
FRAME = np.array([[-20.0, -20.0], [20.0, -20.0], [20.0, 20.0], [-20.0, 20.0]])
WINDOW = np.array([[-12.0, -12.0], [12.0, -12.0], [12.0, 12.0], [-12.0, 12.0]])
QUARTERS = (0.0, 90.0, 180.0, 270.0)


def shapes() -> list[Shape]:
    """One of each, at quarter turns."""
    return [
        Shape(SQUARE, turns_deg=QUARTERS),
        Shape(WEDGE, turns_deg=QUARTERS, mirror=(False, True)),
        Shape(ELBOW, turns_deg=QUARTERS),
        Shape(FRAME, (WINDOW,), turns_deg=QUARTERS),
    ]


def region(shape: Shape, turn_deg: float, *, mirrored: bool, x: float = 0.0, y: float = 0.0) -> Polygon:
    """Where a piece lies, by shapely alone."""
    body = Polygon(shape.outer, shape.holes)
    if mirrored:
        body = affinity.scale(body, -1.0, 1.0, origin=(0.0, 0.0))
    return affinity.translate(affinity.rotate(body, turn_deg, origin=(0.0, 0.0)), x, y)


def regions(kinds: Sequence[Shape], best: Best, container: int = 0) -> list[Polygon]:
    """Where the pieces of a layout lie in a container."""
    return [
        region(kinds[p.shape], p.turn_deg, mirrored=p.mirrored, x=p.x, y=p.y)
        for p in best.places
        if p.container == container
    ]


def overlap_area(bodies: Sequence[Polygon]) -> float:
    """Sum of the areas that two pieces share, mm²."""
    return sum(a.intersection(b).area for i, a in enumerate(bodies) for b in bodies[:i])
