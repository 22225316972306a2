"""Parts built in code, for tests of measuring and of rules."""

import numpy as np

from flatprep.geom import bulge
from flatprep.model.drawing import Contour, Drawing, Part, UnitsFrom

QUARTER = np.tan(np.pi / 8)


def path(*rows):
    """Closed polyline of (x, y) or (x, y, bulge)."""
    return np.array([(*row, 0.0)[:3] if len(row) == 2 else row for row in rows], dtype=float)


def rectangle(x, y, w, h, fillet=0.0):
    f = fillet
    if not f:
        return path((x, y), (x + w, y), (x + w, y + h), (x, y + h))
    b = QUARTER
    return path(
        (x + f, y), (x + w - f, y, b), (x + w, y + f), (x + w, y + h - f, b),
        (x + w - f, y + h), (x + f, y + h, b), (x, y + h - f), (x, y + f, b),
    )  # fmt: skip


def circle(x, y, r):
    return bulge.circle(x, y, r)


def polygon(x, y, r, sides, turn=0.1):
    """Regular polygon with its corners on a circle of radius r."""
    angles = turn + 2 * np.pi * np.arange(sides) / sides
    return path(*np.column_stack([x + r * np.cos(angles), y + r * np.sin(angles)]))


def obround(x, y, length, width):
    r, s = width / 2, (length - width) / 2
    return path((x - s, y - r), (x + s, y - r, 1.0), (x + s, y + r), (x - s, y + r, 1.0))


def chorded(xyb, chord_mm):
    """The same contour drawn with chords."""
    points = bulge.points_along(xyb, closed=True, chord_mm=chord_mm)
    return np.column_stack([points, np.zeros(len(points))])


def moved(xyb, turn_deg=0.0, dx=0.0, dy=0.0, *, mirrored=False):
    out = bulge.Similarity(turn_deg, dx, dy, mirrored=mirrored).polyline(xyb)
    return bulge.reverse(out, closed=True) if mirrored else out


def contour(xyb, *, hole):
    forward = bulge.signed_area(xyb) > 0
    return Contour(xyb if forward != hole else bulge.reverse(xyb, closed=True), ("",) * len(xyb))


def part(outer, *holes, name="plate", depth=0, bends=(), marks=()):
    inner = tuple(contour(h, hole=True) for h in holes)
    return Part(name, contour(outer, hole=False), inner, bends=bends, marks=marks, depth=depth)


def drawing(*parts, units="mm", **rest):
    return Drawing("plate.dxf", units, UnitsFrom.HEADER, tuple(parts), **rest)
