"""What a hole is, however it was drawn: circle, obround, rectangle, hexagon, or some other shape."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from enum import StrEnum
from math import atan2, cos, hypot, pi, sin

import numpy as np
import numpy.typing as npt
import shapely

from flatprep.geom import bulge
from flatprep.geom.bulge import Floats, Ints
from flatprep.geom.rings import Rings
from flatprep.model.drawing import Contour

Bools = npt.NDArray[np.bool_]

NEAR_MM = 0.02
"""Chords this near to a circle, and corners this near to a shape, stand for it."""
LEAST_CHORDS = 8
"""A polygon of fewer sides is no circle, however small."""
FLAT_MM = 2e-4
"""A vertex this near to the chord past it is no corner."""
MANY_EDGES, THIN_MM = 1000, 0.001
"""Contours of so many straight edges are measured with fewer, within this."""
RIGHT = 1e-3
"""Cosine below which sides stand at a right angle."""
LEAST_SIDES = 12
"""A regular polygon of so many sides or more stands for a circle, however coarse."""


class HoleShape(StrEnum):
    """Shapes that are recognised."""

    CIRCLE = "circle"
    OBROUND = "obround"
    RECTANGLE = "rectangle"
    HEXAGON = "hexagon"
    OTHER = "other"


@dataclass(frozen=True, slots=True)
class Hole:
    """A closed contour by its shape; the drawn contour stays what it is.

    Attributes
    ----------
    at : tuple of float
        Centre, mm.
    width_mm, length_mm : float
        Circle: diameter; obround and rectangle: short and long side; hexagon: across flats and across corners;
        other: sides of the smallest of three boxes (upright, along the longest edge, along the spread).
    angle_rad : float
        Direction of the length.
    chords : bool
        Chords stand for the arcs of a circle or obround.
    thinned : ndarray, shape (n, 3), or None
        The same contour within `THIN_MM` with fewer vertices, where it is drawn with needlessly many.
    """

    shape: HoleShape
    contour: Contour
    at: tuple[float, float]
    width_mm: float
    length_mm: float
    angle_rad: float = 0.0
    chords: bool = False
    thinned: Floats | None = None

    @property
    def diameter_mm(self) -> float | None:
        """Diameter of a round hole, None for other shapes."""
        return self.width_mm if self.shape is HoleShape.CIRCLE else None

    @property
    def is_long(self) -> bool:
        """Whether it is at least twice as long as wide, and so answers to the slot's limit."""
        return self.length_mm >= 2.0 * self.width_mm - 1e-9

    @property
    def handles(self) -> tuple[str, ...]:
        """Handles of the entities it is drawn with."""
        return self.contour.distinct_handles

    @property
    def exact(self) -> Floats:
        """The contour that widths are measured on: arcs where chords stand for them, run as the drawn one."""
        if not self.chords:
            return self.contour.xyb if self.thinned is None else self.thinned
        x, y, r = *self.at, self.width_mm / 2.0
        if self.shape is HoleShape.CIRCLE:
            out = bulge.circle(x, y, r)
        else:
            half = (self.length_mm - self.width_mm) / 2.0
            ux, uy = cos(self.angle_rad), sin(self.angle_rad)
            ends = [
                (s * half * ux + k * r * uy, s * half * uy - k * r * ux)
                for s, k in ((-1, 1), (1, 1), (1, -1), (-1, -1))
            ]
            out = np.array([(x + dx, y + dy, float(i % 2)) for i, (dx, dy) in enumerate(ends)])
        forward = bulge.signed_area(self.contour.xyb) > 0.0
        return out if forward else bulge.reverse(out, closed=True)


@dataclass(frozen=True, slots=True, eq=False)
class _Edges:
    """A closed polyline without flat joints, with what every look at it needs."""

    xyb: Floats
    step: Floats
    length: Floats
    straight: npt.NDArray[np.bool_]


def recognise(contour: Contour) -> Hole:
    """Name the shape of a closed contour and measure it."""
    return recognise_all([contour])[0]


def recognise_all(contours: Sequence[Contour]) -> tuple[Hole, ...]:
    """Name and measure many contours; what asks for numpy is asked of all of them at once."""
    found = [_two_halves(c) or _four_edges(c) or _drawn_circle(c) for c in contours]
    edges = iter(_edges_of([c.xyb for c, hole in zip(contours, found, strict=True) if hole is None]))
    return tuple(_looked_at(c, next(edges)) if hole is None else hole for c, hole in zip(contours, found, strict=True))


def _looked_at(contour: Contour, edges: _Edges) -> Hole:
    for look in (_chord_circle, _hexagon, _rectangle, _obround):
        found = look(contour, edges)
        if found is not None:
            return found
    return _other(contour, edges)


def _two_halves(contour: Contour) -> Hole | None:
    """Recognise a circle as most are drawn, without a call of numpy: drawings hold thousands."""
    if len(contour.xyb) != 2:
        return None
    (x0, y0, b0), (x1, y1, b1) = contour.xyb.tolist()
    if abs(abs(b0) - 1.0) > 1e-9 or abs(b0 - b1) > 1e-9:
        return None
    return _circle(contour, (x0 + x1) / 2, (y0 + y1) / 2, hypot(x1 - x0, y1 - y0) / 2)


def _four_edges(contour: Contour) -> Hole | None:
    """Recognise a plain rectangle, or an obround of two lines and two half circles."""
    if len(contour.xyb) != 4:
        return None
    rows = contour.xyb.tolist()
    sides = [(q[0] - p[0], q[1] - p[1]) for p, q in zip(rows, rows[1:] + rows[:1], strict=True)]
    lengths = [hypot(*side) for side in sides]
    square = max(abs(a[0] * b[0] + a[1] * b[1]) for a, b in zip(sides, sides[1:] + sides[:1], strict=True))
    if min(lengths) < 1e-9 or square > RIGHT * min(lengths) * max(lengths):
        return None
    at = sum(p[0] for p in rows) / 4, sum(p[1] for p in rows) / 4
    arcs = [k for k, p in enumerate(rows) if p[2] != 0.0]
    if not arcs:
        k = lengths.index(max(lengths))
        angle = atan2(sides[k][1], sides[k][0])
        return Hole(HoleShape.RECTANGLE, contour, at, lengths[k - 1], lengths[k], angle)
    if len(arcs) == 2 and arcs[1] - arcs[0] == 2 and all(abs(abs(rows[k][2]) - 1.0) < 1e-3 for k in arcs):
        if rows[arcs[0]][2] * rows[arcs[1]][2] < 0 or rows[arcs[0]][2] * bulge.signed_area(contour.xyb) < 0:
            return None
        k = arcs[0] - 1
        angle = atan2(sides[k][1], sides[k][0])
        return Hole(HoleShape.OBROUND, contour, at, lengths[arcs[0]], lengths[k] + lengths[arcs[0]], angle)
    return None


def _drawn_circle(contour: Contour) -> Hole | None:
    found = contour.circle if contour.xyb[:, 2].all() else None
    return None if found is None else _circle(contour, *found)


def _circle(contour: Contour, x: float, y: float, r: float, *, chords: bool = False) -> Hole:
    return Hole(HoleShape.CIRCLE, contour, (x, y), 2 * r, 2 * r, chords=chords)


def _after(rows: Floats) -> Floats:
    return np.concatenate((rows[1:], rows[:1]))


def _edges_of(polylines: Sequence[Floats]) -> list[_Edges]:
    """Leave out empty edges and vertices in the middle of a straight run."""
    plain = list(polylines)
    todo = list(range(len(plain)))
    while todo:
        rings = Rings.of([plain[k] for k in todo])
        keep = _joints(rings)
        thinner = np.split(rings.rows[keep], np.cumsum(np.add.reduceat(keep.astype(np.intp), rings.first))[:-1])
        again = [(k, xyb) for k, xyb in zip(todo, thinner, strict=True) if len(xyb) < len(plain[k])]
        for k, xyb in again:
            plain[k] = xyb
        todo = [k for k, _ in again]
    rings = Rings.of(plain)
    step = rings.rows[rings.following, :2] - rings.rows[:, :2]
    length = np.hypot(step[:, 0], step[:, 1])
    ends = (rings.first + rings.counts).tolist()
    return [
        _Edges(xyb, step[a:z], length[a:z], xyb[:, 2] == 0.0)
        for xyb, a, z in zip(plain, rings.first.tolist(), ends, strict=True)
    ]


def _joints(rings: Rings) -> Bools:
    """Vertices that stay: all but those of empty edges, or where none is empty every other one of a straight run."""
    nxt, first, owner = rings.following, rings.first, rings.owner
    length = np.hypot(*(rings.rows[nxt, :2] - rings.rows[:, :2]).T)
    empties = (np.minimum.reduceat(length, first) <= 1e-9) & (np.maximum.reduceat(length, first) > 1e-9)
    keep = ~empties[owner] | (length > 1e-9)
    settled = empties
    before = np.empty_like(nxt)
    before[nxt] = np.arange(len(nxt))
    flat = _between(rings.rows, before, nxt, FLAT_MM)
    number = np.arange(len(nxt)) - first[owner]
    last = first + rings.counts - 1
    for parity in range(2):
        drop = flat & (number % 2 != parity)
        drop[last] &= ~drop[first]  # the last and the first are neighbours too
        left = rings.counts - np.add.reduceat(drop.astype(np.intp), first)
        use = ~settled & (left >= 3) & (left < rings.counts)
        keep &= ~(drop & use[owner])
        settled = settled | use
    return np.asarray(keep)


def _middles(e: _Edges) -> Floats:
    """Middle of each edge, on its arc, shape (n, 2)."""
    across = np.column_stack([e.step[:, 1], -e.step[:, 0]])
    return np.asarray(e.xyb[:, :2] + e.step / 2.0 + across * (e.xyb[:, 2:] / 2.0))


def _chord_circle(contour: Contour, e: _Edges) -> Hole | None:
    """Find a circle that all vertices lie on and the edges lie near, or a regular polygon of many sides."""
    if len(e.xyb) < 3 or (len(e.xyb) < LEAST_CHORDS and e.straight.all()):
        return None
    corners = e.xyb[:, :2]
    width, height = np.ptp(corners, axis=0).tolist()
    if len(e.xyb) >= LEAST_CHORDS and abs(width - height) > 0.12 * max(width, height):
        return None  # the box of a 12-gon is square within 1 - cos 15°
    fitted = _circle_through(corners if len(corners) > 4 else np.vstack([corners, _middles(e)]))
    if fitted is None:
        return None
    x, y, r = fitted
    if np.abs(np.hypot(corners[:, 0] - x, corners[:, 1] - y) - r).max() > NEAR_MM:
        return None
    middles = _middles(e)
    sag = np.abs(r - np.hypot(middles[:, 0] - x, middles[:, 1] - y)).max()
    regular = len(e.xyb) >= LEAST_SIDES and bool(e.straight.all()) and float(np.ptp(e.length)) <= 2 * NEAR_MM
    if (sag > NEAR_MM and not regular) or abs(bulge.signed_area(e.xyb)) < 0.9 * pi * r * r:
        return None
    return _circle(contour, x, y, r, chords=True)


def _circle_through(xy: Floats) -> tuple[float, float, float] | None:
    """Circle of least algebraic distance (Kåsa 1976) through points (n, 2)."""
    middle = xy.mean(axis=0)
    p = xy - middle
    squares = (p * p).sum(axis=1)
    (a, b), (_, d) = (p.T @ p).tolist()
    e, f = (p.T @ squares / 2.0).tolist()
    det = a * d - b * b
    if det <= 1e-12 * max(a, d, 1e-300) ** 2:
        return None
    x, y = (e * d - b * f) / det, (a * f - e * b) / det
    return float(middle[0]) + x, float(middle[1]) + y, float(np.sqrt(x * x + y * y + squares.mean()))


def _hexagon(contour: Contour, e: _Edges) -> Hole | None:
    if len(e.xyb) != 6 or not e.straight.all():
        return None
    x, y = e.xyb[:, :2].mean(axis=0).tolist()
    ray = e.xyb[:, :2] - (x, y)
    reach = np.hypot(*ray.T)
    if max(np.ptp(reach), np.ptp(e.length), abs(float(e.length.mean() - reach.mean()))) > 2 * NEAR_MM:
        return None
    across = 2.0 * float(reach.mean())
    return Hole(HoleShape.HEXAGON, contour, (x, y), across * cos(pi / 6), across, atan2(ray[0, 1], ray[0, 0]))


def _box(xyb: Floats, angle: float) -> tuple[Floats, Floats]:
    """Middle and sides, each of shape (2,), of the box along a direction (rad)."""
    c, s = cos(angle), sin(angle)
    turn = np.array([[c, s], [-s, c]])
    local = np.column_stack([xyb[:, :2] @ turn.T, xyb[:, 2]])
    x0, y0, x1, y1 = bulge.bounds(local, closed=True)
    return turn.T @ np.array([(x0 + x1) / 2, (y0 + y1) / 2]), np.array([x1 - x0, y1 - y0])


def _along_longest(e: _Edges) -> float:
    k = int(np.argmax(np.where(e.straight, e.length, 0.0)))
    return atan2(e.step[k, 1], e.step[k, 0])


def _box_hole(shape: HoleShape, contour: Contour, middle: Floats, angle: float, sides: Floats) -> Hole:
    turned = angle if sides[0] >= sides[1] else angle + pi / 2
    at = float(middle[0]), float(middle[1])
    return Hole(shape, contour, at, float(sides.min()), float(sides.max()), turned)


def _rectangle(contour: Contour, e: _Edges) -> Hole | None:
    """Four right-angled sides, corners sharp or rounded."""
    if len(e.xyb) not in (4, 8) or e.straight.sum() != 4:
        return None
    unit = e.step[e.straight] / e.length[e.straight, None]
    if np.abs((unit * _after(unit)).sum(axis=1)).max() > RIGHT:
        return None
    angle = _along_longest(e)
    middle, sides = _box(e.xyb, angle)
    missing = float(sides[0] * sides[1]) - abs(bulge.signed_area(e.xyb))
    fillet = float(e.length[~e.straight].max(initial=0.0))
    if missing < -1e-6 or missing > 2 * fillet**2 + NEAR_MM * float(sides.max()):
        return None
    return _box_hole(HoleShape.RECTANGLE, contour, middle, angle, sides)


def _obround(contour: Contour, e: _Edges) -> Hole | None:
    """Two straight sides and two half-round ends, the ends as arcs or chords."""
    if len(e.xyb) < 4 or e.straight.sum() < 2:
        return None
    longest = np.sort(e.length[e.straight])[-2:]
    if longest[1] - longest[0] > 2 * NEAR_MM:
        return None
    angle = _along_longest(e)
    middle, sides = _box(e.xyb, angle)
    half, r = float(sides[0] - sides[1]) / 2.0, float(sides[1]) / 2.0
    if half <= NEAR_MM:
        return None
    c, s = cos(angle), sin(angle)

    def off(points: Floats) -> Floats:
        p = points - middle
        x, y = p[:, 0] * c + p[:, 1] * s, p[:, 1] * c - p[:, 0] * s
        return np.asarray(np.hypot(np.maximum(np.abs(x) - half, 0.0), y) - r)

    if np.abs(off(e.xyb[:, :2])).max() > NEAR_MM:
        return None
    sag = off(_middles(e))
    if np.abs(sag[~e.straight]).max(initial=0.0) > NEAR_MM:
        return None
    if (-sag[e.straight]).max() > max(NEAR_MM, r * (1.0 - cos(pi / LEAST_SIDES))):
        return None
    hole = _box_hole(HoleShape.OBROUND, contour, middle, angle, sides)
    return replace(hole, chords=int(e.straight.sum()) > 2)


def _other(contour: Contour, e: _Edges) -> Hole:
    """Measure any other shape by the smallest of three boxes: upright, along its longest edge, along its spread."""
    p = e.xyb[:, :2] - e.xyb[:, :2].mean(axis=0)
    spread = 0.5 * atan2(2.0 * float(p[:, 0] @ p[:, 1]), float(p[:, 0] @ p[:, 0] - p[:, 1] @ p[:, 1]))
    points = e.xyb[:, :2] if e.straight.all() else np.vstack([e.xyb[:, :2], _middles(e)])
    angles = np.array([0.0, _along_longest(e), spread])
    c, s = np.cos(angles), np.sin(angles)
    seen = np.stack(
        [np.outer(c, points[:, 0]) + np.outer(s, points[:, 1]), np.outer(c, points[:, 1]) - np.outer(s, points[:, 0])]
    )
    lo, hi = seen.min(axis=2), seen.max(axis=2)
    k = int(np.argmin(np.prod(hi - lo, axis=0)))
    (x, y), sides, angle = (lo + hi)[:, k] / 2.0, (hi - lo)[:, k], float(angles[k])
    middle = np.array([c[k] * x - s[k] * y, s[k] * x + c[k] * y])
    return replace(_box_hole(HoleShape.OTHER, contour, middle, angle, sides), thinned=_thinned(e))


def _thinned(e: _Edges) -> Floats | None:
    """Leave out every other vertex of finely drawn curves, again and again, where there are very many."""
    if len(e.xyb) < MANY_EDGES or not e.straight.all():
        return None
    kept = e.xyb
    # chords grow, and with them what leaving one out costs; all together at most `THIN_MM`
    for share in (1 / 512, 1 / 128, 1 / 32, 1 / 8, 1 / 2):
        kept = _every_other(kept, THIN_MM * share)
    return kept if len(kept) < 0.7 * len(e.xyb) else None


def _every_other(xyb: Floats, most_mm: float) -> Floats:
    """Leave out every other vertex, where it lies between lines within `most_mm` of the chord past it."""
    rows = np.arange(len(xyb))
    drop = _between(xyb, np.roll(rows, 1), np.roll(rows, -1), most_mm)
    drop[1::2] = False
    drop[-1] &= not drop[0]  # the last and the first are neighbours too
    return xyb[~drop]


def _between(xyb: Floats, before: Ints, after: Ints, most_mm: float) -> Bools:
    """Which vertices lie between lines, within `most_mm` of the chord from the vertex before to the one after."""
    straight = xyb[:, 2] == 0.0
    start = xyb[before, :2]
    chord, ray = xyb[after, :2] - start, xyb[:, :2] - start
    size = np.hypot(chord[:, 0], chord[:, 1])
    along = (chord * ray).sum(axis=1)
    near = np.abs(chord[:, 0] * ray[:, 1] - chord[:, 1] * ray[:, 0]) <= most_mm * size
    return np.asarray(near & (along > 0) & (along < size * size) & straight & straight[before])


def inscribed_diameter(contour: Contour) -> float:
    """Diameter of the largest circle within the contour, mm, to 0.005."""
    ring = shapely.Polygon(bulge.points_along(contour.xyb, closed=True, chord_mm=0.002))
    radius = shapely.maximum_inscribed_circle(ring if ring.is_valid else ring.buffer(0), tolerance=0.0025)
    return 2.0 * float(shapely.length(radius))
