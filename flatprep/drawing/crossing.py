"""Contours that cross themselves or each other, or share an edge."""

import re
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import shapely
from shapely import STRtree

from flatprep.drawing.chain import Chain
from flatprep.drawing.tree import Polygons
from flatprep.model.drawing import Fault

_TOUCH_AREA_MM2 = 1e-3
_TOUCH_MM = 0.005
_EDGE_MM = 0.5
"""Borders that run within `_TOUCH_MM` of each other for this long share an edge; crossing ones do not."""
_PLACE = re.compile(r"\[(-?[\d.]+(?:[eE][+-]?\d+)?) (-?[\d.]+(?:[eE][+-]?\d+)?)\]")


@dataclass(frozen=True, slots=True)
class Crossings:
    """What is unsound among contours.

    Attributes
    ----------
    selfish : frozenset of int
        Contours that cross themselves.
    clusters : tuple of tuple of int
        Contours that share edges with each other and do not cross.
    faults : tuple of Fault
    """

    selfish: frozenset[int]
    clusters: tuple[tuple[int, ...], ...]
    faults: tuple[Fault, ...]

    @property
    def touching(self) -> frozenset[int]:
        """Every contour that stands in a cluster."""
        return frozenset(i for cluster in self.clusters for i in cluster)


def crossings(rings: Sequence[Chain], shapes: Polygons) -> Crossings:
    """Find crossings among closed contours; `shapes` are their polygons."""
    if len(shapes) == 0:
        return Crossings(frozenset(), (), ())
    faults: list[Fault] = []
    selfish = frozenset(np.flatnonzero(~shapely.is_valid(shapes)).tolist())
    for i in sorted(selfish):
        faults.append(Fault("self-crossing", _where(shapes[i]), None, _handles(rings[i]), "the outline crosses itself"))
    sound = np.array([i for i in range(len(rings)) if i not in selfish], dtype=np.int64)
    borders = shapely.boundary(shapes[sound])
    a, b = STRtree(borders).query(borders, predicate="dwithin", distance=_TOUCH_MM)
    near = sorted((int(sound[p]), int(sound[q])) for p, q in zip(a, b, strict=True) if p < q)
    edges = _common_edges(shapes, near)
    shared = [pair for pair, edge in zip(near, edges, strict=True) if edge is not None]
    crossed = _overlapping(shapes, [pair for pair, edge in zip(near, edges, strict=True) if edge is None])
    in_strips = {i for pair in shared for i in pair}
    # a strip that shares an edge with one neighbour and overlaps another belongs to the same outline
    clusters = _clusters([*shared, *(pair for pair in crossed if in_strips & set(pair))])
    for i, j in crossed:
        place = shapely.intersection(shapely.boundary(shapes[i]), shapely.boundary(shapes[j])).representative_point()
        both = _handles(rings[i]) + _handles(rings[j])
        faults.append(Fault("self-crossing", (place.x, place.y), None, both, "two outlines cross each other"))
    for (i, j), place in zip(near, edges, strict=True):
        if place is not None:
            both = _handles(rings[i]) + _handles(rings[j])
            what = "two outlines share an edge: taken as one"
            faults.append(Fault("duplicate-line", (place.x, place.y), None, both, what))
    return Crossings(selfish, clusters, tuple(faults))


def _common_edges(shapes: Polygons, pairs: Sequence[tuple[int, int]]) -> list[shapely.Point | None]:
    """Middle of the stretch along which two borders run together, None where they only meet at points or cross."""
    if not pairs:
        return []
    first, second = np.array(pairs).T
    belts, own = np.unique(second, return_inverse=True)
    around = shapely.buffer(shapely.boundary(shapes[belts]), _TOUCH_MM, quad_segs=1)
    near = shapely.intersection(shapely.boundary(shapes[first]), around[own])
    out: list[shapely.Point | None] = []
    for stretch in near:
        pieces = shapely.get_parts(stretch)
        lengths = shapely.length(pieces)
        k = int(np.argmax(lengths)) if len(pieces) else -1
        out.append(pieces[k].interpolate(0.5, normalized=True) if k >= 0 and lengths[k] > _EDGE_MM else None)
    return out


def _overlapping(shapes: Polygons, pairs: Sequence[tuple[int, int]]) -> list[tuple[int, int]]:
    """Pairs that both have area of their own and area in common."""
    if not pairs:
        return []
    a, b = shapes[np.array(pairs)].T
    common = shapely.area(shapely.intersection(a, b))
    least = np.minimum(shapely.area(a), shapely.area(b))
    cross = (common > _TOUCH_AREA_MM2) & (least - common > np.maximum(_TOUCH_AREA_MM2, 1e-4 * least))
    return [pair for pair, one in zip(pairs, cross.tolist(), strict=True) if one]


def _clusters(pairs: Sequence[tuple[int, int]]) -> tuple[tuple[int, ...], ...]:
    groups: list[set[int]] = []
    for i, j in pairs:
        hit = [g for g in groups if i in g or j in g]
        merged = {i, j}.union(*hit)
        groups = [g for g in groups if g not in hit] + [merged]
    return tuple(tuple(sorted(g)) for g in groups)


def _where(shape: shapely.Polygon) -> tuple[float, float] | None:
    found = _PLACE.search(shapely.is_valid_reason(shape))
    return (float(found[1]), float(found[2])) if found else None


def _handles(ring: Chain) -> tuple[str, ...]:
    return tuple(dict.fromkeys(h for h in ring.handles if h))
