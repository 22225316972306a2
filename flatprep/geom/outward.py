"""Polygons that hold a curved outline wholly: arcs circumscribed, then corners taken away on the void's side only."""

import numpy as np
import numpy.typing as npt

from flatprep.geom.bulge import Floats, segments

MOST_PASSES = 60


def outside_points(xyb: Floats, chord_mm: float) -> Floats:
    """Points of a polygon around the material of a closed bulge polyline with the material on its left.

    Arcs that bow into the void are circumscribed by tangents, arcs that bow into the material cut short by chords.

    Parameters
    ----------
    xyb : ndarray, shape (n, 3)
    chord_mm
        Largest distance of the polygon from the curve.

    Returns
    -------
    ndarray, shape (m, 2)
        The polyline's vertices are among them; straight contours come back unchanged.
    """
    seg = segments(xyb, closed=True)
    if not seg.is_arc.any():
        return xyb[:, :2].copy()
    radius = np.where(seg.is_arc, seg.radius, 1.0)
    convex = seg.sweep > 0.0
    outer = 2.0 * np.arccos(radius / (radius + chord_mm))
    inner = 2.0 * np.arccos(np.clip(1.0 - chord_mm / radius, -1.0, 1.0))
    step = np.clip(np.where(convex, outer, inner), 1e-4, np.pi / 2)
    pieces = np.where(seg.is_arc, np.maximum(np.ceil(np.abs(seg.sweep) / step - 1e-9), 1), 1).astype(np.int64)
    counts = pieces + convex
    which = np.repeat(np.arange(len(seg)), counts)
    nth = np.arange(len(which)) - np.repeat(np.cumsum(counts) - counts, counts)
    bows = convex[which]
    angle = seg.angle[which] + seg.sweep[which] * (nth - 0.5 * bows) / pieces[which]
    reach = radius[which] / np.where(bows, np.cos(seg.sweep[which] / pieces[which] / 2.0), 1.0)
    first = nth == 0
    turn = np.where(first, 0.0, angle)
    out = seg.centre[which] + reach[:, None] * np.column_stack([np.cos(turn), np.sin(turn)])
    out[first] = seg.start[which[first]]
    return np.asarray(out, dtype=np.float64)


def simplify_outward(ring: Floats, tolerance_mm: float) -> Floats:
    """Fewer corners; the material, on the ring's left, only grows, by at most `tolerance_mm`.

    A corner that points into the material goes by joining its neighbours; an edge between two corners that point
    out goes by lengthening the edges beside it until they meet. What each corner has moved in all is kept account of.

    Parameters
    ----------
    ring : ndarray, shape (n, 2)

    Returns
    -------
    ndarray, shape (m, 2), m <= n
    """
    points, moved = ring, np.zeros(len(ring))
    for _ in range(MOST_PASSES):
        if len(points) <= 4:
            break
        fewer = _one_pass(points, moved, tolerance_mm)
        if fewer is None:
            break
        points, moved = fewer
    return points


def _one_pass(points: Floats, moved: Floats, tolerance_mm: float) -> tuple[Floats, Floats] | None:
    n = len(points)
    before, after = np.roll(points, 1, axis=0), np.roll(points, -1, axis=0)
    into, out = points - before, after - points
    turn = _cross(into, out)
    bend_cost = _reflex_cost(before, points, after, turn)
    meet, edge_cost = _lengthened(points, into, out, turn)
    moved_after = np.roll(moved, -1)
    bend_total = np.maximum(moved, np.maximum(np.roll(moved, 1), moved_after)) + bend_cost
    edge_total = np.maximum(moved, moved_after) + edge_cost
    total = np.concatenate([bend_total, edge_total])
    order = np.argsort(total, kind="stable")
    order = order[total[order] <= tolerance_mm]
    if not len(order):
        return None
    keep, place, left = np.ones(n, dtype=bool), points.copy(), moved.copy()
    busy = np.zeros(n, dtype=bool)
    for k in order.tolist():
        i = k % n
        span = [(i + d) % n for d in ((-1, 0, 1) if k < n else (-1, 0, 1, 2))]
        if busy[span].any() or keep.sum() <= 4:
            continue
        busy[span] = True
        if k < n:
            keep[i] = False
            left[span[0]], left[span[2]] = (max(left[span[0]], total[k]), max(left[span[2]], total[k]))
        else:
            keep[span[2]] = False
            place[i], left[i] = meet[i], total[k]
    return place[keep], left[keep]


def _reflex_cost(before: Floats, points: Floats, after: Floats, turn: Floats) -> Floats:
    """Distance of each corner from the line of its neighbours where it points into the material, else infinite."""
    chord = after - before
    length = np.hypot(chord[:, 0], chord[:, 1])
    off = np.abs(_cross(chord, points - before)) / np.maximum(length, 1e-300)
    forward = np.sum((points - before) * (after - points), axis=1) >= 0.0
    straight = (off <= 1e-9) & forward
    cost: Floats = np.where((turn < 0.0) & (length > 0.0), off, np.where(straight, 0.0, np.inf))
    return cost


def _lengthened(points: Floats, into: Floats, out: Floats, turn: Floats) -> tuple[Floats, Floats]:
    """Where the edges beside each edge meet, and how far that is from the edge: infinite where they do not."""
    beyond = np.roll(out, -1, axis=0)
    lean = _cross(into, beyond)
    fine = (turn > 0.0) & (np.roll(turn, -1) > 0.0) & (lean > 1e-12)
    along = np.where(fine, _cross(out, beyond) / np.where(fine, lean, 1.0), 0.0)
    meet = points + along[:, None] * into
    foot = np.sum((meet - points) * out, axis=1) / np.maximum(np.sum(out * out, axis=1), 1e-300)
    off = np.hypot(*(meet - points - np.clip(foot, 0.0, 1.0)[:, None] * out).T)
    return meet, np.where(fine, off, np.inf)


def _cross(a: Floats, b: Floats) -> npt.NDArray[np.float64]:
    return np.asarray(a[:, 0] * b[:, 1] - a[:, 1] * b[:, 0], dtype=np.float64)
