"""Outlines cut into trapezoids with two sides along an axis: what two pieces forbid each other on a line is then exact.

On a level line every outline is a row of intervals. Between two levels without a corner the ends of an interval run
along edges: a trapezoid. Two trapezoids that share levels forbid one open interval of offsets along the line, known
from their corners alone; the union over all pairs is all that two pieces forbid each other, windows included.
"""

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np
import numpy.typing as npt

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import kernel

Ints = npt.NDArray[np.int64]
Span = tuple[int, int]

THIN_MM = 1e-8
"""Levels nearer than this are one; what overlaps by no more counts as touching."""
MOST_LEVELS = 6
LEAST_LEVEL = 0.1
"""Level edges of an outline that others are tried at: so many, each at least this share of the box's longer side."""


class Cuts(NamedTuple):
    """Trapezoids of several outlines (variants).

    Attributes
    ----------
    row, column : ndarray, shape (m, 6)
        Sides along x and along y: level from and to; lower end at both levels; upper end at both, mm.
    row_at, column_at : ndarray, shape (v + 1,), int64
        Those of variant v are at[v] to at[v + 1], by rising level.
    box : ndarray, shape (v, 4)
        Least x, least y, greatest x, greatest y, mm.
    level : ndarray, shape (k,)
        Heights of the longest level edges, mm; those of variant v are level_at[v] to level_at[v + 1].
    level_at : ndarray, shape (v + 1,), int64
    """

    row: Floats
    row_at: Ints
    column: Floats
    column_at: Ints
    box: Floats
    level: Floats
    level_at: Ints


def cut_up(outlines: Sequence[Sequence[Floats]]) -> Cuts:
    """Cut outlines, each a sequence of rings (even-odd), into trapezoids both ways."""
    rows = [trapezoids(edges_of(rings)) for rings in outlines]
    columns = [trapezoids(edges_of([r[:, ::-1] for r in rings])) for rings in outlines]
    boxes = [np.concatenate([np.vstack(rings).min(axis=0), np.vstack(rings).max(axis=0)]) for rings in outlines]
    levels = [levels_of(rings) for rings in outlines]
    box, level = np.array(boxes).reshape(-1, 4), np.concatenate([np.zeros(0), *levels])
    return Cuts(_stacked(rows), _starts(rows), _stacked(columns), _starts(columns), box, level, _starts(levels))


def levels_of(rings: Sequence[Floats]) -> Floats:
    """Heights of the longest level edges, rising, none twice."""
    edges = np.vstack([np.hstack([ring, np.roll(ring, -1, axis=0)]) for ring in rings])
    along, across = np.abs(edges[:, 2:] - edges[:, :2]).T
    flat = (across <= THIN_MM) & (along >= LEAST_LEVEL * float(np.ptp(edges[:, :2], axis=0).max()))
    longest = edges[flat][np.argsort(-along[flat], kind="stable")][:MOST_LEVELS, 1]
    return np.sort(longest[np.unique(np.round(longest, 7), return_index=True)[1]])


def edges_of(rings: Sequence[Floats]) -> Floats:
    """Edges x0, y0, x1, y1 of closed rings, shape (n, 4), level ones left out, each running upwards."""
    edges = np.vstack([np.hstack([ring, np.roll(ring, -1, axis=0)]) for ring in rings])
    up = np.where((edges[:, 1] <= edges[:, 3])[:, None], edges, edges[:, [2, 3, 0, 1]])
    return np.ascontiguousarray(up[up[:, 3] - up[:, 1] > THIN_MM])


def _stacked(groups: Sequence[Floats]) -> Floats:
    return np.ascontiguousarray(np.vstack([np.zeros((0, 6)), *groups]))


def _starts(groups: Sequence[Floats]) -> Ints:
    return np.concatenate([[0], np.cumsum([len(g) for g in groups])]).astype(np.int64)


def trapezoids(edge: Floats) -> Floats:
    """Cut the region within edges that run upwards (even-odd) into trapezoids with level sides.

    Parameters
    ----------
    edge : ndarray, shape (n, 4)
        x0, y0, x1, y1 with y0 < y1, mm.

    Returns
    -------
    ndarray, shape (m, 6)
        y from, y to, left x at both, right x at both; by rising y from. A pair of edges that runs on past corners of
        others is one trapezoid.
    """
    done = _swept(edge, np.sort(edge[:, 1::2], axis=None))
    return done[np.argsort(done[:, 0], kind="stable")]


@kernel
def _swept(edge: Floats, levels: Floats) -> Floats:
    """Trapezoids in the order in which a level line that moves up leaves them; plain loops, which compile fast."""
    out, count = np.empty((4 * len(edge) + 4, 6)), 0
    open_pairs, begun, still = np.empty((len(edge), 2), dtype=np.int64), np.empty(len(edge)), 0
    since = np.empty(len(edge))
    for k in range(len(levels)):
        if k + 1 < len(levels) and levels[k + 1] - levels[k] <= THIN_MM:
            continue
        pairs = np.empty((0, 2), dtype=np.int64)
        if k + 1 < len(levels):
            pairs = _pairs_at(edge, 0.5 * (levels[k] + levels[k + 1]))
        since[: len(pairs)] = levels[k]
        for j in range(still):
            goes_on = False
            for i in range(len(pairs)):
                if pairs[i, 0] == open_pairs[j, 0] and pairs[i, 1] == open_pairs[j, 1]:
                    since[i], goes_on = begun[j], True
            if not goes_on:
                if count == len(out):
                    out = _doubled(out)
                _between(edge, open_pairs[j], begun[j], levels[k], out[count])
                count += 1
        still = len(pairs)
        for i in range(still):
            open_pairs[i, 0], open_pairs[i, 1], begun[i] = pairs[i, 0], pairs[i, 1], since[i]
    return out[:count]


@kernel
def _doubled(rows: Floats) -> Floats:
    """Rows with room for as many again."""
    more = np.empty((2 * len(rows), rows.shape[1]))
    for r in range(len(rows)):
        for c in range(rows.shape[1]):
            more[r, c] = rows[r, c]
    return more


@kernel
def _pairs_at(edge: Floats, level: float) -> Ints:
    """Edges left and right of the material on a level line, from left to right, shape (m, 2)."""
    spot = np.empty(len(edge))
    who = np.empty(len(edge), dtype=np.int64)
    m = 0
    for e in range(len(edge)):
        if edge[e, 1] < level < edge[e, 3]:
            spot[m] = edge[e, 0] + (level - edge[e, 1]) * (edge[e, 2] - edge[e, 0]) / (edge[e, 3] - edge[e, 1])
            who[m] = e
            m += 1
    _sort(spot, who, m)
    pairs = np.empty((m // 2, 2), dtype=np.int64)
    for i in range(m // 2):
        pairs[i, 0], pairs[i, 1] = who[2 * i], who[2 * i + 1]
    return pairs


@kernel
def _sort(key: Floats, value: Ints, count: int) -> None:
    """Sort the first keys and their values in place (Shell 1959, gaps halved)."""
    step = count // 2
    while step > 0:
        for i in range(step, count):
            k, v, j = key[i], value[i], i
            while j >= step and key[j - step] > k:
                key[j], value[j] = key[j - step], value[j - step]
                j -= step
            key[j], value[j] = k, v
        step //= 2


@kernel
def _between(edge: Floats, pair: Ints, low: float, high: float, out: Floats) -> None:
    """Write the trapezoid of two edges between two levels."""
    out[0], out[1] = low, high
    for side in range(2):
        e = pair[side]
        slope = (edge[e, 2] - edge[e, 0]) / (edge[e, 3] - edge[e, 1])
        out[2 + 2 * side] = edge[e, 0] + (low - edge[e, 1]) * slope
        out[3 + 2 * side] = edge[e, 0] + (high - edge[e, 1]) * slope


@kernel
def forbidden(trap: Floats, i: int, j: int, across: float) -> tuple[float, float]:
    """Open interval of offsets along the line at which trapezoids i and j overlap, j moved `across` by so many mm.

    The ends of both run straight between shared levels, so the extremes lie at the first and the last of them.
    (inf, -inf) where they share no levels.
    """
    low_j, high_j = trap[j, 0] + across, trap[j, 1] + across
    low, high = max(trap[i, 0], low_j), min(trap[i, 1], high_j)
    if high - low <= THIN_MM:
        return np.inf, -np.inf
    p = (low - trap[i, 0]) / (trap[i, 1] - trap[i, 0])
    q = (high - trap[i, 0]) / (trap[i, 1] - trap[i, 0])
    r = (low - low_j) / (high_j - low_j)
    s = (high - low_j) / (high_j - low_j)
    lean_il, lean_ir = trap[i, 3] - trap[i, 2], trap[i, 5] - trap[i, 4]
    lean_jl, lean_jr = trap[j, 3] - trap[j, 2], trap[j, 5] - trap[j, 4]
    first = trap[i, 2] - trap[j, 4] + min(p * lean_il - r * lean_jr, q * lean_il - s * lean_jr)
    last = trap[i, 4] - trap[j, 2] + max(p * lean_ir - r * lean_jl, q * lean_ir - s * lean_jl)
    return first, last


@kernel
def past(trap: Floats, a: Span, b: Span, across: float, along: float) -> float:
    """Least offset along the line, `along` or more, at which outline b is free of outline a.

    Parameters
    ----------
    trap : ndarray, shape (m, 6)
    a, b
        Which rows are which outline.
    across, along
        Where b's origin lies, seen from a's, mm.
    """
    moved = True
    while moved:
        moved = False
        for j in range(b[0], b[1]):
            low, high = trap[j, 0] + across + THIN_MM, trap[j, 1] + across
            left, right = min(trap[j, 2], trap[j, 3]), max(trap[j, 4], trap[j, 5])
            for i in range(a[0], a[1]):
                if trap[i, 0] >= high:
                    break
                if trap[i, 1] <= low or max(trap[i, 4], trap[i, 5]) - left <= along + THIN_MM:
                    continue  # no level shared, or the offsets that it forbids lie behind
                if min(trap[i, 2], trap[i, 3]) - right >= along - THIN_MM:
                    continue  # or ahead
                first, last = forbidden(trap, i, j, across)
                if first < along - THIN_MM and last > along + THIN_MM:
                    along = last
                    moved = True
    return along


@kernel
def back(trap: Floats, a: Span, b: Span, across: float, along: float) -> float:
    """Least offset that outline b slides back to, free at `along`, before it meets outline a; -inf if it never does.

    It stays where it is when it seems to be inside: a contact along the other axis that is good to `THIN_MM` may be
    deeper than that along this one, on a steep edge.
    """
    stop = -np.inf
    for j in range(b[0], b[1]):
        for i in range(a[0], a[1]):
            if trap[i, 0] >= trap[j, 1] + across:
                break
            first, last = forbidden(trap, i, j, across)
            if last > along + 2.0 * THIN_MM:
                if first < along - 2.0 * THIN_MM:
                    return along
            elif last > stop:
                stop = last
    return stop
