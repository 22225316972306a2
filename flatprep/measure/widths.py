"""Least widths of webs (material between two edges) and slots (void between two edges).

A width is a chord that meets the boundary at right angles at both ends and whose disc, on it as diameter, holds no
other boundary: a maximal inscribed disc that touches at opposite points. Corners, teeth and fillets have none.
"""

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.measure.boundary import Bools, Boundary, Ints
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
    told = _told(b, f, pieces, groups(b, pieces, most_mm)) if len(pieces) else ()
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


def _told(b: Boundary, f: Features, s: Pieces, groups_of: list[list[int]]) -> Iterator[Width]:
    """One width for each group of pieces: its narrowest stretch, told at the stretch's middle."""
    every = np.arange(len(s))
    w0, w1 = (np.hypot(*(q - p).T) for p, q in (chord_at(f, s.chord, every, t) for t in (s.t0, s.t1)))
    stretches = [_stretch(b, s, group, w0, w1) for group in groups_of]
    chosen = [_middle(stretch) for stretch in stretches]
    k, t = np.array([k for k, _ in chosen], dtype=np.intp), np.array([t for _, t in chosen])
    ends = np.hstack(chord_at(f, s.chord, k, t)).tolist()
    for (px, py, qx, qy), stretch, one in zip(ends, stretches, k.tolist(), strict=True):
        contours, rows = s.contour[one].tolist(), s.row[one].tolist()
        yield Width(
            width_mm=min(span.width for span in stretch),
            at=((px + qx) / 2, (py + qy) / 2),
            extent_mm=max(span.hi for span in stretch) - min(span.lo for span in stretch),
            ends=((px, py), (qx, qy)),
            contours=(min(contours), max(contours)),
            rows=(rows[0], rows[1]),
        )


def _stretch(b: Boundary, s: Pieces, group: list[int], w0: Floats, w1: Floats) -> list[_Span]:
    """Find the pieces of a group that are within `SAME_WIDTH_MM` of its least width and follow each other."""
    k = np.array(group)
    best = int(k[np.argmin(s.chord.width[k])])
    room = float(s.chord.width[best]) + SAME_WIDTH_MM
    spans = _spans(b, s, k, best, room, (w0[k], w1[k]))
    first = last = next(n for n, span in enumerate(spans) if span.piece == best)
    while first > 0 and spans[first - 1].width <= room:
        first -= 1
    while last < len(spans) - 1 and spans[last + 1].width <= room:
        last += 1
    return spans[first : last + 1]


def _spans(
    b: Boundary, s: Pieces, k: Ints, best: int, room: float, widths_at_ends: tuple[Floats, Floats]
) -> list[_Span]:
    """Parts of pieces that are at most `room` wide, in order along the side that `best` begins on."""
    total = float(b.total[s.contour[best, 0]])
    side = _same_side(b, s, k, best)
    # counted from the best piece, the shorter way round
    lo, hi = (_shortest(s.place[k, side] - s.place[best, 0].mean(), total)).T
    t0, t1 = s.t0[k], s.t1[k]
    w0, w1 = widths_at_ends
    with np.errstate(divide="ignore", invalid="ignore"):
        share = np.clip((room - np.minimum(w0, w1)) / np.abs(w1 - w0), 0.0, 1.0)
    share = np.where((np.maximum(w0, w1) <= room) | ~np.isfinite(share), 1.0, share)
    begins = w0 <= w1  # the narrow end is where the piece begins
    t0, t1 = np.where(begins, t0, t1 + (t0 - t1) * share), np.where(begins, t0 + (t1 - t0) * share, t1)
    lo, hi = np.where(begins, lo, hi + (lo - hi) * share), np.where(begins, lo + (hi - lo) * share, hi)
    turned = lo > hi
    lo, hi = np.where(turned, hi, lo), np.where(turned, lo, hi)
    t0, t1 = np.where(turned, t1, t0), np.where(turned, t0, t1)
    columns = (k, s.chord.width[k], lo, hi, t0, t1)
    rows = zip(*(c.tolist() for c in columns), strict=True)
    return sorted((_Span(*row) for row in rows), key=lambda span: (span.lo + span.hi, span.piece))


def _same_side(b: Boundary, s: Pieces, k: Ints, best: int) -> Ints:
    """Which ends of pieces k lie on the side of the web that end 0 of `best` lies on, 0 or 1 each."""
    if s.contour[best, 0] != s.contour[best, 1]:
        return np.where(s.contour[k, 0] == s.contour[best, 0], 0, 1)
    total = float(b.total[s.contour[best, 0]])
    ends = s.place[k].mean(axis=2)
    away = np.abs(_shortest(ends[:, :, None] - s.place[best].mean(axis=1), total))
    return np.where(away[:, 0, 0] + away[:, 1, 1] <= away[:, 0, 1] + away[:, 1, 0], 0, 1)


def _shortest(way: Floats, total: float) -> Floats:
    """Signed ways along a closed line of length `total`, the shorter way round."""
    return np.asarray(np.mod(way + total / 2, total) - total / 2)


def _middle(stretch: list[_Span]) -> tuple[int, float]:
    """Piece, and share of its chord's stretch, at the middle of a stretch, or at the nearest place a piece has."""
    place = (min(span.lo for span in stretch) + max(span.hi for span in stretch)) / 2
    nearest = min(stretch, key=lambda span: (max(span.lo - place, place - span.hi, 0.0), span.lo - span.hi))
    if nearest.hi <= nearest.lo:
        return nearest.piece, nearest.t_lo
    share = min(1.0, max(0.0, (place - nearest.lo) / (nearest.hi - nearest.lo)))
    return nearest.piece, nearest.t_lo + (nearest.t_hi - nearest.t_lo) * share
