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
    shared: list[tuple[int, int]] = []
    crossed: list[tuple[int, int]] = []
    borders = shapely.boundary(shapes[sound])
    a, b = STRtree(borders).query(borders, predicate="dwithin", distance=_TOUCH_MM)
    for i, j in sorted((int(sound[p]), int(sound[q])) for p, q in zip(a, b, strict=True) if p < q):
        edge = _common_edge(shapes[i], shapes[j])
        if edge is not None:
            shared.append((i, j))
        elif _overlap(shapes[i], shapes[j]):
            crossed.append((i, j))
    in_strips = {i for pair in shared for i in pair}
    # a strip that shares an edge with one neighbour and overlaps another belongs to the same outline
    clusters = _clusters([*shared, *(pair for pair in crossed if in_strips & set(pair))])
    for i, j in crossed:
        place = shapely.intersection(shapely.boundary(shapes[i]), shapely.boundary(shapes[j])).representative_point()
        both = _handles(rings[i]) + _handles(rings[j])
        faults.append(Fault("self-crossing", (place.x, place.y), None, both, "two outlines cross each other"))
    for i, j in shared:
        place = _common_edge(shapes[i], shapes[j])
        at = None if place is None else (place.x, place.y)
        both = _handles(rings[i]) + _handles(rings[j])
        faults.append(Fault("duplicate-line", at, None, both, "two outlines share an edge: taken as one"))
    return Crossings(selfish, clusters, tuple(faults))


def _common_edge(a: shapely.Polygon, b: shapely.Polygon) -> shapely.Point | None:
    """Middle of the stretch along which two borders run together, None where they only meet at points or cross."""
    near = shapely.intersection(shapely.boundary(a), shapely.buffer(shapely.boundary(b), _TOUCH_MM, quad_segs=1))
    pieces = [g for g in shapely.get_parts(near).tolist() if g.length > _EDGE_MM]
    if not pieces:
        return None
    longest = max(pieces, key=lambda g: float(g.length))
    return longest.interpolate(0.5, normalized=True)


def _overlap(a: shapely.Polygon, b: shapely.Polygon) -> bool:
    """Tell whether both have area of their own and area in common."""
    common = shapely.intersection(a, b).area
    return bool(
        common > _TOUCH_AREA_MM2 and min(a.area, b.area) - common > max(_TOUCH_AREA_MM2, 1e-4 * min(a.area, b.area))
    )


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
