"""Webs and slots that narrow towards a closed end: least at the end, where no disc fits any more.

Sides that close in slowly meet no chord at right angles. Where something short joins them (a flat end, a round one),
the chord across that end is the least width, if the sides run on from it long enough and nearly parallel.
"""

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.measure.boundary import Bools, Boundary
from flatprep.measure.discs import Pieces, free, pick, pieces
from flatprep.measure.facing import Chords, Features, take

CAP = 2.2
"""What closes the end is at most so many times as long as the end is wide; else the sides go on narrowing."""
RUN = 2.0
"""The sides are followed for so many widths."""
SPREAD = 1.3
"""After that the chord between them is at most so many times the least width (8 degrees between the sides)."""
CORE = 0.85
"""Share of the chord on which a disc must be free halfway: what lies between the sides divides the slot."""


def tapers(b: Boundary, f: Features, c: Chords) -> Pieces:
    """Return the pieces among tapered chords, and among those at one place, that close such an end."""
    tried = take(c, c.tapered | ((c.p0 == c.p1).all(axis=1) & (c.q0 == c.q1).all(axis=1)))
    start = np.zeros(len(tried.width))
    s = pieces(b, f, tried, start, np.where(tried.tapered, 1.0, 0.0))
    return pick(s, _closed(b, s))


def _closed(b: Boundary, s: Pieces) -> Bools:
    total, width = b.total[s.contour[:, 0]], s.chord.width
    p, q = s.place[:, 0, 0], s.place[:, 1, 0]
    onward = np.mod(q - p, total)
    # +1: the end is what lies from p on to q, so the sides run back from p and on from q
    sense = np.where(onward <= total / 2, 1.0, -1.0)
    cap = np.minimum(onward, total - onward)
    good: Bools = (s.contour[:, 0] == s.contour[:, 1]) & (cap <= CAP * width) & (cap + 2 * RUN * width < total)
    k = np.nonzero(good)[0]
    far, half = (_across(b, s, k, (sense * share * RUN * width)[k]) for share in (1.0, 0.5))
    long_enough = np.hypot(*(far[1] - far[0]).T) <= SPREAD * width[k]
    inset = (1.0 - CORE) / 2.0 * (half[1] - half[0])
    good[k] = long_enough & free(b, b.part[s.row[k, 0]], half[0] + inset, half[1] - inset)
    return good


def _across(b: Boundary, s: Pieces, k: np.ndarray, way: Floats) -> tuple[Floats, Floats]:
    """Points on both sides, so far from the closed end, each of shape (m, 2)."""
    return (
        b.locate(s.contour[k, 0], s.place[k, 0, 0] - way),
        b.locate(s.contour[k, 1], s.place[k, 1, 0] + way),
    )
