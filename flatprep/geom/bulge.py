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

    def __len__(self) -> int:
        return len(self.bulge)


def segments(xyb: Floats, *, closed: bool) -> Segments:
    """Take a polyline apart into lines and arcs.

    Notes
    -----
    With chord c and bulge b: radius = |c| (1 + b²) / (4 |b|); the centre lies on the chord's normal, left of it
    by |c| (1 - b²) / (4 b).
    """
    start = xyb[:, :2] if closed else xyb[:-1, :2]
    end = np.roll(xyb[:, :2], -1, axis=0) if closed else xyb[1:, :2]
    bulge = np.where(np.abs(xyb[: len(start), 2]) < STRAIGHT, 0.0, xyb[: len(start), 2])
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
    return float(chords + np.sum(_segment_area(xyb))) if xyb[:, 2].any() else float(chords)


def _segment_area(xyb: Floats) -> Floats:
    seg = segments(xyb, closed=True)
    theta = seg.sweep
    r = np.where(seg.is_arc, seg.radius, 0.0)
    # θ - sin θ loses digits for flat arcs: its series is exact there
    flat = np.abs(theta) < 1e-2
    series = theta**3 / 6.0 * (1.0 - theta**2 / 20.0 * (1.0 - theta**2 / 42.0))
    return r * r / 2.0 * np.where(flat, series, theta - np.sin(theta))


def length(xyb: Floats, *, closed: bool) -> float:
    """Length of the polyline along its arcs, mm."""
    if not xyb[:, 2].any():
        xy = np.vstack([xyb[:, :2], xyb[:1, :2]]) if closed else xyb[:, :2]
        return float(np.sum(np.hypot(*np.diff(xy, axis=0).T)))
    seg = segments(xyb, closed=closed)
    chord = np.hypot(*(seg.end - seg.start).T)
    curved = np.where(seg.is_arc, np.where(seg.is_arc, seg.radius, 0.0) * np.abs(seg.sweep), chord)
    return float(np.sum(curved))


@dataclass(frozen=True, slots=True)
class Moments:
    """Area moments of a closed region about the origin of its drawing.

    Attributes
    ----------
    area : float
        mm², positive.
    sx, sy : float
        First moments ∫x dA and ∫y dA, mm³.
    xx, yy, xy : float
        Second moments ∫x² dA, ∫y² dA and ∫xy dA, mm⁴.
    """

    area: float
    sx: float
    sy: float
    xx: float
    yy: float
    xy: float

    def __add__(self, other: "Moments") -> "Moments":
        return Moments(*(getattr(self, k) + getattr(other, k) for k in self.__slots__))

    def __neg__(self) -> "Moments":
        return Moments(*(-getattr(self, k) for k in self.__slots__))

    @property
    def centroid(self) -> tuple[float, float]:
        """Centre of area, mm."""
        return self.sx / self.area, self.sy / self.area

    def about_centroid(self) -> tuple[float, float, float]:
        """Second moments (∫x², ∫y², ∫xy) about the centroid, mm⁴ (parallel axes)."""
        cx, cy = self.centroid
        return self.xx - cx * self.sx, self.yy - cy * self.sy, self.xy - cx * self.sy


_NODES, _WEIGHTS = np.polynomial.legendre.leggauss(20)


def moments(xyb: Floats) -> Moments:
    """Area moments of a closed polyline, whatever its direction; area positive.

    Notes
    -----
    Green's theorem, ∫xᵖ yᵠ dA = ∮ xᵖ⁺¹ yᵠ / (p + 1) dy, integrated along each segment by 20-point Gauss-Legendre:
    exact for lines (degree 4), and for arcs of a half circle at the most exact to rounding (the integrands are
    trigonometric polynomials of degree 4). Taken about the first vertex, then shifted.
    """
    if len(xyb) == 2 and abs(xyb[0, 2]) == abs(xyb[1, 2]) == 1.0:
        return _circle_moments(xyb)
    origin = xyb[0, :2]
    local = xyb - np.array([origin[0], origin[1], 0.0])
    x, y, dy = _nodes_along(local)
    w = _WEIGHTS / 2.0

    def integral(f: Floats) -> float:
        return float(np.sum((f * dy) @ w))

    sign = 1.0 if signed_area(local) >= 0.0 else -1.0
    area, sx, sy = (sign * integral(f) for f in (x, x * x / 2.0, x * y))
    xx, yy, xy = (sign * integral(f) for f in (x**3 / 3.0, x * y * y, x * x * y / 2.0))
    ox, oy = float(origin[0]), float(origin[1])
    return Moments(
        area,
        sx + ox * area,
        sy + oy * area,
        xx + 2 * ox * sx + ox * ox * area,
        yy + 2 * oy * sy + oy * oy * area,
        xy + ox * sy + oy * sx + ox * oy * area,
    )


def _circle_moments(xyb: Floats) -> Moments:
    """Moments of a full circle: π r², with π r⁴ / 4 about its own axes."""
    (x0, y0, _), (x1, y1, _) = xyb.tolist()
    x, y, squared = (x0 + x1) / 2.0, (y0 + y1) / 2.0, ((x1 - x0) ** 2 + (y1 - y0) ** 2) / 4.0
    area = pi * squared
    own = area * squared / 4.0
    return Moments(area, area * x, area * y, own + area * x * x, own + area * y * y, area * x * y)


def _nodes_along(xyb: Floats) -> tuple[Floats, Floats, Floats]:
    """x, y and dy/dt at the integration nodes of every segment, t from 0 to 1, shape (n, 20) each.

    Written from the chord, with half the sweep h and the angle φ from the arc's top: no radius occurs, so that
    nearly straight arcs keep their digits.
    """
    start, end = xyb[:, :2], np.roll(xyb[:, :2], -1, axis=0)
    chord, middle = end - start, (start + end) / 2.0
    h = 2.0 * np.arctan(np.where(np.abs(xyb[:, 2]) < STRAIGHT, 0.0, xyb[:, 2]))[:, None]
    phi = h * _NODES
    straight = h == 0.0
    sine = np.where(straight, 1.0, np.sin(h))
    along = np.where(straight, _NODES, np.sin(phi) / sine) / 2.0
    lift = np.where(straight, 0.0, np.sin((h + phi) / 2.0) * np.sin((h - phi) / 2.0) / sine)
    speed = np.where(straight, 1.0, h / sine)
    # an arc of positive bulge lies right of its chord
    x = middle[:, :1] + chord[:, :1] * along + chord[:, 1:] * lift
    y = middle[:, 1:] + chord[:, 1:] * along - chord[:, :1] * lift
    return x, y, speed * (chord[:, 1:] * np.cos(phi) + chord[:, :1] * np.sin(phi))


def bounds(xyb: Floats, *, closed: bool) -> tuple[float, float, float, float]:
    """Least box (x0, y0, x1, y1) of the true curve, mm: arcs reach their quadrant points."""
    if closed and len(xyb) == 2 and abs(xyb[0, 2]) == abs(xyb[1, 2]) == 1.0:
        return _circle_bounds(xyb)
    lo, hi = xyb[:, :2].min(axis=0), xyb[:, :2].max(axis=0)
    if xyb[:, 2].any():
        seg = segments(xyb, closed=closed)
        k = seg.is_arc
        for quarter, (ux, uy) in enumerate(((1, 0), (0, 1), (-1, 0), (0, -1))):
            turned = np.mod((quarter * np.pi / 2 - seg.angle[k]) * np.sign(seg.sweep[k]), 2 * np.pi)
            hit = turned <= np.abs(seg.sweep[k])
            if hit.any():
                p = seg.centre[k][hit] + seg.radius[k][hit, None] * np.array([ux, uy], dtype=np.float64)
                lo, hi = np.minimum(lo, p.min(axis=0)), np.maximum(hi, p.max(axis=0))
    return float(lo[0]), float(lo[1]), float(hi[0]), float(hi[1])


def _circle_bounds(xyb: Floats) -> tuple[float, float, float, float]:
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
    ratio = np.clip(1.0 - chord_mm / np.where(seg.is_arc, seg.radius, 1.0), -1.0, 1.0)
    step = np.maximum(2.0 * np.arccos(ratio), 1e-4)
    counts = np.where(seg.is_arc, np.maximum(1, np.ceil(np.abs(seg.sweep) / step - 1e-9)), 1).astype(np.int64)
    if closed and counts.sum() < 3:
        counts[seg.is_arc] *= 2
    which = np.repeat(np.arange(len(seg)), counts)
    offset = np.arange(len(which)) - np.repeat(np.cumsum(counts) - counts, counts)
    t = offset / counts[which]
    angle = seg.angle[which] + seg.sweep[which] * t
    radius = np.where(seg.is_arc, seg.radius, 0.0)[which]
    out = np.column_stack(
        [seg.centre[which, 0] + radius * np.cos(angle), seg.centre[which, 1] + radius * np.sin(angle)]
    )
    first = offset == 0
    out[first] = seg.start[which[first]]
    return out if closed else np.vstack([out, xyb[-1:, :2]])
