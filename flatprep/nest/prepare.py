"""From true parts and sheets to what the search lays: outlines that may touch, in containers that may be touched."""

from collections.abc import Sequence
from dataclasses import dataclass
from math import cos, pi

import numpy as np
import shapely
from shapely.geometry import MultiPolygon, Polygon

from flatprep.geom.bulge import Floats
from flatprep.geom.outward import outside_points, simplify_outward
from flatprep.geom.polygons import valid_polygon
from flatprep.model.drawing import Part
from flatprep.nest.problem import StockSheet
from flatprep.nest.shapes import Container

CHORD_MM = 0.01
"""Largest distance of an outline from a true arc, where nothing is simplified."""
MOST_TOLERANCE_MM = 0.1
TOLERANCE_SHARE = 1.0 / 25.0
"""Outlines are simplified within this share of the spacing."""
CURVED_SHARE = 1.0 / 2000.0
CORNERS = 24
"""Rings of more corners than these are curves, and are simplified by a share of their size."""
QUARTER = 16
"""Chords a quarter circle of a grown corner."""
OFFSET_EXCESS = 1.002
"""Offsets are made this much larger: GEOS takes ends of offset edges nearer than a thousandth of it for one."""
MANY = 400
"""Rings of more points are simplified before they are grown: an offset of a long comb would take minutes."""


@dataclass(frozen=True, slots=True, eq=False)
class Grown:
    """A part's outline grown by half the spacing, about `centre` of its drawing (mm)."""

    outer: Floats
    holes: tuple[Floats, ...]
    centre: tuple[float, float]


def tolerance_for(spacing_mm: float) -> float:
    """How far an outline may be simplified, mm: nothing that matters where parts touch."""
    return min(MOST_TOLERANCE_MM, TOLERANCE_SHARE * spacing_mm) if spacing_mm > 0.0 else 1e-7


def tolerance_of(ring: Floats, spacing_mm: float) -> float:
    """How far a ring may be simplified, mm: curves of many chords more freely, and never by what could be seen.

    On the benchmark sets of garments and curved parts half a thousandth of the size adds some 0.02 % of area and takes
    away up to five corners in six.
    """
    across = float(np.hypot(*np.ptp(ring, axis=0)))
    curved = min(MOST_TOLERANCE_MM, CURVED_SHARE * across) if len(ring) > CORNERS else 0.0
    return max(tolerance_for(spacing_mm), curved)


def grow(part: Part, spacing_mm: float, *, windows: bool) -> Grown:
    """Outline that holds every point within half the spacing of the part's material.

    Two parts whose grown outlines do not overlap are apart by the spacing. With spacing 0 straight contours are taken
    as they are, arcs circumscribed within `CHORD_MM`. Windows are left out where they may not be used.
    """
    tolerance = tolerance_for(spacing_mm)
    rings = [_light(outside_points(c.xyb, CHORD_MM), tolerance) for c in part.contours]
    shape = _one_piece(valid_polygon(Polygon(rings[0], rings[1:] if windows else [])))
    shape = Polygon(shape.exterior, [h for h in shape.interiors if windows])
    half = spacing_mm / 2.0
    if half > 0.0:
        shape = _one_piece(shape.buffer(_offset(half), quad_segs=QUARTER))
    box = np.array(part.outer.bounds) + np.array([-half, -half, half, half])
    outside, *inside = (np.asarray(r.coords)[:-1] for r in (shape.exterior, *shape.interiors))
    outer = clipped(simple_ring(outside, tolerance_of(outside, spacing_mm), 1.0), box)
    holes = [simple_ring(h, tolerance_of(h, spacing_mm), -1.0) for h in inside]
    middle = (box[:2] + box[2:]) / 2.0
    return Grown(
        np.ascontiguousarray(outer - middle),
        tuple(np.ascontiguousarray(h - middle) for h in holes if len(h) >= 3),
        (float(middle[0]), float(middle[1])),
    )


def container_of(sheet: StockSheet, margin_mm: float, spacing_mm: float, length_mm: float | None = None) -> Container:
    """Region that grown outlines may fill: the border moved in by the margin less half the spacing.

    An irregular remnant is never moved out: a notch narrower than the spacing must stay a notch.

    Raises
    ------
    ValueError
        When nothing of the sheet is left.
    """
    half = spacing_mm / 2.0
    rectangle = rectangle_of(sheet, length_mm)
    if rectangle is None or sheet.holes:
        return region_container(_without(usable_region(sheet, max(margin_mm - half, 0.0)), sheet.keep_out))
    x0, y0, x1, y1 = rectangle
    left, right, bottom, top = sheet.margins(margin_mm)
    x0, y0, x1, y1 = x0 + left - half, y0 + bottom - half, x1 - right + half, y1 - top + half
    if x1 - x0 <= 0.0 or y1 - y0 <= 0.0:
        raise ValueError("the margin leaves nothing of the sheet")
    if sheet.keep_out:
        return region_container(_without(shapely.box(x0, y0, x1, y1), sheet.keep_out))
    return Container(np.array([[x0, y0], [x1, y0], [x1, y1], [x0, y1]]))


def _without(region: Polygon | MultiPolygon, keep_out: Sequence[Sequence[float]]) -> Polygon | MultiPolygon:
    """Region without what nothing may lie in."""
    return region.difference(shapely.union_all([_kept_out(one) for one in keep_out])) if keep_out else region


def _kept_out(one: Sequence[float]) -> Polygon:
    """Box, or a polygon around a circle."""
    if len(one) == 4:
        return shapely.box(*one)
    x, y, radius = one
    return shapely.Point(x, y).buffer(radius / cos(pi / (4 * QUARTER)), quad_segs=QUARTER)


def rectangle_of(sheet: StockSheet, length_mm: float | None = None) -> tuple[float, float, float, float] | None:
    """Box of a sheet whose border is an axis-parallel rectangle, else None."""
    if sheet.outline is None:
        length = sheet.length_mm if sheet.length_mm is not None else length_mm
        return None if length is None else (0.0, 0.0, length, sheet.width_mm)
    x0, y0, x1, y1 = Polygon(sheet.outline).bounds
    full = (x1 - x0) * (y1 - y0)
    return (x0, y0, x1, y1) if abs(Polygon(sheet.outline).area - full) <= 1e-9 * full else None


def usable_region(sheet: StockSheet, inset_mm: float) -> Polygon | MultiPolygon:
    """Return what of a remnant is `inset_mm` or more from its border and its holes; may be several pieces, or none."""
    border = sheet.outline if sheet.outline is not None else _rectangle_points(sheet)
    region = valid_polygon(Polygon(border, list(sheet.holes)))
    if inset_mm > 0.0:
        region = region.buffer(-_offset(inset_mm), quad_segs=QUARTER)
    return region


def _offset(distance_mm: float) -> float:
    """Return what to offset by so that chords of round corners, too, are `distance_mm` away.

    GEOS rounds the number of chords of a corner: one that turns by less than one and a half steps gets a single chord.
    """
    return OFFSET_EXCESS * distance_mm / cos(1.5 * pi / (4 * QUARTER))


def _rectangle_points(sheet: StockSheet) -> Floats:
    length = sheet.length_mm or 0.0
    return np.array([[0.0, 0.0], [length, 0.0], [length, sheet.width_mm], [0.0, sheet.width_mm]])


def region_of(container: Container) -> Polygon | MultiPolygon:
    """Region of a container as shapely sees it."""
    whole = Polygon(container.outer)
    return whole.difference(shapely.union_all([Polygon(h) for h in container.holes])) if container.holes else whole


def region_container(region: Polygon | MultiPolygon) -> Container:
    """Container of a region that may be in several pieces.

    Raises
    ------
    ValueError
        When the region is empty.
    """
    if region.is_empty:
        raise ValueError("the margin leaves nothing of the sheet")
    if isinstance(region, Polygon):
        holes = tuple(np.asarray(h.coords)[:-1] for h in region.interiors)
        return Container(np.ascontiguousarray(np.asarray(region.exterior.coords)[:-1][::-1]), holes)
    box = shapely.box(*region.bounds)
    rest = box.difference(region)
    keep_out = [p for p in getattr(rest, "geoms", [rest]) if p.area > 0.0]
    return Container(np.asarray(box.exterior.coords)[:-1], tuple(np.asarray(p.exterior.coords)[:-1] for p in keep_out))


def _light(ring: Floats, tolerance_mm: float) -> Floats:
    return simplify_outward(ring, tolerance_mm / 2.0) if len(ring) > MANY else ring


def _one_piece(shape: Polygon | MultiPolygon) -> Polygon:
    """Return the region itself, or the hull of what an outline that crosses itself has fallen into."""
    return shape if isinstance(shape, Polygon) else shape.convex_hull


def simple_ring(ring: Floats, tolerance_mm: float, side: float) -> Floats:
    """Ring with fewer corners, material left; the ring itself where the shorter one would cross itself."""
    signed = shapely.LinearRing(ring).is_ccw
    straight = ring if signed == (side > 0.0) else ring[::-1]
    fewer = simplify_outward(straight, tolerance_mm)
    return fewer if len(fewer) >= 3 and Polygon(fewer).is_valid else straight


def clipped(ring: Floats, box: Sequence[float] | Floats) -> Floats:
    """Cut off what simplifying has added outside the true box: pieces still fit where they just fit."""
    low, high = ring.min(axis=0), ring.max(axis=0)
    if (low >= np.asarray(box)[:2]).all() and (high <= np.asarray(box)[2:]).all():
        return ring
    cut = Polygon(ring).intersection(shapely.box(*box))
    if not isinstance(cut, Polygon) or cut.is_empty:
        return ring
    points = np.asarray(cut.exterior.coords)[:-1]
    return points if shapely.LinearRing(points).is_ccw else points[::-1]
