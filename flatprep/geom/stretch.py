"""Stretches of closed polylines by their length along the arcs: to find a place, to cut out, to leave out."""

from collections.abc import Sequence

import numpy as np

from flatprep.geom.bulge import Floats, Segments, segments

Span = tuple[float, float]
"""Start and end, mm along a closed polyline from its first vertex; the end may lie one turn on."""
LEAST_MM = 1e-9


def lengths(seg: Segments) -> Floats:
    """Length of each segment along its arc, mm, shape (n,)."""
    chord = np.hypot(*(seg.end - seg.start).T)
    return np.where(seg.is_arc, np.where(seg.is_arc, seg.radius, 0.0) * np.abs(seg.sweep), chord)


def point_at(xyb: Floats, s_mm: float) -> tuple[Floats, Floats]:
    """Point of a closed polyline at a length from its first vertex, and the unit direction there; each shape (2,)."""
    seg = segments(xyb, closed=True)
    k, share = _place(lengths(seg), s_mm)
    return _point(seg, k, share), _direction(seg, k, share)


def nearest(xyb: Floats, point: tuple[float, float]) -> float:
    """Length along a closed polyline, mm, at which it comes nearest to a point."""
    seg = segments(xyb, closed=True)
    size, p = lengths(seg), np.asarray(point, dtype=np.float64)
    chord = seg.end - seg.start
    along = np.sum((p - seg.start) * chord, axis=1) / np.maximum(np.sum(chord * chord, axis=1), 1e-300)
    toward = p - np.where(seg.is_arc[:, None], seg.centre, 0.0)
    turned = np.arctan2(toward[:, 1], toward[:, 0]) - np.where(seg.is_arc, seg.angle, 0.0)
    turned = np.where(seg.sweep < 0.0, -turned, turned) % (2.0 * np.pi)
    sweep = np.where(seg.is_arc, np.abs(seg.sweep), 1.0)
    before = turned - sweep > np.pi - sweep / 2.0  # beyond its end, and nearer to its start
    share = np.clip(np.where(seg.is_arc, np.where(before, 0.0, turned / sweep), along), 0.0, 1.0)
    places = np.array([_point(seg, k, float(t)) for k, t in enumerate(share)])
    k = int(np.argmin(np.hypot(*(places - p).T)))
    return float(size[:k].sum() + share[k] * size[k])


def stretch(xyb: Floats, span: Span) -> Floats:
    """Open polyline of a stretch of a closed one; the bulges of cut arcs are those of what is left of them."""
    seg = segments(xyb, closed=True)
    size = lengths(seg)
    whole = float(size.sum())
    length = span[1] - span[0]
    k, share = _place(size, span[0] % whole)
    out = []
    while length > LEAST_MM:
        taken = min(length, (1.0 - share) * float(size[k]))
        if taken > LEAST_MM:
            part = taken / float(size[k])
            out.append((*_point(seg, k, share), np.tan(float(seg.sweep[k]) * part / 4.0)))
            end = _point(seg, k, share + part)
        length -= max(taken, LEAST_MM)
        k, share = (k + 1) % len(seg), 0.0
    return np.array([*out, (*end, 0.0)])


def without(xyb: Floats, spans: Sequence[Span]) -> list[Floats]:
    """Open polylines of what is left of a closed one when some stretches are left out; none where nothing is left."""
    whole = float(lengths(segments(xyb, closed=True)).sum())
    merged: list[list[float]] = []
    for start, end in sorted((s % whole, s % whole + min(e - s, whole)) for s, e in spans):
        if merged and start <= merged[-1][1] + LEAST_MM:
            merged[-1][1] = max(merged[-1][1], end)
        else:
            merged.append([start, end])
    while len(merged) > 1 and merged[0][0] + whole <= merged[-1][1] + LEAST_MM:  # the last one runs over the start
        merged[-1][1] = max(merged[-1][1], merged.pop(0)[1] + whole)
    ends = [(merged[k][1], merged[k + 1][0]) for k in range(len(merged) - 1)]
    ends.append((merged[-1][1], merged[0][0] + whole))
    return [stretch(xyb, (a, b)) for a, b in ends if b - a > LEAST_MM]


def _place(size: Floats, s_mm: float) -> tuple[int, float]:
    """Segment at a length along the polyline, and the share of it that lies before."""
    ends = np.cumsum(size)
    s_mm %= float(ends[-1])
    k = min(int(np.searchsorted(ends, s_mm, side="right")), len(size) - 1)
    return k, float((s_mm - (ends[k] - size[k])) / max(size[k], 1e-300))


def _point(seg: Segments, k: int, share: float) -> Floats:
    if share <= 0.0 or share >= 1.0:
        return np.asarray(seg.start[k] if share <= 0.0 else seg.end[k])
    if not seg.is_arc[k]:
        return np.asarray(seg.start[k] + share * (seg.end[k] - seg.start[k]))
    angle = seg.angle[k] + share * seg.sweep[k]
    return np.asarray(seg.centre[k] + seg.radius[k] * np.array([np.cos(angle), np.sin(angle)]))


def _direction(seg: Segments, k: int, share: float) -> Floats:
    if not seg.is_arc[k]:
        chord = seg.end[k] - seg.start[k]
        return np.asarray(chord / np.hypot(*chord))
    angle = seg.angle[k] + share * seg.sweep[k] + np.copysign(np.pi / 2.0, seg.sweep[k])
    return np.array([np.cos(angle), np.sin(angle)])
