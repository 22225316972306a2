"""What a chain cannot do: branches, shared edges, crossings. Chords find the regions, exact arcs bound them.

Curves are flattened, shapely finds the faces, and every edge of the result is mapped back to the line or arc it came
from: between two points of the result runs the exact arc, not the chords.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt
from shapely import STRtree, distance, get_parts, linestrings, points, polygonize, unary_union
from shapely.geometry import LineString, Polygon
from shapely.geometry.base import BaseGeometry

from flatprep.drawing.chain import Chain
from flatprep.drawing.ends import node_ids
from flatprep.geom.bulge import (
    Floats,
    Segments,
    chord_counts,
    chord_starts,
    length,
    points_along,
    segments,
    signed_area,
    split_arcs,
)
from flatprep.geom.polygons import polygon
from flatprep.model.drawing import Curve

CHORD_MM = 0.002
_GRID_MM = 1e-4
_SNAP_MM = 1e-3
_LEAST_MM2 = 1e-6


@dataclass(frozen=True, slots=True, eq=False)
class Regions:
    """What the planar graph says.

    Attributes
    ----------
    rings : tuple of Chain
        Boundaries of the regions, closed, exact arcs.
    inner : tuple of Curve
        Curves that lie inside a region and bound nothing: shared edges.
    rest : tuple of Curve
        Curves that neither bound nor lie inside a region.
    """

    rings: tuple[Chain, ...]
    inner: tuple[Curve, ...]
    rest: tuple[Curve, ...]


def regions_of_net(curves: Sequence[Curve], join_mm: float) -> Regions:
    """Take the outline of everything that a net of branching curves encloses.

    Parameters
    ----------
    curves
        Open ones that meet at branches.
    join_mm
        An end this near to another curve is taken to touch it.
    """
    lines = _with_common_ends(curves, join_mm)
    lines = _onto_neighbours(lines, join_mm)
    faces = polygonize(get_parts(unary_union(lines, grid_size=_GRID_MM)).tolist())
    whole = unary_union(get_parts(faces).tolist())
    return _regions(whole, curves)


def regions_of_rings(rings: Sequence[Chain]) -> tuple[Chain, ...]:
    """Join closed contours that share edges; one that lies in another, flush with its edge, is cut out of it.

    What they enclose together and nobody drew, such as the middle panel of a flat pattern drawn as strips, is material.
    """
    curves = [Curve(r.xyb, closed=True, layer=r.layers[0], handle=r.handles[0] if r.handles else "") for r in rings]
    shapes = [Polygon(points_along(r.xyb, closed=True, chord_mm=CHORD_MM)).buffer(0) for r in rings]
    shapes.sort(key=lambda s: -s.area)
    whole: BaseGeometry = Polygon()
    cut_out: list[BaseGeometry] = []
    for shape in shapes:
        inside = whole.intersection(shape).area > 0.98 * shape.area
        if inside and not _flush(shape, whole):
            continue  # a panel of a flat pattern: its edges are those of the strips around it
        cut_out += [shape] if inside else []
        whole = areal((whole.difference if inside else whole.union)(shape, grid_size=_SNAP_MM))
    return _regions(_without_gaps(whole, cut_out), curves).rings


def _flush(shape: BaseGeometry, whole: BaseGeometry) -> bool:
    """Tell whether a shape inside another has a stretch of edge in common with it."""
    along = whole.boundary.intersection(shape.boundary.buffer(5 * CHORD_MM, quad_segs=1))
    return bool(along.length > 50 * CHORD_MM)


def _without_gaps(whole: BaseGeometry, cut_out: Sequence[BaseGeometry]) -> BaseGeometry:
    """Fill what is enclosed and is no contour that was cut out."""
    gaps = [Polygon(ring) for part in get_parts(whole).tolist() for ring in part.interiors]
    drawn = unary_union(list(cut_out))
    filled = [gap for gap in gaps if gap.intersection(drawn).area < 0.5 * gap.area]
    return unary_union([whole, *filled]) if filled else whole


def areal(shape: BaseGeometry) -> BaseGeometry:
    """Return what has an area: slivers that the grid collapses to lines are in the way of the next operation."""
    if shape.geom_type != "GeometryCollection":
        return shape
    return unary_union([g for g in get_parts(shape).tolist() if g.area > 0.0])


def even_odd(ring: Chain) -> tuple[Chain, ...]:
    """Contours of what a self-crossing contour encloses by the even-odd rule."""
    line = LineString(np.vstack([p := points_along(ring.xyb, closed=True, chord_mm=CHORD_MM), p[:1]]))
    faces = get_parts(polygonize(get_parts(unary_union(line)).tolist()))
    curve = Curve(ring.xyb, closed=True, layer=ring.layers[0], handle=ring.handles[0] if ring.handles else "")
    source = _Source([curve])
    return tuple(
        c for face in faces if face.area > _LEAST_MM2 for c in source.rings_of(Polygon(face.exterior), ring.layers)
    )


def _regions(whole: BaseGeometry, curves: Sequence[Curve]) -> Regions:
    source = _Source(curves)
    layers = tuple(sorted({c.layer for c in curves}))
    areas = [p for p in get_parts(whole).tolist() if isinstance(p, Polygon) and p.area > _LEAST_MM2]
    rings = tuple(ring for area in areas for ring in source.rings_of(area, layers))
    inner: list[Curve] = []
    rest: list[Curve] = []
    boundary = unary_union([area.boundary for area in areas]) if areas else None
    for curve in curves:
        line = LineString(points_along(curve.xyb, closed=False, chord_mm=CHORD_MM))
        middle = line.interpolate(0.5, normalized=True)
        if boundary is not None and boundary.distance(middle) <= 5 * CHORD_MM:
            continue
        within = any(area.covers(middle) for area in areas)
        (inner if within else rest).append(curve)
    return Regions(rings, tuple(inner), tuple(rest))


def _with_common_ends(curves: Sequence[Curve], join_mm: float) -> list[LineString]:
    """Chords of the curves, ends that are one point moved onto the first of them."""
    chords = [points_along(c.xyb, closed=False, chord_mm=CHORD_MM) for c in curves]
    ends = np.array([p for xy in chords for p in (xy[0], xy[-1])])
    nodes = node_ids(ends, lambda i: length(curves[i].xyb, closed=False), join_mm)
    first = np.unique(nodes, return_index=True)[1]
    for k, xy in enumerate(chords):
        xy[0], xy[-1] = ends[first[nodes[2 * k]]], ends[first[nodes[2 * k + 1]]]
    return [LineString(xy) for xy in chords]


def _onto_neighbours(lines: Sequence[LineString], reach: float) -> list[LineString]:
    """Move dangling ends that stop just short of another line onto the nearest one."""
    chords = [np.asarray(line.coords).copy() for line in lines]
    ends = points(np.array([xy[k] for xy in chords for k in (0, -1)]))
    end, other = STRtree(lines).query(ends, predicate="dwithin", distance=reach)
    foreign = end // 2 != other
    end, other = end[foreign], other[foreign]
    gap = distance(ends[end], np.array(lines, dtype=object)[other])
    touching = set(end[gap == 0.0].tolist())
    order = np.lexsort((other, gap, end))
    nearest = order[np.unique(end[order], return_index=True)[1]]
    for e, k in zip(end[nearest].tolist(), other[nearest].tolist(), strict=True):
        if e not in touching:
            line = lines[k]
            chords[e // 2][-(e % 2)] = np.asarray(line.interpolate(line.project(ends[e])).coords[0])
    return [LineString(xy) for xy in chords]


def _encloses(chain: Chain) -> bool:
    """Tell whether a closed chain is more than one stroke there and back."""
    return abs(signed_area(chain.xyb)) > _LEAST_MM2


class _Source:
    """Finds the line or arc that a chord of a result lies on, and cuts it exactly."""

    def __init__(self, curves: Sequence[Curve]) -> None:
        per_curve = [segments(c.xyb, closed=c.closed) for c in curves]
        self._handles = [c.handle for c, s in zip(curves, per_curve, strict=True) for _ in range(len(s))]
        names = Segments.__dataclass_fields__
        seg = self._seg = Segments(*(np.concatenate([getattr(s, k) for s in per_curve]) for k in names))
        start, self._owner = chord_starts(seg, chord_counts(seg, CHORD_MM))
        # a segment's last chord runs to its end
        end = np.vstack([start[1:], start[:1]])
        last = np.append(np.diff(self._owner) > 0, True)
        end[last] = seg.end
        self._tree = STRtree(linestrings(np.stack([start, end], axis=1)))
        self._vertices = np.vstack([self._seg.start, self._seg.end])
        self._corners = STRtree(points(self._vertices))

    def rings_of(self, area: Polygon, layers: tuple[str, ...]) -> list[Chain]:
        """Contours of a region, exact unless that would make them cross.

        Where an outline touches itself a thousandth of a millimetre decides: there shapely's own points stay. Slivers
        of which nothing is left on the curves themselves are none.
        """
        every = [np.asarray(edge.coords)[:-1] for edge in (area.exterior, *area.interiors)]
        drawn = [(xy, chain) for xy in every if _encloses(chain := self._exact(xy, layers))]
        if not drawn or drawn[0][0] is not every[0]:
            return []
        edges, exact = zip(*drawn, strict=True)
        if polygon(exact[0].xyb, [c.xyb for c in exact[1:]], chord_mm=CHORD_MM).is_valid:
            return list(exact)
        plain = [np.column_stack([xy, np.zeros(len(xy))]) for xy in edges]
        return [
            Chain(rows, chain.handles[:1] * len(rows), layers, closed=True)
            for rows, chain in zip(plain, exact, strict=True)
        ]

    def _exact(self, xy: Floats, layers: tuple[str, ...]) -> Chain:
        nxt = np.roll(xy, -1, axis=0)
        near = self._tree.query_nearest(points((xy + nxt) / 2.0), all_matches=False)[1]
        own = self._owner[near]
        breaks = np.flatnonzero(own != np.roll(own, 1))
        if len(breaks) == 0:  # a sliver along one line or arc
            breaks = np.array([0, len(xy) // 2])
        xy = self._snapped(xy)
        rows, handles = [], []
        for k, first in enumerate(breaks):
            last = breaks[(k + 1) % len(breaks)]
            rows.append((*xy[first], self._bulge(int(own[first]), xy, int(first), int(last))))
            handles.append(self._handles[int(own[first])])
        return Chain(*_split(np.array(rows), tuple(handles)), layers=layers, closed=True)

    def _snapped(self, xy: Floats) -> Floats:
        """Points put back on the vertices they were before shapely rounded them to its grid."""
        point, corner = self._corners.query_nearest(points(xy), max_distance=2 * _SNAP_MM, all_matches=False)
        out = xy.copy()
        out[point] = self._vertices[corner]
        return out

    def _bulge(self, segment: int, xy: Floats, first: int, last: int) -> float:
        if not self._seg.is_arc[segment]:
            return 0.0
        n = len(xy)
        run = xy[np.arange(first, first + ((last - first - 1) % n) + 2) % n]
        centre = self._seg.centre[segment]
        angles = np.unwrap(np.arctan2(*(run - centre).T[::-1]))
        return float(np.tan((angles[-1] - angles[0]) / 4.0))


def _split(rows: Floats, handles: tuple[str, ...]) -> tuple[Floats, tuple[str, ...]]:
    """Halve arcs of more than a half circle, handles with them."""
    out: list[npt.NDArray[np.float64]] = []
    names: list[str] = []
    for k in range(len(rows)):
        piece = split_arcs(np.array([rows[k], [*rows[(k + 1) % len(rows), :2], 0.0]]), closed=False)
        out.append(piece[:-1])
        names += [handles[k]] * (len(piece) - 1)
    return np.vstack(out), tuple(names)
