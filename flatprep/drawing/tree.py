"""Which contour lies in which: even depth is material, odd depth a hole."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt
import shapely
from shapely import STRtree

from flatprep.geom.bulge import Floats
from flatprep.geom.rings import Rings
from flatprep.model.drawing import Contour, Part, measure

Polygons = npt.NDArray[np.object_]
CHORD_MM = 0.01
"""How near the chords of these polygons come to the arcs: enough to tell what lies in what."""


def polygons_of(closed: Sequence[Floats], chord_mm: float) -> Polygons:
    """Return one polygon a closed polyline, without holes, shape (n,)."""
    if not closed:
        return np.array([], dtype=object)
    xy, owner = Rings.of(closed).points(chord_mm)
    counts = np.bincount(owner)
    # shapely asks for three points of a ring, however thin
    short = np.flatnonzero(counts == 2)
    last = np.cumsum(counts)[short]
    xy, owner = np.insert(xy, last, xy[last - 2], axis=0), np.insert(owner, last, short)
    return np.asarray(shapely.polygons(shapely.linearrings(xy, indices=owner)))


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
    signed = measure(contours)

    def run(i: int, *, left: bool) -> Contour:
        return contours[i] if (signed[i] > 0) == left else contours[i].reversed

    outers = [i for i in range(len(contours)) if nest.depth[i] % 2 == 0]
    outers.sort(key=lambda i: (round(contours[i].bounds[0], 3), round(contours[i].bounds[1], 3), -contours[i].area_mm2))
    parts = []
    for number, i in enumerate(outers, start=1):
        holes = sorted(
            np.flatnonzero(nest.parent == i).tolist(),
            key=lambda j: (round(contours[j].bounds[0], 3), round(contours[j].bounds[1], 3)),
        )
        name = stem if len(outers) == 1 else f"{stem}#{number}"
        outer = run(i, left=True)
        parts.append(Part(name, outer, tuple(run(j, left=False) for j in holes), depth=int(nest.depth[i])))
    return tuple(parts)
