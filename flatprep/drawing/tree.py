"""Which contour lies in which: even depth is material, odd depth a hole."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt
import shapely
from shapely import STRtree

from flatprep.geom import bulge
from flatprep.geom.bulge import Floats
from flatprep.geom.polygons import ring
from flatprep.model.drawing import Contour, Part

Polygons = npt.NDArray[np.object_]
CHORD_MM = 0.01
"""How near the chords of these polygons come to the arcs: enough to tell what lies in what."""


def polygons_of(closed: Sequence[Floats], chord_mm: float) -> Polygons:
    """Return one polygon a closed polyline, without holes, shape (n,)."""
    rings = [ring(xyb, chord_mm) for xyb in closed]
    if not rings:
        return np.array([], dtype=object)
    padded = [r if len(r) >= 3 else np.vstack([r, r[:1]]) for r in rings]
    sizes = np.array([len(r) for r in padded])
    lines = shapely.linearrings(np.vstack(padded), indices=np.repeat(np.arange(len(padded)), sizes))
    return np.asarray(shapely.polygons(lines))


@dataclass(frozen=True, slots=True)
class Nesting:
    """Depth of each contour and the one it lies in directly (-1 for none), shape (n,) each."""

    depth: npt.NDArray[np.int64]
    parent: npt.NDArray[np.int64]


def nesting(shapes: Polygons) -> Nesting:
    """Find what lies in what by a point inside each polygon."""
    n = len(shapes)
    depth, parent = np.zeros(n, dtype=np.int64), np.full(n, -1, dtype=np.int64)
    if n < 2:
        return Nesting(depth, parent)
    area = shapely.area(shapes)
    inner, around = STRtree(shapes).query(shapely.point_on_surface(shapes), predicate="within")
    larger = area[around] > area[inner]
    inner, around = inner[larger], around[larger]
    np.add.at(depth, inner, 1)
    # the last assignment wins: order by falling area, so that the smallest container stays
    order = np.argsort(-area[around], kind="stable")
    parent[inner[order]] = around[order]
    return Nesting(depth, parent)


def parts_of(contours: Sequence[Contour], nest: Nesting, stem: str) -> tuple[Part, ...]:
    """Parts out of nested contours, named after the drawing; left to right, then upwards."""
    outers = [i for i in range(len(contours)) if nest.depth[i] % 2 == 0]
    outers.sort(key=lambda i: (round(contours[i].bounds[0], 3), round(contours[i].bounds[1], 3), -contours[i].area_mm2))
    parts = []
    for number, i in enumerate(outers, start=1):
        holes = sorted(
            (contours[j] for j in np.flatnonzero(nest.parent == i).tolist()),
            key=lambda c: (round(c.bounds[0], 3), round(c.bounds[1], 3)),
        )
        name = stem if len(outers) == 1 else f"{stem}#{number}"
        depth = int(nest.depth[i])
        parts.append(
            Part(name, turned(contours[i], left=True), tuple(turned(h, left=False) for h in holes), depth=depth)
        )
    return tuple(parts)


def turned(contour: Contour, *, left: bool) -> Contour:
    """Return the contour run anticlockwise (`left`) or clockwise."""
    if (bulge.signed_area(contour.xyb) > 0) == left:
        return contour
    # reversing keeps vertex 0, so the first segment becomes the last
    return Contour(bulge.reverse(contour.xyb, closed=True), contour.handles[::-1], contour.layers)
