"""Pieces of material by which two shapes differ."""

from collections.abc import Iterator

import numpy as np
import shapely
from shapely.geometry import Polygon
from shapely.geometry.base import BaseGeometry

from flatprep.compare.values import Region


def regions(old: BaseGeometry, new: BaseGeometry, tol_mm: float) -> Iterator[Region]:
    """Pieces that are in one of two shapes only and deeper than the tolerance, the deepest first within each kind.

    Parameters
    ----------
    old, new
        Polygons in the same coordinates, mm.
    tol_mm
        Edges nearer to each other than this are the same edge.
    """
    for added, shape, other in ((True, new, old), (False, old, new)):
        found = []
        for piece in shapely.get_parts(_opened(shape.difference(other), tol_mm / 4.0)).tolist():
            if isinstance(piece, Polygon) and not piece.is_empty:
                depth = _depth(piece, other.boundary)
                if depth > tol_mm:
                    found.append(_region(piece, depth, new.boundary, added=added, tol_mm=tol_mm))
        yield from sorted(found, key=lambda r: -r.depth_mm)


def _opened(shape: BaseGeometry, by_mm: float) -> BaseGeometry:
    """Return the shape without slivers: edges that are the same but for rounding leave them."""
    return shape.buffer(-by_mm, join_style="mitre").buffer(by_mm, join_style="mitre")


def _depth(piece: Polygon, boundary: BaseGeometry) -> float:
    """Largest distance of the piece's corners from the other shape's edge, or the radius that fits in, if larger."""
    corners = shapely.points(shapely.get_coordinates(piece))
    shapely.prepare(boundary)
    far = float(shapely.distance(corners, boundary).max())
    # a hole that was filled has all its corners on the edge of the other
    return max(far, float(shapely.length(shapely.maximum_inscribed_circle(piece, tolerance=0.001))))


def _region(piece: Polygon, depth: float, edge: BaseGeometry, *, added: bool, tol_mm: float) -> Region:
    along = edge.intersection(piece.buffer(tol_mm / 2.0))
    inside: shapely.Point = piece.representative_point()
    rings = tuple(np.asarray(r.coords)[:-1] for r in (piece.exterior, *piece.interiors))
    return Region(added, (float(inside.x), float(inside.y)), depth, float(along.length), float(piece.area), rings)
