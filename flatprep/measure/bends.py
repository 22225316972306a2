"""Bend lines on a part, and what lies how near to them in the flat."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import pairwise
from math import atan2, cos, degrees, hypot, sin

import numpy as np
import numpy.typing as npt
import shapely
from shapely import affinity

from flatprep.geom.polygons import polygon, valid_polygon
from flatprep.job.values import BendAsk
from flatprep.measure.holes import Hole, HoleShape
from flatprep.model.drawing import Curve, Part

CHORD_MM = 0.005
"""Chord error of the polygon that legs are measured on."""
HAIR_MM = 1e-6
"""Half the width that a bend line is given to cut the part in two."""

TOUCH_MM = 0.01
"""A bend line that comes this near to a hole, or runs no further into it, touches it."""

Point = tuple[float, float]


@dataclass(frozen=True, slots=True)
class BendLine:
    """A straight bend line in the flat.

    Attributes
    ----------
    start, end : tuple of float
        mm.
    angle_deg : float
        By how much the leg is turned.
    radius_mm : float or None
        Inside radius, None where nobody said it.
    said : bool
        The job asks for it; else it is only drawn.
    """

    start: Point
    end: Point
    angle_deg: float = 90.0
    radius_mm: float | None = None
    said: bool = False
    handle: str = ""

    @property
    def middle(self) -> Point:
        """Middle of the line, mm."""
        return (self.start[0] + self.end[0]) / 2, (self.start[1] + self.end[1]) / 2

    @property
    def length_mm(self) -> float:
        """Length of the line."""
        return hypot(self.end[0] - self.start[0], self.end[1] - self.start[1])

    @property
    def direction_rad(self) -> float:
        """Direction from start to end."""
        return atan2(self.end[1] - self.start[1], self.end[0] - self.start[0])

    def degrees_from(self, grain: str) -> float:
        """Angle between the line and the drawing's ``x`` or ``y``, 0 to 90 degrees."""
        off = abs(degrees(self.direction_rad)) % 180.0
        from_x = min(off, 180.0 - off)
        return from_x if grain == "x" else 90.0 - from_x


def bend_lines(part: Part, asks: Sequence[BendAsk] = ()) -> tuple[BendLine, ...]:
    """Return the bends that a job asks for, then those that are drawn on the part and that no ask names."""
    out: list[BendLine] = []
    taken: set[int] = set()
    for ask in asks:
        if ask.line is not None:
            out.append(BendLine(*ask.line, ask.angle_deg, ask.radius_mm, said=True))
            continue
        for curve in (*part.bends, *part.marks):
            if ask.layer is not None and curve.layer.lower() == ask.layer.lower():
                taken.add(id(curve))
                out += _lines(curve, ask)
    named = [(line.start, line.end) for line in out]
    for curve in part.bends:
        if id(curve) not in taken:
            out += [line for line in _lines(curve, None) if not _among(line, named)]
    return tuple(out)


def _lines(curve: Curve, ask: BendAsk | None) -> Iterator[BendLine]:
    rows = curve.xyb.tolist()
    for (x0, y0, b), (x1, y1, _) in pairwise(rows):
        if b == 0.0 and hypot(x1 - x0, y1 - y0) > 1e-6:
            angle, radius = (ask.angle_deg, ask.radius_mm) if ask else (90.0, None)
            yield BendLine((x0, y0), (x1, y1), angle, radius, said=ask is not None, handle=curve.handle)


def _among(line: BendLine, named: Sequence[tuple[Point, Point]], tol_mm: float = 0.5) -> bool:
    """Whether a drawn line is one that the job names by its ends, however it runs or where it stops."""
    drawn = shapely.LineString([line.start, line.end])
    return any(shapely.LineString(ends).buffer(tol_mm).contains(drawn) for ends in named)


def rim_to_line(hole: Hole, line: BendLine) -> tuple[float, Point]:
    """Distance of a hole's rim from a bend line, mm, and the place midway between.

    The distance is negative, as far as the hole reaches over it, for a hole that lies across the line; its place is
    then on the line.
    """
    axis = shapely.LineString([line.start, line.end])
    centre = shapely.Point(hole.at)
    if hole.shape is HoleShape.CIRCLE:
        apart = _touching(float(axis.distance(centre)) - hole.width_mm / 2.0)
        foot = axis.interpolate(axis.project(centre))
        share = 0.0 if apart <= 0.0 else apart / 2.0 / (apart + hole.width_mm / 2.0)
        return apart, (foot.x + (centre.x - foot.x) * share, foot.y + (centre.y - foot.y) * share)
    rim = polygon(hole.contour.xyb, (), chord_mm=CHORD_MM)
    a, z = shapely.get_coordinates(shapely.shortest_line(axis, rim)).tolist()
    apart = _touching(float(rim.distance(axis)))
    if axis.intersection(rim).length > TOUCH_MM:
        over = _along_line(rim, line).bounds
        apart = -min(abs(float(over[1])), abs(float(over[3])))
    return apart, ((a[0] + z[0]) / 2, (a[1] + z[1]) / 2)


def stops_at(hole: Hole, line: BendLine) -> bool:
    """Tell whether a bend line ends at a hole, or in it: the bend stops there, and the hole relieves it."""
    rim = polygon(hole.contour.xyb, (), chord_mm=CHORD_MM)
    return any(rim.distance(shapely.Point(end)) <= TOUCH_MM for end in (line.start, line.end))


def _touching(apart: float) -> float:
    """Return 0 for a rim that the line just touches, as one does that ends on a relief: rounding must not decide."""
    return 0.0 if abs(apart) <= TOUCH_MM else apart


def legs_mm(part: Part, lines: Sequence[BendLine]) -> tuple[tuple[float, ...], ...]:
    """How far the material runs from each bend line on each side where it has any, up to the next bend, mm."""
    if not lines:
        return ()
    shape = valid_polygon(polygon(part.outer.xyb, [h.xyb for h in part.holes], chord_mm=CHORD_MM))
    hairs = [shapely.LineString([line.start, line.end]).buffer(HAIR_MM, cap_style="square") for line in lines]
    pieces = shapely.get_parts(shape.difference(shapely.union_all(hairs)))
    return tuple(_legs(pieces, line) for line in lines)


def _legs(pieces: npt.NDArray[np.object_], line: BendLine) -> tuple[float, ...]:
    near = pieces[shapely.dwithin(pieces, shapely.LineString([line.start, line.end]), 0.01)]
    local = [_along_line(piece, line) for piece in near]
    out = []
    for side in (1.0, -1.0):
        reach = [g.bounds[3] if side > 0 else -g.bounds[1] for g in local if _beside(g, line.length_mm, side)]
        if reach:
            out.append(float(max(reach)))
    return tuple(out)


def _beside(shape: shapely.Polygon, length: float, side: float) -> bool:
    """Whether a region (x along the bend line) lies against the line on that side."""
    strip = shapely.box(0.02 * length, min(0.0, side * 0.01), 0.98 * length, max(0.0, side * 0.01))
    y0, y1 = shape.bounds[1], shape.bounds[3]
    lies = y1 > 0.02 if side > 0 else y0 < -0.02
    return bool(lies and (y0 + y1) * side > 0 and shape.intersects(strip))


def _along_line(shape: shapely.Geometry, line: BendLine) -> shapely.Geometry:
    """Return the shape as seen with the bend line along x from the origin."""
    c, s = cos(line.direction_rad), sin(line.direction_rad)
    x, y = line.start
    return affinity.affine_transform(shape, [c, s, -s, c, -(c * x + s * y), s * x - c * y])
