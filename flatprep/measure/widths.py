"""Least widths of webs (material between two edges) and slots (void between two edges).

A width is a chord that meets the boundary at right angles at both ends and whose disc, on it as diameter, holds no
other boundary: a maximal inscribed disc that touches at opposite points. Corners, teeth and fillets have none.
"""

from dataclasses import dataclass

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.measure.boundary import Bools, Boundary
from flatprep.measure.discs import Pieces, both, chord_at, sound
from flatprep.measure.facing import Features, TooFineError, chords, facing_pairs, features, together
from flatprep.measure.merge import groups
from flatprep.measure.tapers import tapers
from flatprep.measure.touches import touches

MOST_PAIRS = 3_000_000
"""Above so many pairs of neighbouring edges widths are not measured."""
MOST_CHORDS = 40_000
"""Above so many candidate chords widths are not measured."""
SAME_WIDTH_MM = 0.02
"""What is within this of the least width belongs to the same stretch."""

Point = tuple[float, float]


@dataclass(frozen=True, slots=True)
class Width:
    """A web or slot at its narrowest.

    Attributes
    ----------
    width_mm : float
    at : tuple of float
        Middle of the narrowest stretch, midway between its sides, mm.
    extent_mm : float
        Length of that stretch; 0 where it is narrowest at one place.
    ends : tuple of (float, float)
        Both ends of the chord through `at`.
    contours : tuple of int
        Which contours of the part it lies between: 0 the outer one, then the holes.
    rows : tuple of int
        Rows of the boundary's edges that the chord ends on.
    """

    width_mm: float
    at: Point
    extent_mm: float
    ends: tuple[Point, Point]
    contours: tuple[int, int]
    rows: tuple[int, int]


def widths(b: Boundary, *, side: int, rows: Bools, most_mm: float) -> tuple[Width, ...]:
    """Measure webs (side 1) or slots (side -1) that are at most `most_mm` wide.

    Parameters
    ----------
    b
        Boundary of the part.
    side
        1: material; -1: void.
    rows
        Edges that take part, shape (n,); all edges stand in the way of a chord.
    most_mm
        Wider ones are not looked for.

    Returns
    -------
    tuple of Width
        One a web, the narrowest first.

    Raises
    ------
    TooFineError
        When too many edges lie too near each other (`MOST_PAIRS`, `MOST_CHORDS`).

    Notes
    -----
    The medial axis by its discs: Ma, Bae and Choi, "3D medial axis point approximation using nearest neighbors and
    the normal field" (2012), describe the maximal ball that touches at two points; here the two points are opposite.
    """
    f = features(b, side=side, rows=rows)
    if len(f.kind) < 2:
        return ()
    i, j = facing_pairs(b, f, most_mm, MOST_PAIRS)
    if side < 0:
        one = b.contour[f.row[i]] == b.contour[f.row[j]]
        i, j = i[one], j[one]
    found = chords(b, f, i, j, most_mm)
    if side > 0:
        found = together(found, touches(b, f))
    if len(found.width) > MOST_CHORDS:
        raise TooFineError
    if not len(found.width):
        return ()
    pieces = both(sound(b, f, found), tapers(b, f, found))
    told = [_narrowest(b, f, pieces, group) for group in groups(b, pieces, most_mm)]
    return tuple(sorted(told, key=lambda w: (w.width_mm, w.at)))


@dataclass(frozen=True, slots=True)
class _Span:
    """The narrow part of a piece: from and to along one side of the web (mm) and on the chord's stretch (shares)."""

    piece: int
    width: float
    lo: float
    hi: float
    t_lo: float
    t_hi: float


def _narrowest(b: Boundary, f: Features, s: Pieces, group: list[int]) -> Width:
    """One web from its pieces: its narrowest stretch, told at the stretch's middle."""
    best = min(group, key=lambda k: float(s.chord.width[k]))
    least = float(s.chord.width[best])
    spans = sorted((_span(b, f, s, k, best) for k in group), key=lambda span: (span.lo + span.hi, span.piece))
    first = last = next(n for n, span in enumerate(spans) if span.piece == best)
    while first > 0 and spans[first - 1].width <= least + SAME_WIDTH_MM:
        first -= 1
    while last < len(spans) - 1 and spans[last + 1].width <= least + SAME_WIDTH_MM:
        last += 1
    stretch = spans[first : last + 1]
    lo, hi = min(span.lo for span in stretch), max(span.hi for span in stretch)
    k, t = _at((lo + hi) / 2.0, stretch)
    p, q = (v[0].tolist() for v in _chord(f, s, k, t))
    contours, rows = s.contour[k].tolist(), s.row[k].tolist()
    return Width(
        width_mm=least,
        at=((p[0] + q[0]) / 2, (p[1] + q[1]) / 2),
        extent_mm=hi - lo,
        ends=((p[0], p[1]), (q[0], q[1])),
        contours=(min(contours), max(contours)),
        rows=(rows[0], rows[1]),
    )


def _span(b: Boundary, f: Features, s: Pieces, k: int, best: int) -> _Span:
    """Part of a piece within `SAME_WIDTH_MM` of the least width, seen along the side that `best` begins on."""
    side = _same_side(b, s, k, best)
    total = float(b.total[s.contour[best, 0]])
    here = float(s.place[best, 0].mean())
    # counted from the best piece, the shorter way round
    begin, close = (float((x - here + total / 2) % total - total / 2) for x in s.place[k, side])
    t0, t1 = float(s.t0[k]), float(s.t1[k])
    w0, w1 = (float(np.hypot(*(q - p).T)[0]) for p, q in (_chord(f, s, k, t) for t in (t0, t1)))
    room = float(s.chord.width[best]) + SAME_WIDTH_MM
    share = 1.0 if max(w0, w1) <= room or w0 == w1 else min(1.0, max(0.0, (room - min(w0, w1)) / abs(w1 - w0)))
    if w1 < w0:
        t0, begin = t1 + (t0 - t1) * share, close + (begin - close) * share
    else:
        t1, close = t0 + (t1 - t0) * share, begin + (close - begin) * share
    ends = sorted([(begin, t0), (close, t1)])
    return _Span(k, float(s.chord.width[k]), ends[0][0], ends[1][0], ends[0][1], ends[1][1])


def _same_side(b: Boundary, s: Pieces, k: int, best: int) -> int:
    """Which end of piece k lies on the side of the web that end 0 of `best` lies on."""
    if s.contour[best, 0] != s.contour[best, 1]:
        return 0 if s.contour[k, 0] == s.contour[best, 0] else 1
    total = float(b.total[s.contour[best, 0]])
    away = np.abs((s.place[k].mean(axis=1)[:, None] - s.place[best].mean(axis=1) + total / 2) % total - total / 2)
    return 0 if away[0, 0] + away[1, 1] <= away[0, 1] + away[1, 0] else 1


def _at(place: float, stretch: list[_Span]) -> tuple[int, float]:
    """Piece and share of its stretch at a place along the side, or at the nearest end of one."""
    nearest = min(stretch, key=lambda span: (max(span.lo - place, place - span.hi, 0.0), span.lo - span.hi))
    if nearest.hi <= nearest.lo:
        return nearest.piece, nearest.t_lo
    share = min(1.0, max(0.0, (place - nearest.lo) / (nearest.hi - nearest.lo)))
    return nearest.piece, nearest.t_lo + (nearest.t_hi - nearest.t_lo) * share


def _chord(f: Features, s: Pieces, k: int, t: float) -> tuple[Floats, Floats]:
    return chord_at(f, s.chord, np.array([k]), np.array([t]))
