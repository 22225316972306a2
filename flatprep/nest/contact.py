"""Two outlines against each other: do they overlap, how far are they apart, how badly do they collide."""

import math

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import bare
from flatprep.nest.outlines import BLOCK, Outlines, Rings

# Floor of the loss of a collision: this share of the larger diameter, times the smaller piece's mean side.
FLOOR_SHARE = 0.002
# Circles this much apart (share of the larger diameter) still push each other, ever more weakly.
REACH_SHARE = 0.01
# ... and not at all from this many such distances on.
FADE = 5.0


@bare
def is_inside(rings: Rings, v: int, px: float, py: float) -> bool:
    """Tell whether a point (mm, in the frame of variant v) lies in its material: the even-odd rule."""
    odd = False
    for e in range(rings.at[v, 0], rings.at[v, 1]):
        y0 = rings.edge[e, 1]
        y1 = rings.edge[e, 3]
        if (y0 > py) != (y1 > py):
            x0 = rings.edge[e, 0]
            if px < x0 + (py - y0) * (rings.edge[e, 2] - x0) / (y1 - y0):
                odd = not odd
    return odd


@bare
def apart(one: Floats, i: int, other: Floats, j: int, shift: tuple[float, float], by: float) -> bool:
    """Tell whether boxes one[i] and other[j], the latter shifted, are more than `by` mm apart."""
    dx, dy = shift
    return bool(
        other[j, 0] + dx - one[i, 2] > by
        or one[i, 0] - other[j, 2] - dx > by
        or other[j, 1] + dy - one[i, 3] > by
        or one[i, 1] - other[j, 3] - dy > by
    )


@bare
def blocks_cross(edge: Floats, rows: tuple[int, int, int, int], shift: tuple[float, float]) -> bool:
    """Tell whether an edge of rows i0 to i1 crosses one of rows j0 to j1, the latter shifted (mm)."""
    i0, i1, j0, j1 = rows
    dx, dy = shift
    for j in range(j0, j1):
        cx, cy, ex, ey = edge[j, 0] + dx, edge[j, 1] + dy, edge[j, 2] + dx, edge[j, 3] + dy
        left, right = min(cx, ex), max(cx, ex)
        low, high = min(cy, ey), max(cy, ey)
        vx, vy = ex - cx, ey - cy
        for i in range(i0, i1):
            x0, x1 = edge[i, 0], edge[i, 2]
            if (x0 < left and x1 < left) or (x0 > right and x1 > right):
                continue
            y0, y1 = edge[i, 1], edge[i, 3]
            if (y0 < low and y1 < low) or (y0 > high and y1 > high):
                continue
            if (vx * (y0 - cy) - vy * (x0 - cx) > 0.0) == (vx * (y1 - cy) - vy * (x1 - cx) > 0.0):
                continue
            ux, uy = x1 - x0, y1 - y0
            if (ux * (cy - y0) - uy * (cx - x0) > 0.0) != (ux * (ey - y0) - uy * (ex - x0) > 0.0):
                return True
    return False


@bare
def edges_cross(rings: Rings, a: int, b: int, dx: float, dy: float) -> bool:
    """Tell whether an edge of variant a crosses one of variant b moved by (dx, dy) mm."""
    first_a, first_b = rings.block_at[a, 0], rings.block_at[b, 0]
    for n in range(first_b, rings.block_at[b, 1]):
        if apart(rings.box, a, rings.block, n, (dx, dy), 0.0):
            continue
        j0 = rings.at[b, 0] + (n - first_b) * BLOCK
        j1 = min(j0 + BLOCK, rings.at[b, 1])
        for m in range(first_a, rings.block_at[a, 1]):
            if apart(rings.block, m, rings.block, n, (dx, dy), 0.0):
                continue
            i0 = rings.at[a, 0] + (m - first_a) * BLOCK
            if blocks_cross(rings.edge, (i0, min(i0 + BLOCK, rings.at[a, 1]), j0, j1), (dx, dy)):
                return True
    return False


@bare
def a_point_of(outlines: Outlines, v: int) -> tuple[float, float]:
    """Return a point of a variant's material (mm): within it, or a corner where it is too thin for a circle."""
    pole = outlines.pole_at[v, 0]
    if outlines.pole[pole, 2] > 0.0:
        return outlines.pole[pole, 0], outlines.pole[pole, 1]
    corner = outlines.rings.at[v, 0]
    return outlines.rings.edge[corner, 0], outlines.rings.edge[corner, 1]


@bare
def overlap(outlines: Outlines, a: int, b: int, dx: float, dy: float) -> bool:
    """Tell whether variant b, its origin (dx, dy) mm from that of variant a, shares material with it; exact.

    Where no edges cross, one lies within the other or they are free: a point of each tells, and not one of its
    border, which may lie on the other's.
    """
    rings = outlines.rings
    if (
        rings.box[a, 2] <= rings.box[b, 0] + dx
        or rings.box[b, 2] + dx <= rings.box[a, 0]
        or rings.box[a, 3] <= rings.box[b, 1] + dy
        or rings.box[b, 3] + dy <= rings.box[a, 1]
    ):
        return False
    if edges_cross(rings, a, b, dx, dy):
        return True
    x, y = a_point_of(outlines, b)
    if is_inside(rings, a, x + dx, y + dy):
        return True
    x, y = a_point_of(outlines, a)
    return is_inside(rings, b, x - dx, y - dy)


@bare
def squared_distance(px: float, py: float, x0: float, y0: float, x1: float, y1: float) -> float:
    """Square of the distance of a point from a segment, mm²."""
    ux, uy = x1 - x0, y1 - y0
    wx, wy = px - x0, py - y0
    along = wx * ux + wy * uy
    length = ux * ux + uy * uy
    if along <= 0.0:
        return wx * wx + wy * wy
    if along >= length:
        return (px - x1) * (px - x1) + (py - y1) * (py - y1)
    cross = wx * uy - wy * ux
    return cross * cross / length


@bare
def _nearest_corner(edge: Floats, rows: tuple[int, int, int, int], shift: tuple[float, float], best: float) -> float:
    """Least squared distance, at most `best`, of the corners of rows j0 to j1, shifted (mm), from rows i0 to i1."""
    i0, i1, j0, j1 = rows
    dx, dy = shift
    for j in range(j0, j1):
        px, py = edge[j, 0] + dx, edge[j, 1] + dy
        for i in range(i0, i1):
            best = min(best, squared_distance(px, py, edge[i, 0], edge[i, 1], edge[i, 2], edge[i, 3]))
    return best


@bare
def gap(rings: Rings, a: int, b: int, dx: float, dy: float, cap: float) -> float:
    """Least distance of a corner of one outline from the edges of the other, mm, at most `cap`.

    Notes
    -----
    Where the two are free this is their distance. Where they collide it is a lower bound of the move that frees
    them: freed at last, a corner lies on an edge (the border of the Minkowski sum consists of such moves).
    """
    best, edge = cap * cap, rings.edge
    first_a, first_b = rings.block_at[a, 0], rings.block_at[b, 0]
    for n in range(first_b, rings.block_at[b, 1]):
        if apart(rings.box, a, rings.block, n, (dx, dy), cap):
            continue
        j0 = rings.at[b, 0] + (n - first_b) * BLOCK
        j1 = min(j0 + BLOCK, rings.at[b, 1])
        for m in range(first_a, rings.block_at[a, 1]):
            if apart(rings.block, m, rings.block, n, (dx, dy), math.sqrt(best)):
                continue
            i0 = rings.at[a, 0] + (m - first_a) * BLOCK
            i1 = min(i0 + BLOCK, rings.at[a, 1])
            best = _nearest_corner(edge, (i0, i1, j0, j1), (dx, dy), best)
            best = _nearest_corner(edge, (j0, j1, i0, i1), (-dx, -dy), best)
    return math.sqrt(best)


@bare
def depth(outlines: Outlines, a: int, b: int, dx: float, dy: float) -> float:
    """Lower bound of the move that frees b from a, mm: the deepest overlap of two inner circles, 0 if none."""
    deepest = 0.0
    for i in range(outlines.pole_at[a, 0], outlines.pole_at[a, 1]):
        for j in range(outlines.pole_at[b, 0], outlines.pole_at[b, 1]):
            ux = outlines.pole[j, 0] + dx - outlines.pole[i, 0]
            uy = outlines.pole[j, 1] + dy - outlines.pole[i, 1]
            reach = outlines.pole[i, 2] + outlines.pole[j, 2] - deepest
            if reach > 0.0 and ux * ux + uy * uy < reach * reach:
                deepest = outlines.pole[i, 2] + outlines.pole[j, 2] - math.sqrt(ux * ux + uy * uy)
    return deepest


@bare
def collision_loss(outlines: Outlines, a: int, b: int, dx: float, dy: float) -> float:
    """How bad a collision is: a smooth stand-in for the root of the overlap's area, weighed by the pieces' size.

    Returns
    -------
    float
        mm²; never 0, whatever the distance: whether the two collide at all is for `overlap` to tell.

    Notes
    -----
    The area is the sum over pairs of inner circles of their depth times the smaller radius; depth falls off
    smoothly as e²/(2e - depth) below e, so that a shallow collision, too, knows the way out (the measure of
    overlap by circles: Imamichi and Nagamochi 2007). The root makes many slight collisions dearer than one
    deep one, the fourth roots of the hulls' areas bring pieces of all sizes to one scale.
    """
    sa, sb = outlines.shape[a], outlines.shape[b]
    larger = max(outlines.size[sa, 1], outlines.size[sb, 1])
    reach = REACH_SHARE * larger
    area = FLOOR_SHARE * larger * min(outlines.size[sa, 2], outlines.size[sb, 2])
    for i in range(outlines.pole_at[a, 0], outlines.pole_at[a, 1]):
        px, py = outlines.pole[i, 0] - dx, outlines.pole[i, 1] - dy
        radius = outlines.pole[i, 2]
        for j in range(outlines.pole_at[b, 0], outlines.pole_at[b, 1]):
            ux = outlines.pole[j, 0] - px
            uy = outlines.pole[j, 1] - py
            both = radius + outlines.pole[j, 2]
            far = ux * ux + uy * uy
            if far > (both + FADE * reach) * (both + FADE * reach):
                continue
            deep = both - math.sqrt(far)
            if deep < reach:
                deep = reach * reach / (2.0 * reach - deep)
            area += deep * min(radius, outlines.pole[j, 2])
    return float(math.sqrt(area) * outlines.size[sa, 0] * outlines.size[sb, 0])
