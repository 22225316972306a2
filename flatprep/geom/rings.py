"""Closed polylines laid end to end and measured together: a call of numpy takes longer than most of them need."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np

from flatprep.geom.bulge import Floats, Ints, Segments, chord_counts, chord_starts, circle_bounds, segments_between


@dataclass(frozen=True, eq=False)
class Rings:
    """Closed bulge polylines.

    Attributes
    ----------
    rows : ndarray, shape (m, 3)
        One polyline after the other, see `flatprep.geom.bulge`.
    counts : ndarray of int, shape (n,)
        Vertices of each, one at the least.
    """

    rows: Floats
    counts: Ints

    @classmethod
    def of(cls, polylines: Sequence[Floats]) -> "Rings":
        """Lay polylines end to end."""
        rows = np.concatenate(polylines) if polylines else np.empty((0, 3))
        return cls(rows, np.array([len(xyb) for xyb in polylines], dtype=np.intp))

    @cached_property
    def first(self) -> Ints:
        """First row of each, shape (n,)."""
        return np.cumsum(self.counts) - self.counts

    @cached_property
    def owner(self) -> Ints:
        """Which polyline each row belongs to, shape (m,)."""
        return np.repeat(np.arange(len(self.counts)), self.counts)

    @cached_property
    def following(self) -> Ints:
        """Row of the vertex that follows each on its polyline, shape (m,)."""
        out = np.arange(1, len(self.rows) + 1)
        out[self.first + self.counts - 1] = self.first
        return out

    @cached_property
    def segments(self) -> Segments:
        """All segments, one a row."""
        xy = self.rows[:, :2]
        return segments_between(xy, xy[self.following], self.rows[:, 2])

    @cached_property
    def signed_areas(self) -> Floats:
        """Areas, shape (n,), mm², positive where a polyline runs anticlockwise; see `bulge.signed_area`."""
        if not len(self.counts):
            return np.empty(0)
        x, y = (self.rows[:, :2] - self.rows[self.first, :2][self.owner]).T
        nxt = self.following
        return np.asarray(np.add.reduceat((x * y[nxt] - x[nxt] * y) / 2.0 + self.segments.area, self.first))

    @cached_property
    def lengths(self) -> Floats:
        """Lengths along the arcs, shape (n,), mm."""
        if not len(self.counts):
            return np.empty(0)
        return np.asarray(np.add.reduceat(self.segments.length, self.first))

    @cached_property
    def bounds(self) -> Floats:
        """Least boxes x0, y0, x1, y1 of the true curves, shape (n, 4), mm."""
        if not len(self.counts):
            return np.empty((0, 4))
        reach = self.segments.boxes
        lo, hi = np.minimum.reduceat(reach[:, :2], self.first), np.maximum.reduceat(reach[:, 2:], self.first)
        out = np.hstack([lo, hi])
        b = np.abs(self.rows[:, 2])
        halves = (self.counts == 2) & (b[self.first] == 1.0) & (b[self.first + self.counts - 1] == 1.0)
        for k in np.flatnonzero(halves).tolist():
            out[k] = circle_bounds(self.rows[self.first[k] : self.first[k] + 2])
        return out

    def points(self, chord_mm: float) -> tuple[Floats, Ints]:
        """Points as `bulge.points_along` gives them, shape (k, 2), and which polyline each is of."""
        counts = chord_counts(self.segments, chord_mm)
        if len(self.counts):
            scant = np.add.reduceat(counts, self.first) < 3
            counts[scant[self.owner] & self.segments.is_arc] *= 2
        xy, which = chord_starts(self.segments, counts)
        return xy, self.owner[which]
