"""Which candidate chords are webs or slots: their disc is empty, and they cut off more than a bump or a corner."""

from dataclasses import dataclass

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.measure.boundary import Bools, Boundary, Ints, envelopes
from flatprep.measure.facing import Chords, Features, take, together, unit

WAY_ROUND = 3.0
"""A chord counts if the way round along the boundary is so many times longer than the chord."""
DISC_SHARE, DISC_MM = 0.975, 0.002
"""The disc is tried a little smaller, for curves that are drawn as chords."""
MOST_SAMPLES = 65
"""A stretch is tried at so many places at the most."""
CHUNK = 4096


@dataclass(frozen=True, slots=True, eq=False)
class Pieces:
    """Sound stretches of chords, a row each.

    Attributes
    ----------
    chord : Chords
    t0, t1 : ndarray, shape (m,)
        Where on the chord's stretch the piece begins and ends, 0 to 1.
    row, contour : ndarray of int, shape (m, 2)
        Edge and contour at both ends of the chord.
    place : ndarray, shape (m, 2, 2)
        [piece, end of the chord, begin or end of the piece]: distance along the contour, mm.
    """

    chord: Chords
    t0: Floats
    t1: Floats
    row: Ints
    contour: Ints
    place: Floats

    def __len__(self) -> int:
        return len(self.t0)


def sound(b: Boundary, f: Features, c: Chords) -> Pieces:
    """Return the pieces of the chords' stretches that are webs (or slots)."""
    which, share, length = _samples(f, c)
    clear = free(b, b.part[f.row[c.first[which]]], *chord_at(f, c, which, share))
    edge = np.append(True, which[1:] != which[:-1])
    begin = np.nonzero(clear & (edge | ~np.append(False, clear[:-1])))[0]
    close = np.nonzero(clear & (np.append(edge[1:], True) | ~np.append(clear[1:], False)))[0]
    row = which[begin]
    step = 1.0 / np.maximum(np.bincount(which, minlength=len(c.width))[row] - 1, 1)
    # what closes a stretch blocks the disc before its end; the end still belongs to it
    margin = 0.5 * c.width[row] / np.maximum(length[row], 1e-9) + step + 1e-9
    t0 = np.where(share[begin] <= margin, 0.0, share[begin])
    t1 = np.where(1.0 - share[close] <= margin, 1.0, share[close])
    return _worth(b, pieces(b, f, take(c, row), t0, t1))


def _samples(f: Features, c: Chords) -> tuple[Ints, Floats, Floats]:
    """Places to try: which chord, at which share of its stretch; and the lengths of the stretches, mm."""
    length = np.maximum(np.hypot(*(c.p1 - c.p0).T), np.hypot(*(c.q1 - c.q0).T))
    length = np.where(c.curved, np.abs(f.rho[c.first]) * (c.nu1 - c.nu0), length)
    steps = np.ceil(np.minimum(length / np.maximum(c.width, 1e-6), MOST_SAMPLES // 2)).astype(np.intp)
    count = np.where(length > 1e-9, 2 * np.maximum(steps, 1) + 1, 1)
    which = np.repeat(np.arange(len(count)), count)
    k = np.arange(len(which)) - np.repeat(np.cumsum(count) - count, count)
    return which, np.where(count[which] > 1, k / np.maximum(count[which] - 1, 1), 0.5), length


def chord_at(f: Features, c: Chords, which: Ints, share: Floats) -> tuple[Floats, Floats]:
    """Both ends of the chords `which` at a `share` of their stretches, each of shape (m, 2)."""
    t = share[:, None]
    p = c.p0[which] * (1 - t) + c.p1[which] * t
    q = c.q0[which] * (1 - t) + c.q1[which] * t
    k = np.nonzero(c.curved[which])[0]
    row, t = which[k], share[k]
    nu = unit(c.nu0[row] * (1 - t) + c.nu1[row] * t)
    w0, w1 = np.hypot(*(c.q0[row] - c.p0[row]).T), np.hypot(*(c.q1[row] - c.p1[row]).T)
    p[k] = f.at[c.first[row]] + f.rho[c.first[row]][:, None] * nu
    q[k] = p[k] + (w0 * (1 - t) + w1 * t)[:, None] * nu
    return p, q


def free(b: Boundary, part: Ints, p: Floats, q: Floats) -> Bools:
    """Whether the discs on the chords pq as diameters, a little smaller, hold no edge of their part, shape (m,)."""
    middle = (p + q) / 2.0
    radius = np.hypot(*(q - p).T) / 2.0 * DISC_SHARE - DISC_MM
    out = np.ones(len(p), dtype=bool)
    tried = np.nonzero(radius > 0)[0]
    for k in range(0, len(tried), CHUNK):
        some = tried[k : k + CHUNK]
        m, r = middle[some], radius[some]
        which, row = b.tree.query(envelopes(np.hstack([m - r[:, None], m + r[:, None]])))
        own = b.part[row] == part[some[which]]
        which, row = which[own], row[own]
        hit = b.distance(row, m[which]) < r[which]
        out[some[which[hit]]] = False
    return out


def pieces(b: Boundary, f: Features, c: Chords, t0: Floats, t1: Floats) -> Pieces:
    """Pieces of chords from t0 to t1, with their places on the contours."""
    rows = np.arange(len(t0))
    ends = np.column_stack([c.first, c.second])
    row = f.row[ends]
    place = np.empty((len(t0), 2, 2))
    for k, t in enumerate((t0, t1)):
        for side, points in enumerate(chord_at(f, c, rows, t)):
            place[:, side, k] = _along(b, f, ends[:, side], points)
    return Pieces(c, t0, t1, row, b.contour[row], place)


def _along(b: Boundary, f: Features, feature: Ints, points: Floats) -> Floats:
    """Distance along the contour of points that lie on features, mm."""
    row = f.row[feature]
    on_line = np.hypot(*(points - b.start[row]).T)
    ray = points - f.at[feature]
    with np.errstate(invalid="ignore"):
        turned = np.mod((np.arctan2(ray[:, 1], ray[:, 0]) - b.angle[row]) * np.sign(b.sweep[row]), 2 * np.pi)
        swept = np.where(turned > np.pi + np.abs(b.sweep[row]) / 2, 0.0, np.minimum(turned, np.abs(b.sweep[row])))
        on_arc = np.where(b.is_arc[row], b.radius[row], 0.0) * swept
    along: Floats = b.run[row] + np.select(
        [f.kind[feature] == 0, f.kind[feature] == 1], [on_line, on_arc], b.length[row]
    )
    return along


def _worth(b: Boundary, s: Pieces) -> Pieces:
    """Leave out chords of bumps and corners: the way round along the boundary is short."""
    return pick(s, ~s.chord.tapered & (_longest_way(b, s) >= WAY_ROUND * s.chord.width * (1 - 1e-6) + 1e-6))


def pick(s: Pieces, keep: Bools) -> Pieces:
    """Return the chosen rows."""
    return Pieces(take(s.chord, keep), s.t0[keep], s.t1[keep], s.row[keep], s.contour[keep], s.place[keep])


def both(s: Pieces, more: Pieces) -> Pieces:
    """Put the rows of two sets of pieces after each other."""
    rest = (np.concatenate([getattr(s, n), getattr(more, n)]) for n in ("t0", "t1", "row", "contour", "place"))
    return Pieces(together(s.chord, more.chord), *rest)


def _longest_way(b: Boundary, s: Pieces) -> Floats:
    """Longest of the ways round that chords of the piece cut off (of both ways the shorter), mm."""
    total = b.total[s.contour[:, 0]]
    gap = np.mod(s.place[:, 0] - s.place[:, 1], total[:, None])
    at_ends = np.minimum(gap, total[:, None] - gap).max(axis=1)
    across = (gap[:, 0] - total / 2) * (gap[:, 1] - total / 2) <= 0
    return np.where(s.contour[:, 0] != s.contour[:, 1], np.inf, np.where(across, total / 2, at_ends))
