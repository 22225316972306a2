"""Entities without length and entities drawn twice: taken out before chaining, and told."""

from collections import Counter
from collections.abc import Iterator, Sequence

import numpy as np

from flatprep.base.tolerances import Tolerances
from flatprep.geom import bulge
from flatprep.geom.bulge import Floats
from flatprep.model.drawing import Curve, Fault

NO_LENGTH_MM = 1e-3
"""What spans no more than this is a point: its ends are one (see `flatprep.drawing.ends`)."""
_MANY = 20
"""More doubles than this are told in one finding."""


def tidy(curves: Sequence[Curve], tol: Tolerances) -> tuple[list[Curve], list[Fault]]:
    """Take out zero lengths and exact doubles.

    Returns
    -------
    curves, faults
        The rest, in order, and what was taken out.
    """
    sized, faults = _without_zero_lengths(curves)
    single, doubles = _without_doubles(sized, tol.same_mm / 2.0)
    faults += told_doubles([(_middle(c.xyb, closed=c.closed), c.handle) for c in doubles])
    return single, faults


def told_doubles(doubles: Sequence[tuple[tuple[float, float], str]]) -> list[Fault]:
    """Faults for doubles at these places, (place, handle) each; many are told in one."""
    if len(doubles) > _MANY:
        at, _ = doubles[0]
        handles = tuple(h for _, h in doubles[:_MANY])
        what = f"{len(doubles)} lines are drawn twice, the first one here"
        return [Fault("duplicate-line", at, None, handles, what, tuple(place for place, _ in doubles))]
    return [Fault("duplicate-line", at, None, (handle,), "a line is drawn twice") for at, handle in doubles]


def _without_zero_lengths(curves: Sequence[Curve]) -> tuple[list[Curve], list[Fault]]:
    sized = _spreads([c.xyb for c in curves]) > NO_LENGTH_MM
    kept = [c for c, has_length in zip(curves, sized, strict=True) if has_length]
    empty = [c for c, has_length in zip(curves, sized, strict=True) if not has_length]
    if not empty:
        return kept, []
    first = empty[0]
    what = "an entity without length" if len(empty) == 1 else f"{len(empty)} entities without length, the first one"
    at = (float(first.xyb[0, 0]), float(first.xyb[0, 1]))
    places = tuple((float(c.xyb[0, 0]), float(c.xyb[0, 1])) for c in empty)
    return kept, [Fault("tiny-segment", at, 0.0, tuple(c.handle for c in empty[:_MANY]), what, places)]


def _spreads(polylines: Sequence[Floats]) -> Floats:
    """Larger side of the box of each polyline's vertices, shape (n,)."""
    if not polylines:
        return np.empty(0)
    first = np.cumsum([0, *(len(p) for p in polylines[:-1])])
    xy = np.concatenate(polylines)[:, :2]
    return np.asarray((np.maximum.reduceat(xy, first) - np.minimum.reduceat(xy, first)).max(axis=1))


def _without_doubles(curves: Sequence[Curve], tol: float) -> tuple[list[Curve], list[Curve]]:
    """Split off open curves whose ends and middle coincide with an earlier one's, whichever way they run."""
    lines = [k for k, c in enumerate(curves) if not c.closed]
    signs = _signatures([curves[k].xyb for k in lines])
    doubles: set[int] = set()
    seen: dict[bytes, list[Floats]] = {}
    for number, keys in _neighbours(signs, tol):
        sign = signs[number]
        if any(np.abs(other - sign).max() <= tol for key in keys for other in seen.get(key, ())):
            doubles.add(lines[number])
            continue
        for key in keys:
            seen.setdefault(key, []).append(sign)
    return [c for k, c in enumerate(curves) if k not in doubles], [curves[k] for k in sorted(doubles)]


def _neighbours(signs: Floats, tol: float) -> Iterator[tuple[int, tuple[bytes, bytes]]]:
    """Yield the rows that share a cell of a grid with another row, each with its cells.

    Of two grids, half a cell apart: neighbours share a cell of the one or the other in every coordinate but few.
    """
    cells = [np.floor(signs / (64 * tol) + grid / 2.0) for grid in (0, 1)]
    names = [rows.view(f"V{rows.dtype.itemsize * rows.shape[1]}").ravel().tolist() for rows in cells]
    crowded = [Counter(column) for column in names]
    for number, (first, second) in enumerate(zip(*names, strict=True)):
        if crowded[0][first] > 1 or crowded[1][second] > 1:
            yield number, (b"0" + first, b"1" + second)


def _signatures(polylines: Sequence[Floats]) -> Floats:
    """Both ends, the smaller first, and the point halfway, of open polylines, shape (n, 6)."""
    out = np.empty((len(polylines), 6))
    if not polylines:
        return out
    single = np.array([len(p) == 2 for p in polylines])
    pairs = np.concatenate([np.empty((0, 3)), *(p for p in polylines if len(p) == 2)]).reshape(-1, 2, 3)
    a, z = pairs[:, 0, :2], pairs[:, 1, :2]
    # the top of an arc lies right of its chord by bulge x half the chord
    right = np.column_stack([z[:, 1] - a[:, 1], a[:, 0] - z[:, 0]])
    out[single] = np.hstack([a, z, (a + z + right * pairs[:, 0, 2:]) / 2.0])
    for k in np.flatnonzero(~single).tolist():
        p = polylines[k]
        out[k] = (*p[0, :2], *p[-1, :2], *_middle(p, closed=False))
    swap = (out[:, 0] > out[:, 2]) | ((out[:, 0] == out[:, 2]) & (out[:, 1] > out[:, 3]))
    out[swap] = out[swap][:, [2, 3, 0, 1, 4, 5]]
    return out


def _middle(xyb: Floats, *, closed: bool) -> tuple[float, float]:
    """Return the point halfway along the middle segment."""
    seg = bulge.segments(xyb, closed=closed)
    k = len(seg) // 2
    if not seg.is_arc[k]:
        x, y = (seg.start[k] + seg.end[k]) / 2.0
    else:
        a = seg.angle[k] + seg.sweep[k] / 2.0
        x, y = seg.centre[k] + seg.radius[k] * np.array([np.cos(a), np.sin(a)])
    return float(x), float(y)
