"""The bulge polyline, the one geometric currency: exact measures on lines and circular arcs.

A polyline is an array of shape (n, 3), float64: vertex x and y in mm and the bulge of the segment that leaves
the vertex. Bulge is tan(sweep / 4): 0 straight, 1 a half circle, positive turning left. A closed polyline has n
segments, the last one running back to vertex 0; an open one has n - 1 and its last bulge counts for nothing.
Arcs are kept to a half circle at the most (`split_arcs`).
"""

from dataclasses import dataclass
from math import cos, hypot, pi, sin

import numpy as np
import numpy.typing as npt

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.intp]
STRAIGHT = 1e-12
"""A bulge below this is straight: over a chord of 100 m its sagitta is 0.05 nm, and its radius would overflow."""


@dataclass(frozen=True, slots=True, eq=False)
class Segments:
    """The segments of a polyline as columns, one row a segment.

    Attributes
    ----------
    start, end : ndarray, shape (n, 2)
        mm.
    bulge : ndarray, shape (n,)
    centre : ndarray, shape (n, 2)
        mm; NaN for lines.
    radius : ndarray, shape (n,)
        mm; infinite for lines.
    angle, sweep : ndarray, shape (n,)
        rad; polar angle of the start seen from the centre (NaN for lines), and signed sweep (0 for lines).
    """

    start: Floats
    end: Floats
    bulge: Floats
    centre: Floats
    radius: Floats
    angle: Floats
    sweep: Floats

    @property
    def is_arc(self) -> npt.NDArray[np.bool_]:
        """Which segments are arcs, shape (n,)."""
        return np.not_equal(self.bulge, 0.0)

    @property
    def length(self) -> Floats:
        """Lengths along the arcs, shape (n,), mm."""
        chord = np.hypot(*(self.end - self.start).T)
        curved = self.is_arc
        return np.asarray(np.where(curved, np.where(curved, self.radius, 0.0) * np.abs(self.sweep), chord))

    @property
    def area(self) -> Floats:
        """Areas between arcs and their chords, shape (n,), mm², positive for arcs that turn left."""
        theta = self.sweep
        r = np.where(self.is_arc, self.radius, 0.0)
        # θ - sin θ loses digits for flat arcs: its series is exact there
        flat = np.abs(theta) < 1e-2
        series = theta**3 / 6.0 * (1.0 - theta**2 / 20.0 * (1.0 - theta**2 / 42.0))
        return np.asarray(r * r / 2.0 * np.where(flat, series, theta - np.sin(theta)))

    @property
    def boxes(self) -> Floats:
        """Least boxes x0, y0, x1, y1, arcs as they run, shape (n, 4), mm."""
        return boxes(self.start, self.end, self.centre, self.radius, self.angle, self.sweep)

    def __len__(self) -> int:
        return len(self.bulge)


def boxes(start: Floats, end: Floats, centre: Floats, radius: Floats, angle: Floats, sweep: Floats) -> Floats:
    """Least boxes x0, y0, x1, y1 of segments: arcs reach their quadrant points; columns as in `Segments`."""
    lo, hi = np.minimum(start, end), np.maximum(start, end)
    k = np.flatnonzero(sweep)
    if len(k):
        sign, far = np.sign(sweep[k]), np.abs(sweep[k])
        # the radius of a nearly straight arc has no digits left: it rises over its chord as far as its bulge says
        rise = np.zeros(len(sweep))
        rise[k] = np.hypot(*(end[k] - start[k]).T) * np.abs(np.tan(sweep[k] / 4.0)) * (0.5 + 1e-9)
        least, most = lo - rise[:, None], hi + rise[:, None]
        for quarter, (ux, uy) in enumerate(((1, 0), (0, 1), (-1, 0), (0, -1))):
            rows = k[np.mod((quarter * np.pi / 2 - angle[k]) * sign, 2 * np.pi) <= far]
            point = centre[rows] + radius[rows, None] * np.array([ux, uy], dtype=np.float64)
            point = np.clip(point, least[rows], most[rows])
            lo[rows], hi[rows] = np.minimum(lo[rows], point), np.maximum(hi[rows], point)
    return np.hstack([lo, hi])


def segments(xyb: Floats, *, closed: bool) -> Segments:
    """Take a polyline apart into lines and arcs.

    Notes
    -----
    With chord c and bulge b: radius = |c| (1 + b²) / (4 |b|); the centre lies on the chord's normal, left of it
    by |c| (1 - b²) / (4 b).
    """
    start = xyb[:, :2] if closed else xyb[:-1, :2]
    end = np.concatenate([xyb[1:, :2], xyb[:1, :2]]) if closed else xyb[1:, :2]
    return segments_between(start, end, xyb[: len(start), 2])


def segments_between(start: Floats, end: Floats, bulge: Floats) -> Segments:
    """Lines and arcs between points, shape (n, 2) each, of these bulges, shape (n,)."""
    bulge = np.where(np.abs(bulge) < STRAIGHT, 0.0, bulge)
    chord = end - start
    length = np.hypot(chord[:, 0], chord[:, 1])
    arc = bulge != 0.0
    safe = np.where(arc, bulge, 1.0)
    radius = np.where(arc, length * (1.0 + safe * safe) / (4.0 * np.abs(safe)), np.inf)
    lift = np.where(arc, (1.0 - safe * safe) / (4.0 * safe), np.nan)
    normal = np.column_stack([-chord[:, 1], chord[:, 0]])
    centre = (start + end) / 2.0 + normal * lift[:, None]
    angle = np.arctan2(start[:, 1] - centre[:, 1], start[:, 0] - centre[:, 0])
    return Segments(start, end, bulge, centre, radius, angle, np.where(arc, 4.0 * np.arctan(bulge), 0.0))


def split_arcs(xyb: Floats, *, closed: bool) -> Floats:
    """Halve arcs of more than a half circle until none is left; the curve stays the same."""
    while True:
        count = len(xyb) if closed else len(xyb) - 1
        wide = np.abs(xyb[:count, 2]) > 1.0 + 1e-12
        if not wide.any():
            return xyb
        seg = segments(xyb, closed=closed)
        out = []
        for i in range(len(xyb)):
            if i < count and wide[i]:
                half = np.tan(seg.sweep[i] / 8.0)
                middle = seg.angle[i] + seg.sweep[i] / 2.0
                x = seg.centre[i, 0] + seg.radius[i] * cos(middle)
                y = seg.centre[i, 1] + seg.radius[i] * sin(middle)
                out += [(xyb[i, 0], xyb[i, 1], half), (x, y, half)]
            else:
                out.append(tuple(xyb[i]))
        xyb = np.array(out, dtype=np.float64)


def circle(x: float, y: float, radius: float) -> Floats:
    """Full circle as a closed polyline, anticlockwise from its rightmost point: two half circles."""
    return np.array([[x + radius, y, 1.0], [x - radius, y, 1.0]])


def arc(x: float, y: float, radius: float, start_rad: float, sweep_rad: float) -> Floats:
    """Open polyline of an arc, in pieces of a half circle at the most; `sweep_rad` is signed."""
    pieces = max(1, int(np.ceil(abs(sweep_rad) / np.pi - 1e-9)))
    angles = start_rad + sweep_rad * np.arange(pieces + 1) / pieces
    bulge = np.full(pieces + 1, np.tan(sweep_rad / pieces / 4.0))
    bulge[-1] = 0.0
    return np.column_stack([x + radius * np.cos(angles), y + radius * np.sin(angles), bulge])


def signed_area(xyb: Floats) -> float:
    """Signed area of a closed polyline, mm²; positive when it runs anticlockwise.

    Notes
    -----
    Green's theorem on the chords (taken from the first vertex, so that a far origin costs no digits) plus the
    circular segment ``r² / 2 · (θ - sin θ)`` of each arc; no chord error.
    """
    if len(xyb) == 2 and abs(xyb[0, 2]) == 1.0 and xyb[0, 2] == xyb[1, 2]:
        return float(xyb[0, 2]) * pi * float(np.sum((xyb[1, :2] - xyb[0, :2]) ** 2)) / 4.0
    xy = xyb[:, :2] - xyb[0, :2]
    x, y = xy[:, 0], xy[:, 1]
    chords = np.sum(x * np.roll(y, -1) - np.roll(x, -1) * y) / 2.0
    return float(chords + np.sum(segments(xyb, closed=True).area)) if xyb[:, 2].any() else float(chords)


def length(xyb: Floats, *, closed: bool) -> float:
    """Length of the polyline along its arcs, mm."""
    if not xyb[:, 2].any():
        xy = np.vstack([xyb[:, :2], xyb[:1, :2]]) if closed else xyb[:, :2]
        return float(np.sum(np.hypot(*np.diff(xy, axis=0).T)))
    return float(np.sum(segments(xyb, closed=closed).length))


def bounds(xyb: Floats, *, closed: bool) -> tuple[float, float, float, float]:
    """Least box (x0, y0, x1, y1) of the true curve, mm: arcs reach their quadrant points."""
    if closed and len(xyb) == 2 and abs(xyb[0, 2]) == abs(xyb[1, 2]) == 1.0:
        return circle_bounds(xyb)
    if xyb[:, 2].any():
        reach = segments(xyb, closed=closed).boxes
        lo, hi = reach[:, :2].min(axis=0), reach[:, 2:].max(axis=0)
    else:
        lo, hi = xyb[:, :2].min(axis=0), xyb[:, :2].max(axis=0)
    return float(lo[0]), float(lo[1]), float(hi[0]), float(hi[1])


def circle_bounds(xyb: Floats) -> tuple[float, float, float, float]:
    """Least box of a full circle of two half circles."""
    (x0, y0, _), (x1, y1, _) = xyb.tolist()
    x, y, r = (x0 + x1) / 2.0, (y0 + y1) / 2.0, hypot(x1 - x0, y1 - y0) / 2.0
    return x - r, y - r, x + r, y + r


def reverse(xyb: Floats, *, closed: bool) -> Floats:
    """Return the same curve run the other way; a closed one starts at the same vertex."""
    n = len(xyb)
    if closed:
        order = np.concatenate([[0], np.arange(n - 1, 0, -1)])
        bulge = -xyb[(order - 1) % n, 2]
    else:
        order = np.arange(n - 1, -1, -1)
        bulge = np.concatenate([-xyb[order[1:], 2], [0.0]])
    return np.column_stack([xyb[order, :2], bulge])


@dataclass(frozen=True, slots=True)
class Similarity:
    """Mirror (x -> -x) if asked, turn anticlockwise about the origin, scale, move: the placement of the contract.

    Attributes
    ----------
    turn_deg : float
    dx, dy : float
        mm.
    mirrored : bool
    scale : float
    """

    turn_deg: float = 0.0
    dx: float = 0.0
    dy: float = 0.0
    mirrored: bool = False
    scale: float = 1.0

    def matrix(self) -> Floats:
        """Return the 2 x 2 matrix; quarter turns are exact."""
        quarter, rest = divmod(self.turn_deg % 360.0, 90.0)
        if rest == 0.0:
            c, s = ((1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0))[int(quarter) % 4]
        else:
            c, s = cos(np.radians(self.turn_deg)), sin(np.radians(self.turn_deg))
        flip = -1.0 if self.mirrored else 1.0
        return self.scale * np.array([[c * flip, -s], [s * flip, c]])

    def points(self, xy: Floats) -> Floats:
        """Move points, shape (n, 2)."""
        return np.asarray(xy @ self.matrix().T + np.array([self.dx, self.dy]), dtype=np.float64)

    def polyline(self, xyb: Floats) -> Floats:
        """Move a polyline, shape (n, 3); mirroring turns its bulges over."""
        bulge = -xyb[:, 2] if self.mirrored else xyb[:, 2]
        return np.column_stack([self.points(xyb[:, :2]), bulge])


def as_circle(xyb: Floats, *, tol_mm: float = 1e-6) -> tuple[float, float, float] | None:
    """Centre x, y and radius of a closed polyline that is one full circle of arcs, else None."""
    if len(xyb) == 2:
        (x0, y0, b0), (x1, y1, b1) = xyb.tolist()
        if b0 == b1 and abs(b0) == 1.0:  # as most are drawn; drawings hold thousands
            return (x0 + x1) / 2.0, (y0 + y1) / 2.0, hypot(x1 - x0, y1 - y0) / 2.0
    if not xyb[:, 2].all():
        return None
    seg = segments(xyb, closed=True)
    if abs(abs(float(np.sum(seg.sweep))) - 2 * np.pi) > 1e-6:
        return None
    widest = int(np.argmax(np.abs(seg.sweep)))
    centre, radius = seg.centre[widest], float(seg.radius[widest])
    off = np.abs(np.hypot(*(seg.start - centre).T) - radius)
    same = np.hypot(*(seg.centre - centre).T)
    if float(off.max()) > tol_mm or float(same.max()) > 10 * tol_mm:
        return None
    return float(centre[0]), float(centre[1]), radius


def points_along(xyb: Floats, *, closed: bool, chord_mm: float) -> Floats:
    """Points of the curve so close that no chord is further than `chord_mm` from it, shape (m, 2).

    The vertices are among them; a closed polyline does not repeat its first point, and has three at least if it has
    an arc, however small that is.
    """
    if not xyb[:, 2].any():
        return xyb[:, :2].copy()
    seg = segments(xyb, closed=closed)
    counts = chord_counts(seg, chord_mm)
    if closed and counts.sum() < 3:
        counts[seg.is_arc] *= 2
    out = chord_starts(seg, counts)[0]
    return out if closed else np.vstack([out, xyb[-1:, :2]])


def chord_counts(seg: Segments, chord_mm: float) -> Ints:
    """How many chords each segment needs so that none is further than `chord_mm` from its arc, shape (n,)."""
    # arcs smaller than the chord error, down to no radius at all, are one chord
    ratio = 1.0 - chord_mm / np.maximum(np.where(seg.is_arc, seg.radius, 1.0), chord_mm / 2.0)
    step = np.maximum(2.0 * np.arccos(ratio), 1e-4)
    return np.where(seg.is_arc, np.maximum(1, np.ceil(np.abs(seg.sweep) / step - 1e-9)), 1).astype(np.intp)


def chord_starts(seg: Segments, counts: Ints) -> tuple[Floats, Ints]:
    """Where the chords of segments begin, so many of each, shape (m, 2), and the segment that each stands for."""
    which = np.repeat(np.arange(len(seg)), counts)
    offset = np.arange(len(which)) - np.repeat(np.cumsum(counts) - counts, counts)
    out = seg.start[which]
    inner = np.flatnonzero(offset)
    arc = which[inner]
    angle = seg.angle[arc] + seg.sweep[arc] * (offset[inner] / counts[arc])
    out[inner, 0] = seg.centre[arc, 0] + seg.radius[arc] * np.cos(angle)
    out[inner, 1] = seg.centre[arc, 1] + seg.radius[arc] * np.sin(angle)
    return out, which
