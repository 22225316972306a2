"""What a round tool cannot enter, as regions: the void less its opening by the tool's radius."""

from collections.abc import Iterable, Iterator
from dataclasses import dataclass

import numpy as np
import shapely

from flatprep.geom.bulge import Floats
from flatprep.geom.polygons import polygon, valid_polygon
from flatprep.measure.boundary import Bools, Boundary
from flatprep.measure.corners import LEAST_GAP_MM
from flatprep.measure.holes import HoleShape
from flatprep.measure.part import MeasuredPart

CHORD_MM = 0.002
QUARTER = 24
"""Chords in a quarter of the tool's circle: within 0.0005 of its radius."""
MOST_POINTS = 20_000
"""A contour of more points is not opened: it would run for minutes."""

Point = tuple[float, float]


@dataclass(frozen=True, slots=True, eq=False)
class Region:
    """A piece of the void that the tool does not enter.

    Attributes
    ----------
    shape : shapely.Polygon
        mm.
    contour : int
        Whose void it is: 0 the outline's, then the holes'.
    depth_mm : float
        Its largest distance from what the tool does enter; infinite where that is nothing.
    """

    shape: shapely.Polygon
    contour: int
    depth_mm: float

    @property
    def area_mm2(self) -> float:
        """Its area, within the chord error."""
        return float(self.shape.area)

    @property
    def at(self) -> Point:
        """A place in it, mm."""
        point = self.shape.representative_point()
        return float(point.x), float(point.y)

    def holds(self, places: Iterable[Point], within_mm: float) -> bool:
        """Tell whether one of some places lies in it, or this near to it."""
        return any(self.shape.distance(shapely.Point(place)) <= within_mm for place in places)


def unreached_regions(
    part: MeasuredPart, tool_radius_mm: float, contours: Iterable[int] | None = None
) -> tuple[Region, ...]:
    """Return what a round tool leaves in the void of a part, by more than `LEAST_GAP_MM`.

    Parameters
    ----------
    part
    tool_radius_mm
    contours
        Those to look at; by default all that may leave something.

    Notes
    -----
    Mathematical morphology (Serra, "Image Analysis and Mathematical Morphology", 1982): the opening of a region by a
    disc is the union of all such discs in it, here an offset inwards and outwards again.
    """
    asked = suspects(part, tool_radius_mm) if contours is None else contours
    return tuple(region for k in asked for region in _of_contour(part, k, tool_radius_mm))


def suspects(part: MeasuredPart, tool_radius_mm: float) -> tuple[int, ...]:
    """Contours whose void is narrow for a tool, or turns sharper than it somewhere."""
    b = part.boundary
    turning = {int(k) for k in np.unique(b.contour[tight_turns(b, tool_radius_mm)])}
    narrow = {k for k, hole in enumerate(part.holes, start=1) if hole.width_mm < 2.0 * tool_radius_mm - 1e-3}
    round_ones = {k for k, shape in enumerate(part.shapes) if shape.shape is HoleShape.CIRCLE}
    return tuple(sorted((turning - round_ones) | narrow))


def tight_turns(b: Boundary, tool_radius_mm: float) -> Bools:
    """Edges that turn sharper into the void than a tool, as arcs or with the edge that follows, shape (n,).

    Notes
    -----
    Chords of length c that turn by φ stand for a curve of radius c / (2 tan(φ / 2)).
    """
    inwards = np.clip(-b.turn, 0.0, 3.0)
    reach = np.minimum(b.length, b.length[b.next])
    with np.errstate(divide="ignore"):
        curve = reach / (2.0 * np.tan(inwards / 2.0))
    sharp = tool_radius_mm * (1.0 / np.cos(inwards / 2.0) - 1.0) > LEAST_GAP_MM
    small = (b.sweep < 0) & (b.radius < tool_radius_mm - 1e-3)
    return np.asarray((curve < tool_radius_mm) | sharp | small)


def _of_contour(part: MeasuredPart, contour: int, radius: float) -> Iterator[Region]:
    void = _void(part.shapes[contour].exact, radius, outline=contour == 0)
    if shapely.get_num_coordinates(void) > MOST_POINTS:
        return
    # a hair less, so that a slot as wide as the tool is one that it enters
    entered = void.buffer(-(radius - CHORD_MM), quad_segs=QUARTER).buffer(radius - CHORD_MM, quad_segs=QUARTER)
    # slivers along the walls are rounding
    left = void.difference(entered).buffer(-CHORD_MM).buffer(CHORD_MM, join_style="mitre")
    if left.is_empty:
        return
    pieces, near = shapely.get_parts(left), entered.buffer(LEAST_GAP_MM)
    shapely.prepare(near)
    for piece in pieces[~shapely.covers(near, pieces)]:
        yield Region(piece, contour, _depth_mm(piece, entered))


def _void(xyb: Floats, radius: float, *, outline: bool) -> shapely.Geometry:
    ring = valid_polygon(polygon(xyb, (), chord_mm=CHORD_MM))
    if not outline:
        return ring
    # round corners, or the tool would not reach into those of the box
    return shapely.box(*ring.bounds).buffer(3.0 * radius).difference(ring)


def _depth_mm(piece: shapely.Polygon, entered: shapely.Geometry) -> float:
    if entered.is_empty:
        return float("inf")
    return float(shapely.distance(shapely.points(shapely.get_coordinates(piece)), entered).max())
