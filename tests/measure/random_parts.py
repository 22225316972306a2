"""Plates with holes, slots and notches at random, near each other but never over each other."""

import shapely

from flatprep.geom.bulge import points_along
from tests.measure.shapes import chorded, circle, moved, obround, part, path, polygon, rectangle


def random_part(rng):
    """A plate of 60 x 40 with notches and up to 12 holes, turned and moved."""
    outer = _outline(rng)
    free = shapely.Polygon(points_along(outer, closed=True, chord_mm=0.01)).buffer(-0.3)
    holes = []
    for _ in range(40):
        hole = moved(_hole(rng), rng.uniform(0, 360), rng.uniform(0, 60), rng.uniform(0, 40))
        shape = shapely.Polygon(points_along(hole, closed=True, chord_mm=0.01))
        if free.contains(shape) and len(holes) < 12:
            holes.append(hole)
            free = free.difference(shape.buffer(0.3))
    how = rng.uniform(0, 360), rng.uniform(-500, 500), rng.uniform(-500, 500)
    return part(moved(outer, *how), *(moved(h, *how) for h in holes))


def _outline(rng):
    a, b, c = rng.uniform(0.6, 4, 3)
    x, y = rng.uniform(15, 25), rng.uniform(8, 18)
    return path(
        (0, 0), (x, 0), (x, y), (x + a, y), (x + a, 0), (45, 0), (47, 6, -0.8), (47 + b, 6),
        (50 + b, 0), (60, 0), (60, 40), (40 + c, 40), (40 + c / 2, 30), (40, 40), (10, 40), (0, 30, 0.3),
    )  # fmt: skip


def _hole(rng):
    size = rng.uniform(1, 5)
    kinds = (
        circle(0, 0, size),
        obround(0, 0, 3 * size, size),
        rectangle(0, 0, size, 2 * size, 0.2 * size),
        polygon(0, 0, size, 6),
        path((0, 0), (size, 0), (0.3 * size, 1.2 * size)),
        chorded(path((0, 0, 0.4), (2 * size, 0, 0.3), (size, size, -0.2)), 0.01),
    )
    return kinds[rng.integers(len(kinds))]
