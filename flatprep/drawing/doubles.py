"""Lines that lie on others: contours drawn twice, and loose lines that run along an edge."""

from collections.abc import Sequence

import numpy as np
import numpy.typing as npt
import shapely
from shapely import STRtree

from flatprep.drawing.chain import Chain
from flatprep.drawing.tidy import told_doubles
from flatprep.drawing.tree import CHORD_MM, Polygons
from flatprep.geom.bulge import Floats, points_along
from flatprep.model.drawing import Curve, Fault

Lines = npt.NDArray[np.object_]

_FINE_MM = 0.002
_ALONG_MM = 2.0
"""Lines that stay within `_FINE_MM` of each other for less than this touch, or are tangent (radius under 1 m)."""


def without_double_rings(rings: Sequence[Chain], shapes: Polygons, same_mm: float) -> tuple[list[int], list[Fault]]:
    """Tell which contours (indices) do not lie on an earlier one all along, within `same_mm`.

    `shapes` are their polygons, chords within `CHORD_MM`.
    """
    if len(rings) < 2:
        return list(range(len(rings))), []
    near = _near_rows(shapely.bounds(shapes), 2 * same_mm + 2 * CHORD_MM)
    dropped: set[int] = set()
    for i, j in near:
        first, second = min(i, j), max(i, j)
        if (
            first not in dropped
            and second not in dropped
            and _coincide(_fine(rings[first]), _fine(rings[second]), same_mm)
        ):
            dropped.add(second)
    places = [(_place(rings[k]), rings[k].handles[0] if rings[k].handles else "") for k in sorted(dropped)]
    return [k for k in range(len(rings)) if k not in dropped], told_doubles(places)


def without_overlapped(
    loose: Sequence[Chain], rings: Sequence[Chain], same_mm: float
) -> tuple[list[Chain], list[Fault]]:
    """Drop loose chains that run along an edge of a contour all the way."""
    if not loose or not rings:
        return list(loose), []
    edges = [_closed_line(points_along(r.xyb, closed=True, chord_mm=_FINE_MM)) for r in rings]
    tree = STRtree(edges)
    kept, places = [], []
    for c in loose:
        xy = points_along(c.xyb, closed=False, chord_mm=_FINE_MM)
        line = shapely.linestrings(xy)
        near = tree.query(line, predicate="dwithin", distance=same_mm)
        if any(_lies_along(xy, edges[k], same_mm) for k in near):
            places.append((_place(c), c.handles[0] if c.handles else ""))
        else:
            kept.append(c)
    return kept, told_doubles(places)


def overlaps(curves: Sequence[Curve]) -> tuple[list[Fault], float]:
    """Tell where open curves run along each other, and how much length is there twice, mm."""
    lines = lines_of([c.xyb for c in curves])
    a, b = STRtree(lines).query(lines, predicate="dwithin", distance=_FINE_MM)
    a, b = a[a < b], b[a < b]
    belts = shapely.buffer(lines[a], _FINE_MM, cap_style="flat")
    stretches = shapely.intersection(lines[b], belts)
    size = shapely.length(stretches)
    along = np.flatnonzero(size > _ALONG_MM)
    middles = shapely.line_interpolate_point(shapely.line_merge(stretches[along]), 0.5, normalized=True)
    places = [
        ((at.x, at.y), curves[k].handle) for at, k in zip(middles, b[along].tolist(), strict=True) if not at.is_empty
    ]
    return told_doubles(places), float(size[along].sum())


def lines_of(polylines: Sequence[Floats]) -> Lines:
    """Return open polylines as shapely's lines, chords within `_FINE_MM`, shape (n,)."""
    lines = [shapely.linestrings(points_along(xyb, closed=False, chord_mm=_FINE_MM)) for xyb in polylines]
    return np.array(lines, dtype=object)


def _fine(c: Chain) -> Floats:
    return points_along(c.xyb, closed=True, chord_mm=_FINE_MM)


def _near_rows(boxes: Floats, reach: float) -> list[tuple[int, int]]:
    """Pairs of boxes whose four sides agree within `reach`."""
    corners = shapely.points(boxes[:, :2])
    a, b = STRtree(corners).query(corners, predicate="dwithin", distance=2 * reach)
    keep = (a < b) & (np.abs(boxes[a] - boxes[b]).max(axis=1) <= reach)
    return list(zip(a[keep].tolist(), b[keep].tolist(), strict=True))


def _coincide(a: Floats, b: Floats, same_mm: float) -> bool:
    one, two = _closed_line(a), _closed_line(b)
    return _lies_along(a, two, same_mm) and _lies_along(b, one, same_mm)


def _lies_along(xy: Floats, edge: shapely.LineString, same_mm: float) -> bool:
    """Tell whether all points, and the middles between them, are near the edge; a few are asked first."""
    middles = (xy[1:] + xy[:-1]) / 2.0
    probe = shapely.points(np.vstack([xy, middles]))
    few = probe[:: max(1, len(probe) // 8)]
    if not shapely.dwithin(edge, few, same_mm).all():
        return False
    shapely.prepare(edge)
    return bool(shapely.dwithin(edge, probe, same_mm).all())


def _closed_line(xy: Floats) -> shapely.LineString:
    return shapely.linestrings(np.vstack([xy, xy[:1]]))


def _place(c: Chain) -> tuple[float, float]:
    x, y = c.xyb[0, :2]
    return float(x), float(y)
