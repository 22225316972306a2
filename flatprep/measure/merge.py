"""Pieces of one web (or slot) put together, so that it is told once."""

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.measure.boundary import Bools, Boundary, Ints
from flatprep.measure.discs import Pieces

SAMPLES = 17
"""So many places on each side are looked at between two pieces."""
FEW = 5
"""So many are enough to see that most strips are too wide."""
SAME_PLACE_MM = 1e-6
"""Ends this near to each other on a contour are at one place."""
MOST_ALIKE = 8
"""So many ends at one place and the next are paired with each other."""
ROOM = 1.02
"""What is at most so many times the sought width stays one web."""

Strips = tuple[list[Ints], list[Floats], list[Floats]]
"""Contour, start and length (mm) of the runs between two pieces, on both sides."""


def groups(b: Boundary, s: Pieces, most_mm: float) -> list[list[int]]:
    """Group pieces between which the boundary stays within `most_mm`."""
    pairs = neighbours(s)
    head = list(range(len(s)))
    if len(pairs):
        for i, j in pairs[_linked(b, s, pairs, ROOM * most_mm)].tolist():
            head[_root(head, i)] = _root(head, j)
    out: dict[int, list[int]] = {}
    for k in range(len(s)):
        out.setdefault(_root(head, k), []).append(k)
    return list(out.values())


def _root(head: list[int], k: int) -> int:
    while head[k] != k:
        head[k] = head[head[k]]
        k = head[k]
    return k


def neighbours(s: Pieces) -> Ints:
    """Pairs of pieces whose ends follow each other on a contour, both between the same two contours, shape (m, 2).

    Ends at one place are in no order: each of them is paired with all that lie there, and with the next place's.
    """
    low, high = s.contour.min(axis=1), s.contour.max(axis=1)
    piece = np.tile(np.arange(len(s)), 2)
    own = np.concatenate([s.contour[:, 0], s.contour[:, 1]])
    place = np.concatenate([s.place[:, 0].mean(axis=1), s.place[:, 1].mean(axis=1)])
    line = np.column_stack([np.tile(low, 2), np.tile(high, 2), own])
    order = np.lexsort((place, line[:, 2], line[:, 1], line[:, 0]))
    piece, line = piece[order], line[order]
    fresh = np.append(True, (line[1:] != line[:-1]).any(axis=1))
    spot = np.cumsum(fresh | np.append(True, np.diff(place[order]) > SAME_PLACE_MM))
    first = np.nonzero(fresh)[0]
    size = np.diff(np.append(first, len(piece)))
    start, size = np.repeat(first, size), np.repeat(size, size)
    spots = spot[start + size - 1] - spot[start] + 1
    rank = np.arange(len(piece)) - start
    pairs = []
    for ahead in range(1, MOST_ALIKE + 1):
        # the last end on a contour is followed by its first
        other = start + (rank + ahead) % size
        near = (ahead < size) & (np.mod(spot[other] - spot, spots) <= 1)
        pairs.append(np.column_stack([piece, piece[other]])[near])
    found = np.sort(np.vstack(pairs), axis=1)
    return np.unique(found[found[:, 0] != found[:, 1]], axis=0)


def _linked(b: Boundary, s: Pieces, pairs: Ints, room_mm: float) -> Bools:
    """Which pairs have a strip between them that is nowhere wider than the room, shape (m,)."""
    i, j = pairs.T
    strips = _strips(b, s, i, j)
    span = strips[2]
    # from any place between, an end is at most half the run away
    out: Bools = np.maximum(*span) / 2.0 + np.maximum(s.chord.width[i], s.chord.width[j]) <= room_mm
    open_ = np.nonzero(~out)[0]
    if len(open_):
        open_ = open_[~_surely_wide(b, strips, open_, room_mm)]
    if len(open_):
        one, two = (_along(b, strips, side, open_, SAMPLES) for side in (0, 1))
        out[open_] = np.maximum(_farthest(one, two), _farthest(two, one)) <= room_mm
    return out


def _surely_wide(b: Boundary, strips: Strips, rows: Ints, room_mm: float) -> Bools:
    """Which strips have a place that is too far from the other side, judged by a few places on each."""
    sides = [_along(b, strips, side, rows, FEW) for side in (0, 1)]
    apart = np.sqrt(np.sum((sides[0][:, :, None] - sides[1][:, None]) ** 2, axis=3))
    half_step = [strips[2][side][rows, None] / (2 * (FEW - 1)) for side in (0, 1)]
    far = [apart.min(axis=2) - half_step[1], apart.min(axis=1) - half_step[0]]
    return np.asarray((np.maximum(*far) > room_mm).any(axis=1))


def _along(b: Boundary, strips: Strips, side: int, rows: Ints, count: int) -> Floats:
    """Places along one side of strips, evenly, shape (m, count, 2)."""
    contour, start, span = (column[side][rows] for column in strips)
    places = start[:, None] + span[:, None] * np.linspace(0.0, 1.0, count)
    return b.locate(np.repeat(contour, count), places.ravel()).reshape(len(rows), count, 2)


def _strips(b: Boundary, s: Pieces, i: Ints, j: Ints) -> Strips:
    """Find the runs of boundary between pieces i and j, the shortest that face each other: contour, start, length.

    Material lies to the left on both sides, so the sides run against each other.
    """
    place = s.place.mean(axis=2)
    best = np.full(len(i), np.inf)
    contour = [s.contour[i, 0].copy(), s.contour[i, 1].copy()]
    start, span = [np.zeros(len(i)), np.zeros(len(i))], [np.full(len(i), np.inf), np.full(len(i), np.inf)]
    for side in (0, 1):
        same = (s.contour[i, 0] == s.contour[j, side]) & (s.contour[i, 1] == s.contour[j, 1 - side])
        for ahead in (True, False):
            runs = [
                way_along(place[i, 0], place[j, side], b.total[contour[0]], ahead=ahead),
                way_along(place[i, 1], place[j, 1 - side], b.total[contour[1]], ahead=not ahead),
            ]
            size = runs[0][1] + runs[1][1]
            better = same & (size < best)
            best = np.where(better, size, best)
            for k in (0, 1):
                start[k] = np.where(better, runs[k][0], start[k])
                span[k] = np.where(better, runs[k][1], span[k])
    return contour, start, span


def way_along(here: Floats, there: Floats, total: Floats, *, ahead: bool) -> tuple[Floats, Floats]:
    """Start and length of the run between two places of a contour `total` long, from here ahead or back to here."""
    first, last = (here, there) if ahead else (there, here)
    # a step back by a rounding error is no way round
    return first, np.maximum(np.mod(last - first + SAME_PLACE_MM, total) - SAME_PLACE_MM, 0.0)


def _farthest(points: Floats, line: Floats) -> Floats:
    """Largest distance of points (m, n, 2) from lines through points (m, k, 2), shape (m,)."""
    a, d = line[:, None, :-1], line[:, None, 1:] - line[:, None, :-1]
    p = points[:, :, None]
    along = np.sum((p - a) * d, axis=3) / np.maximum(np.sum(d * d, axis=3), 1e-30)
    off = p - a - np.clip(along, 0.0, 1.0)[..., None] * d
    squared = np.sum(off * off, axis=3).min(axis=2).max(axis=1)
    return np.asarray(np.sqrt(squared))
