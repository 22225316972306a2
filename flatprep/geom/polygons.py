"""The one place where shapely polygons are made from contours, with a stated chord error."""

from collections.abc import Sequence

import numpy as np
from shapely import make_valid
from shapely.geometry import LinearRing, MultiPolygon, Point, Polygon

from flatprep.geom.bulge import Floats, points_along


def ring(xyb: Floats, chord_mm: float) -> Floats:
    """Points of a closed polyline for shapely, shape (m, 2), chords within `chord_mm` of the arcs."""
    return points_along(xyb, closed=True, chord_mm=chord_mm)


def polygon(outer: Floats, holes: Sequence[Floats], *, chord_mm: float) -> Polygon:
    """Polygon of closed bulge polylines; its edge is within `chord_mm` of the true one, on either side."""
    return Polygon(ring(outer, chord_mm), [ring(h, chord_mm) for h in holes])


def valid_polygon(shape: Polygon) -> Polygon | MultiPolygon:
    """Return the region itself if sound, else what is inside by the even-odd rule."""
    if shape.is_valid:
        return shape
    mended = make_valid(shape)
    faces = [g for g in getattr(mended, "geoms", [mended]) if isinstance(g, Polygon | MultiPolygon)]
    flat = [p for g in faces for p in getattr(g, "geoms", [g])]
    return flat[0] if len(flat) == 1 else MultiPolygon(flat)


def inner_point(outer: Floats, holes: Sequence[Floats], *, chord_mm: float = 0.01) -> tuple[float, float]:
    """Return a point well inside the material, mm."""
    shape = valid_polygon(polygon(outer, holes, chord_mm=chord_mm))
    point: Point = shape.representative_point()
    return float(point.x), float(point.y)


def is_simple(xyb: Floats, *, chord_mm: float) -> bool:
    """Tell whether a closed polyline does not cross or touch itself."""
    points = ring(xyb, chord_mm)
    return len(points) >= 3 and bool(LinearRing(np.vstack([points, points[:1]])).is_simple)
