"""Circles inside a shape that together fill most of it: a light stand-in for its area."""

import numpy as np

from flatprep.geom.bulge import Floats

MOST_POLES = 16
# Enough is enough: circles smaller than this share of the first one add little.
LEAST_SHARE = 0.08
GRID = 40


def inner_circles(edges: Floats, most: int = MOST_POLES) -> Floats:
    """Greedy packing of circles into the region bounded by `edges`, largest first.

    Parameters
    ----------
    edges : ndarray, shape (n, 4)
        x0, y0, x1, y1, mm; outline and windows.

    Returns
    -------
    ndarray, shape (k, 3)
        Centre and radius, mm; each circle lies inside the region. At least one row.

    Notes
    -----
    The centre is the node of a square grid that is farthest from outline and earlier circles (the poles of
    inaccessibility, one after the other); the radius is measured at the node, so it is never too large.
    """
    low = edges.reshape(-1, 2).min(axis=0)
    high = edges.reshape(-1, 2).max(axis=0)
    step = float((high - low).max()) / GRID
    across = [np.arange(a + 0.5 * min(step, b - a), b, step) for a, b in zip(low, high, strict=True)]
    nodes = np.stack(np.meshgrid(*across), axis=-1).reshape(-1, 2)
    nodes = np.vstack([nodes, _middles(edges)])
    room = np.where(_inside(nodes, edges), _distance(nodes, edges), -1.0)
    circles: list[tuple[float, float, float]] = []
    while len(circles) < most:
        at = int(np.argmax(room))
        radius = float(room[at])
        if circles and radius < LEAST_SHARE * circles[0][2]:
            break
        circles.append((float(nodes[at, 0]), float(nodes[at, 1]), max(radius, 0.0)))
        room = np.minimum(room, np.hypot(*(nodes - nodes[at]).T) - radius)
    return np.array(circles, dtype=np.float64)


def _middles(edges: Floats) -> Floats:
    """Points just inside each edge, for slivers that the grid misses."""
    along = edges[:, 2:] - edges[:, :2]
    left = np.column_stack([-along[:, 1], along[:, 0]])
    return 0.5 * (edges[:, :2] + edges[:, 2:]) + 0.01 * left


def _inside(points: Floats, edges: Floats) -> np.ndarray[tuple[int, ...], np.dtype[np.bool_]]:
    """Even-odd rule, for many points at once."""
    odd = np.zeros(len(points), dtype=bool)
    for x0, y0, x1, y1 in edges:
        spans = (y0 > points[:, 1]) != (y1 > points[:, 1])
        if y0 != y1:
            odd ^= spans & (points[:, 0] < x0 + (points[:, 1] - y0) * (x1 - x0) / (y1 - y0))
    return odd


def _distance(points: Floats, edges: Floats) -> Floats:
    """Distance of each point from the nearest edge, mm."""
    least = np.full(len(points), np.inf)
    for x0, y0, x1, y1 in edges:
        dx, dy = x1 - x0, y1 - y0
        t = np.clip(((points[:, 0] - x0) * dx + (points[:, 1] - y0) * dy) / max(dx * dx + dy * dy, 1e-300), 0.0, 1.0)
        least = np.minimum(least, np.hypot(points[:, 0] - x0 - t * dx, points[:, 1] - y0 - t * dy))
    return least
