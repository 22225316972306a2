"""All edges of a part as columns, so that every question is asked of all of them at once."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
import numpy.typing as npt
import shapely

from flatprep.geom.bulge import Floats, boxes, segments

NO_RISE_MM = 1e-7
"""An arc that rises no higher over its chord is a line."""

Ints = npt.NDArray[np.intp]
Bools = npt.NDArray[np.bool_]


@dataclass(frozen=True, eq=False)
class Boundary:
    """The edges of closed contours, of one part or several, one row an edge; material lies to the left of each.

    Attributes
    ----------
    start, end, centre : ndarray, shape (n, 2)
        mm; the centre is NaN for lines.
    radius : ndarray, shape (n,)
        mm; infinite for lines.
    angle, sweep : ndarray, shape (n,)
        rad; polar angle of the start seen from the centre, and signed sweep (0 for lines).
    part, contour : ndarray of int, shape (n,)
        Which part and which contour the edge belongs to.
    edge : ndarray of int, shape (n,)
        Which edge of that contour it is.
    next : ndarray of int, shape (n,)
        Row of the edge that follows on the same contour.
    run : ndarray, shape (n,)
        Distance from the contour's first vertex to the edge's start along the contour, mm.
    total : ndarray, shape (contours,)
        Lengths of the contours, mm.
    """

    start: Floats
    end: Floats
    centre: Floats
    radius: Floats
    angle: Floats
    sweep: Floats
    part: Ints
    contour: Ints
    edge: Ints
    next: Ints
    run: Floats
    total: Floats

    def __len__(self) -> int:
        return len(self.sweep)

    @property
    def is_arc(self) -> Bools:
        """Which edges are arcs, shape (n,)."""
        return np.not_equal(self.sweep, 0.0)

    @cached_property
    def length(self) -> Floats:
        """Lengths of the edges along their arcs, shape (n,), mm."""
        chord = np.hypot(*(self.end - self.start).T)
        curved = self.is_arc
        return np.asarray(np.where(curved, np.where(curved, self.radius, 0.0) * np.abs(self.sweep), chord))

    @cached_property
    def heading(self) -> tuple[Floats, Floats]:
        """Direction of travel at the start and at the end of each edge, rad, each of shape (n,)."""
        chord = self.end - self.start
        straight = np.arctan2(chord[:, 1], chord[:, 0])
        return straight - self.sweep / 2.0, straight + self.sweep / 2.0

    @cached_property
    def turn(self) -> Floats:
        """Turn from each edge to the one that follows, rad in (-π, π], positive to the left, shape (n,)."""
        first, last = self.heading
        return wrap(first[self.next] - last)

    @cached_property
    def boxes(self) -> Floats:
        """Least boxes x0, y0, x1, y1 of the edges, arcs as they run, shape (n, 4)."""
        return boxes(self.start, self.end, self.centre, self.radius, self.angle, self.sweep)

    @cached_property
    def tree(self) -> shapely.STRtree:
        """Search tree over the boxes."""
        return shapely.STRtree(envelopes(self.boxes))

    def distance(self, rows: Ints, points: Floats) -> Floats:
        """Distance of points, shape (m, 2), from the edges `rows`, shape (m,), mm; exact on arcs."""
        a, d = self.start[rows], self.end[rows] - self.start[rows]
        along = np.clip(np.sum((points - a) * d, axis=1) / np.maximum(np.sum(d * d, axis=1), 1e-30), 0.0, 1.0)
        out: Floats = np.hypot(*(points - a - along[:, None] * d).T)
        k = np.nonzero(self.is_arc[rows])[0]
        if len(k):
            arc, p = rows[k], points[k]
            ray = p - self.centre[arc]
            polar = np.arctan2(ray[:, 1], ray[:, 0])
            inside = np.mod((polar - self.angle[arc]) * np.sign(self.sweep[arc]), 2 * np.pi) <= np.abs(self.sweep[arc])
            rim = np.abs(np.hypot(*ray.T) - self.radius[arc])
            ends = np.minimum(np.hypot(*(p - self.start[arc]).T), np.hypot(*(p - self.end[arc]).T))
            out[k] = np.where(inside, rim, ends)
        return out

    @cached_property
    def first(self) -> Ints:
        """First row of each contour, shape (contours,)."""
        return np.searchsorted(self.contour, np.arange(len(self.total)))

    def locate(self, contour: Ints, place: Floats) -> Floats:
        """Points at a distance along contours (mm, any number of rounds), shape (m, 2)."""
        before = np.cumsum(self.total) - self.total
        whole = np.mod(place, self.total[contour]) + before[contour]
        row = np.searchsorted(self.run + before[self.contour], whole, side="right") - 1
        # rounding at a contour's seam must not fall into the one before, nor into the next
        last = np.append(self.first[1:], len(self.contour))[contour] - 1
        row = np.clip(row, self.first[contour], last)
        share = np.clip((whole - before[contour] - self.run[row]) / self.length[row], 0.0, 1.0)
        return self.points(row, share)

    def points(self, rows: Ints, share: Floats) -> Floats:
        """Points of the edges `rows` at `share` (0 to 1) of their length, shape (m, 2)."""
        out = self.start[rows] + (self.end[rows] - self.start[rows]) * share[:, None]
        k = np.nonzero(self.is_arc[rows])[0]
        arc = rows[k]
        polar = self.angle[arc] + self.sweep[arc] * share[k]
        out[k] = self.centre[arc] + self.radius[arc, None] * np.column_stack([np.cos(polar), np.sin(polar)])
        return out


def boundary(contours: Sequence[Floats], parts: Ints | None = None) -> Boundary:
    """Put closed bulge polylines into columns; edges without length are left out.

    Parameters
    ----------
    contours
        Material to the left.
    parts : ndarray of int, shape (contours,)
        Which part each contour belongs to, ascending; all to one by default.
    """
    start = np.vstack([c[:, :2] for c in contours])
    end = np.vstack([np.roll(c[:, :2], -1, axis=0) for c in contours])
    bulge = np.concatenate([c[:, 2] for c in contours])
    counts = np.array([len(c) for c in contours])
    contour = np.repeat(np.arange(len(contours)), counts)
    edge = np.arange(len(start)) - np.repeat(np.cumsum(counts) - counts, counts)
    keep = np.hypot(*(end - start).T) > 1e-9
    start, end, bulge, contour, edge = (v[keep] for v in (start, end, bulge, contour, edge))
    chord = np.hypot(*(end - start).T)
    bulge = np.where(np.abs(bulge) * chord < 2 * NO_RISE_MM, 0.0, bulge)
    pairs = np.zeros((2 * len(start), 3))
    pairs[0::2, :2], pairs[0::2, 2], pairs[1::2, :2] = start, bulge, end
    seg = segments(pairs, closed=False)
    counts = np.bincount(contour, minlength=len(contours))
    first = np.cumsum(counts) - counts
    follows = np.arange(1, len(start) + 1)
    follows[(first + counts - 1)[counts > 0]] = first[counts > 0]
    curved = bulge != 0.0
    length = np.where(curved, np.where(curved, seg.radius[0::2], 0.0) * np.abs(seg.sweep[0::2]), chord)
    before = np.cumsum(length) - length
    run = before - before[np.minimum(first, len(start) - 1)][contour]
    total = np.bincount(contour, weights=length, minlength=len(contours)).astype(np.float64)
    return Boundary(
        start=start,
        end=end,
        centre=seg.centre[0::2],
        radius=seg.radius[0::2],
        angle=seg.angle[0::2],
        sweep=seg.sweep[0::2],
        part=np.zeros(len(start), dtype=np.intp) if parts is None else parts[contour],
        contour=contour,
        edge=edge,
        next=follows,
        run=run,
        total=total,
    )


def of_part(b: Boundary, part: int) -> Boundary:
    """Return the edges of one part, contours and rows counted from its own first."""
    lo, hi = np.searchsorted(b.part, [part, part + 1])
    if lo == 0 and hi == len(b):
        return b
    own = {
        name: getattr(b, name)[lo:hi] for name in ("start", "end", "centre", "radius", "angle", "sweep", "edge", "run")
    }
    first = int(b.contour[lo])
    return Boundary(
        **own,
        part=np.zeros(hi - lo, dtype=np.intp),
        contour=b.contour[lo:hi] - first,
        next=b.next[lo:hi] - lo,
        total=b.total[first : int(b.contour[hi - 1]) + 1],
    )


def envelopes(boxes: Floats) -> npt.NDArray[np.object_]:
    """Return boxes x0, y0, x1, y1, shape (n, 4), for a search tree: it looks at envelopes, so a diagonal will do."""
    found: npt.NDArray[np.object_] = shapely.linestrings(boxes.reshape(-1, 2, 2))
    return found


def wrap(angle: Floats) -> Floats:
    """Angles brought into (-π, π], rad."""
    return np.asarray(np.pi - np.mod(np.pi - angle, 2 * np.pi))
