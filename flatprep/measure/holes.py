"""What a hole is, however it was drawn: circle, obround, rectangle, hexagon, or some other shape."""

from dataclasses import dataclass
from enum import StrEnum
from math import atan2, cos, hypot, pi, sin

import numpy as np
import shapely

from flatprep.geom import bulge
from flatprep.geom.bulge import Floats
from flatprep.model.drawing import Contour

NEAR_MM = 0.02
"""Chords this near to a circle, and corners this near to a shape, stand for it."""
LEAST_CHORDS = 8
"""A polygon of fewer sides is no circle, however small."""
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
        other: sides of the least turned box.
    angle_rad : float
        Direction of the length.
    chords : bool
        Chords stand for the arcs of a circle or obround.
    """

    shape: HoleShape
    contour: Contour
    at: tuple[float, float]
    width_mm: float
    length_mm: float
    angle_rad: float = 0.0
    chords: bool = False

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
            return self.contour.xyb
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


def recognise(contour: Contour) -> Hole:
    """Name the shape of a closed contour and measure it."""
    round_hole = _drawn_circle(contour)
    if round_hole is not None:
        return round_hole
    xyb = _without_flat_joints(contour.xyb)
    for look in (_chord_circle, _hexagon, _rectangle, _obround):
        found = look(contour, xyb)
        if found is not None:
            return found
    return _other(contour)


def _drawn_circle(contour: Contour) -> Hole | None:
    xyb = contour.xyb
    if len(xyb) == 2 and abs(abs(xyb[0, 2]) - 1.0) < 1e-9 and abs(xyb[0, 2] - xyb[1, 2]) < 1e-9:
        (x0, y0, _), (x1, y1, _) = xyb.tolist()
        return _circle(contour, (x0 + x1) / 2, (y0 + y1) / 2, hypot(x1 - x0, y1 - y0) / 2)
    if not xyb[:, 2].all():
        return None
    found = contour.circle
    return None if found is None else _circle(contour, *found)


def _circle(contour: Contour, x: float, y: float, r: float, *, chords: bool = False) -> Hole:
    return Hole(HoleShape.CIRCLE, contour, (x, y), 2 * r, 2 * r, chords=chords)


def _without_flat_joints(xyb: Floats) -> Floats:
    """Return the closed polyline without empty edges and without vertices in the middle of a straight run."""
    step = np.roll(xyb[:, :2], -1, axis=0) - xyb[:, :2]
    xyb = xyb[np.hypot(*step.T) > 1e-9]
    if len(xyb) < 3:
        return xyb
    step = np.roll(xyb[:, :2], -1, axis=0) - xyb[:, :2]
    before = np.roll(step, 1, axis=0)
    flat = np.abs(before[:, 0] * step[:, 1] - before[:, 1] * step[:, 0]) <= 1e-4 * np.hypot(*before.T) * np.hypot(
        *step.T
    )
    flat &= (np.sum(before * step, axis=1) > 0) & (xyb[:, 2] == 0.0) & (np.roll(xyb[:, 2], 1) == 0.0)
    return xyb[~flat] if flat.any() and (~flat).sum() >= 2 else xyb


def _on_edges(xyb: Floats) -> tuple[Floats, Floats]:
    """Vertices, and the middle of each edge, each of shape (n, 2)."""
    xy = xyb[:, :2]
    step = np.roll(xy, -1, axis=0) - xy
    sag = np.column_stack([step[:, 1], -step[:, 0]]) * (xyb[:, 2:] / 2.0)
    return xy, xy + step / 2.0 + sag


def _chord_circle(contour: Contour, xyb: Floats) -> Hole | None:
    """Find a circle that all vertices lie on and the edges lie near, or a regular polygon of many sides."""
    if len(xyb) < 3 or (len(xyb) < LEAST_CHORDS and not xyb[:, 2].any()):
        return None
    x0, y0, x1, y1 = contour.bounds
    if abs((x1 - x0) - (y1 - y0)) > 0.12 * (x1 - x0):  # a 12-gon's box differs by 1 - cos 15° at the most
        return None
    corners, middles = _on_edges(xyb)
    fitted = _circle_through(corners if len(corners) > 4 else np.vstack([corners, middles]))
    if fitted is None:
        return None
    x, y, r = fitted
    off = np.abs(np.hypot(corners[:, 0] - x, corners[:, 1] - y) - r)
    sag = r - np.hypot(middles[:, 0] - x, middles[:, 1] - y)
    if off.max() > NEAR_MM or abs(bulge.signed_area(xyb)) < 0.9 * pi * r * r:
        return None
    side = np.hypot(*(np.roll(corners, -1, axis=0) - corners).T)
    regular = len(xyb) >= LEAST_SIDES and not xyb[:, 2].any() and float(np.ptp(side)) <= 2 * NEAR_MM
    if np.abs(sag).max() > NEAR_MM and not regular:
        return None
    return _circle(contour, x, y, r, chords=True)


def _circle_through(xy: Floats) -> tuple[float, float, float] | None:
    """Circle of least algebraic distance (Kåsa 1976) through points (n, 2)."""
    middle = xy.mean(axis=0)
    p = xy - middle
    squares = np.sum(p * p, axis=1)
    (a, b), (c, d) = (p.T @ p).tolist()
    e, f = (p.T @ squares / 2.0).tolist()
    det = a * d - b * c
    if det <= 1e-12 * max(a, d, 1e-300) ** 2:
        return None
    x, y = (e * d - b * f) / det, (a * f - e * c) / det
    return float(middle[0] + x), float(middle[1] + y), float(np.sqrt(x * x + y * y + squares.mean()))


def _hexagon(contour: Contour, xyb: Floats) -> Hole | None:
    if len(xyb) != 6 or xyb[:, 2].any():
        return None
    x, y = xyb[:, :2].mean(axis=0)
    ray = xyb[:, :2] - (x, y)
    reach = np.hypot(*ray.T)
    side = np.hypot(*(np.roll(ray, -1, axis=0) - ray).T)
    if max(np.ptp(reach), np.ptp(side), abs(float(side.mean() - reach.mean()))) > 2 * NEAR_MM:
        return None
    across = 2.0 * float(reach.mean())
    angle = atan2(ray[0, 1], ray[0, 0])
    return Hole(HoleShape.HEXAGON, contour, (float(x), float(y)), across * cos(pi / 6), across, angle)


def _aligned(xyb: Floats) -> tuple[Floats, float, Floats]:
    """Middle of the box along the longest straight edge, its direction (rad), and its sides, shape (2,)."""
    step = np.roll(xyb[:, :2], -1, axis=0) - xyb[:, :2]
    length = np.where(xyb[:, 2] == 0.0, np.hypot(*step.T), 0.0)
    k = int(np.argmax(length))
    angle = atan2(step[k, 1], step[k, 0])
    c, s = cos(angle), sin(angle)
    turn = np.array([[c, s], [-s, c]])
    local = np.column_stack([xyb[:, :2] @ turn.T, xyb[:, 2]])
    x0, y0, x1, y1 = bulge.bounds(local, closed=True)
    return turn.T @ np.array([(x0 + x1) / 2, (y0 + y1) / 2]), angle, np.array([x1 - x0, y1 - y0])


def _box_hole(shape: HoleShape, contour: Contour, middle: Floats, angle: float, sides: Floats) -> Hole:
    long_first = sides[0] >= sides[1]
    turned = angle if long_first else angle + pi / 2
    at = float(middle[0]), float(middle[1])
    return Hole(shape, contour, at, float(sides.min()), float(sides.max()), turned)


def _rectangle(contour: Contour, xyb: Floats) -> Hole | None:
    """Four right-angled sides, corners sharp or rounded."""
    lines = xyb[:, 2] == 0.0
    if len(xyb) not in (4, 8) or lines.sum() != 4:
        return None
    step = (np.roll(xyb[:, :2], -1, axis=0) - xyb[:, :2])[lines]
    unit = step / np.hypot(*step.T)[:, None]
    if np.abs(np.sum(unit * np.roll(unit, -1, axis=0), axis=1)).max() > 1e-3:
        return None
    middle, angle, sides = _aligned(xyb)
    missing = float(sides[0] * sides[1]) - abs(bulge.signed_area(xyb))
    fillet = float(np.hypot(*(np.roll(xyb[:, :2], -1, axis=0) - xyb[:, :2])[~lines].T).max()) if len(xyb) == 8 else 0.0
    if missing < -1e-6 or missing > 2 * fillet**2 + NEAR_MM * float(sides.max()):
        return None
    return _box_hole(HoleShape.RECTANGLE, contour, middle, angle, sides)


def _obround(contour: Contour, xyb: Floats) -> Hole | None:
    """Two straight sides and two half-round ends, the ends as arcs or chords."""
    if len(xyb) < 4 or (xyb[:, 2] == 0.0).sum() < 2:
        return None
    middle, angle, sides = _aligned(xyb)
    half, r = float(sides[0] - sides[1]) / 2.0, float(sides[1]) / 2.0
    if half <= NEAR_MM:
        return None
    corners, middles = _on_edges(xyb)
    c, s = cos(angle), sin(angle)

    def off(points: Floats) -> Floats:
        x, y = _turned(points - middle, c, s)
        return np.asarray(np.hypot(np.maximum(np.abs(x) - half, 0.0), y) - r)

    straight = xyb[:, 2] == 0.0
    sag = off(middles)
    if np.abs(off(corners)).max() > NEAR_MM or np.abs(sag[~straight]).max(initial=0.0) > NEAR_MM:
        return None
    if (-sag[straight]).max() > max(NEAR_MM, r * (1.0 - cos(pi / LEAST_SIDES))):
        return None
    hole = _box_hole(HoleShape.OBROUND, contour, middle, angle, sides)
    chords = int(straight.sum()) > 2
    return Hole(hole.shape, contour, hole.at, hole.width_mm, hole.length_mm, hole.angle_rad, chords=chords)


def _turned(points: Floats, c: float, s: float) -> Floats:
    """Points seen along the direction (c, s), shape (2, n)."""
    return np.array([points[:, 0] * c + points[:, 1] * s, points[:, 1] * c - points[:, 0] * s])


def _other(contour: Contour) -> Hole:
    points = shapely.MultiPoint(bulge.points_along(contour.xyb, closed=True, chord_mm=0.01))
    box = shapely.oriented_envelope(points)
    if not isinstance(box, shapely.Polygon):
        x0, y0, x1, y1 = contour.bounds
        return Hole(HoleShape.OTHER, contour, ((x0 + x1) / 2, (y0 + y1) / 2), 0.0, hypot(x1 - x0, y1 - y0))
    a, b, c = np.array(box.exterior.coords)[:3]
    sides = np.array([np.hypot(*(b - a)), np.hypot(*(c - b))])
    return _box_hole(HoleShape.OTHER, contour, (a + c) / 2.0, atan2(b[1] - a[1], b[0] - a[0]), sides)


def inscribed_diameter(contour: Contour) -> float:
    """Diameter of the largest circle within the contour, mm, to 0.005."""
    ring = shapely.Polygon(bulge.points_along(contour.xyb, closed=True, chord_mm=0.002))
    radius = shapely.maximum_inscribed_circle(ring if ring.is_valid else ring.buffer(0), tolerance=0.0025)
    return 2.0 * float(shapely.length(radius))
