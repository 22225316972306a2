"""Values given at a few thicknesses: straight between them."""

from itertools import pairwise

Points = tuple[tuple[float, float], ...]
"""(thickness mm, value) by rising thickness."""


def between(points: Points, at: float) -> float | None:
    """Return the value at `at`, linear between neighbours; None outside the table or where it is empty."""
    if not points or not points[0][0] - 1e-9 <= at <= points[-1][0] + 1e-9:
        return None
    return clamped(points, at)


def clamped(points: Points, at: float) -> float:
    """Return the value at `at`, linear between neighbours, that of the nearest end outside the table."""
    if at <= points[0][0]:
        return points[0][1]
    for (x0, y0), (x1, y1) in pairwise(points):
        if at <= x1:
            return y0 + (y1 - y0) * (at - x0) / (x1 - x0)
    return points[-1][1]
