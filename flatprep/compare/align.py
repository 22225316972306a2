"""How the new part lies on the old one: the motion under which most edges and holes fall together."""

from collections import defaultdict
from collections.abc import Iterator, Sequence
from math import atan2, degrees, hypot

import numpy as np
import shapely
from shapely.geometry.base import BaseGeometry

from flatprep.geom import bulge
from flatprep.geom.bulge import Floats, Similarity
from flatprep.geom.polygons import polygon, valid_polygon
from flatprep.measure.holes import Hole
from flatprep.model.drawing import Part

CHORD_MM = 0.01
_MOST_EDGES = 60
_MOST_HOLES = 14
_LEAST_EDGE_MM = 1.0
_SAME_LENGTH_MM = 0.02
_CELL_DEG, _CELL_MM = 0.2, 0.5
_TRIED = 10
IN_PLACE = Similarity()


def material(part: Part) -> BaseGeometry:
    """Polygon of a part, chords within `CHORD_MM`."""
    return valid_polygon(polygon(part.outer.xyb, [h.xyb for h in part.holes], chord_mm=CHORD_MM))


def moved(shape: BaseGeometry, motion: Similarity) -> BaseGeometry:
    """Return a shape, moved."""
    return shapely.transform(shape, motion.points)


def motions(old: Part, new: Part, old_holes: Sequence[Hole], new_holes: Sequence[Hole]) -> list[Similarity]:
    """Motions that lay the new part on the old one, the best first.

    Notes
    -----
    Every pair of edges of one length and bulge, and every two pairs of holes at one distance, says one motion; the
    motions that most length agrees on are tried, and judged by the area in which the two then differ. Staying where
    it is goes before a better motion, unless that halves the difference.
    """
    votes: dict[tuple[int, ...], list[tuple[float, Similarity]]] = defaultdict(list)
    for weight, motion in (*_edge_motions(old, new), *_hole_motions(old_holes, new_holes)):
        x, y = motion.points(np.array([new.moments.centroid]))[0]
        turn = round(motion.turn_deg / _CELL_DEG) % round(360 / _CELL_DEG)
        votes[int(motion.mirrored), turn, round(x / _CELL_MM), round(y / _CELL_MM)].append((weight, motion))
    ranked = sorted(votes.values(), key=lambda cell: -sum(w for w, _ in cell))[:_TRIED]
    tried = [IN_PLACE, *(max(cell, key=lambda v: v[0])[1] for cell in ranked), *_plain_motions(old, new)]
    before, after = material(old), material(new)
    off = [before.symmetric_difference(moved(after, m)).area for m in tried]
    return [tried[k] for k in sorted(range(len(tried)), key=lambda k: _cost(tried[k], off[k], old.area_mm2))]


def _cost(motion: Similarity, off_mm2: float, area_mm2: float) -> float:
    """Difference in area, with a preference for staying in place, then for not turning, then for not turning over."""
    floor = 1e-6 * area_mm2  # below it is chord error and rounding
    if motion is IN_PLACE:
        return off_mm2 / 2.0
    dear = 1.0 + 0.05 * (motion.turn_deg != 0.0) + 0.1 * motion.mirrored
    return max(off_mm2, floor) * dear


def _edges(part: Part) -> Floats:
    """Return the longest edges as rows x0, y0, x1, y1, bulge, length."""
    rows = []
    for contour in part.contours:
        seg = bulge.segments(contour.xyb, closed=True)
        rows.append(np.column_stack([seg.start, seg.end, seg.bulge, np.hypot(*(seg.end - seg.start).T)]))
    every = np.vstack(rows)
    every = every[every[:, 5] >= _LEAST_EDGE_MM]
    return every[np.argsort(-every[:, 5], kind="stable")][:_MOST_EDGES]


def _edge_motions(old: Part, new: Part) -> Iterator[tuple[float, Similarity]]:
    a, plain = _edges(old), _edges(new)
    # turned over, a contour that has its material on the left runs the other way; its bulges stay what they are
    over = plain[:, [2, 3, 0, 1, 4, 5]] * np.array([-1.0, 1.0, -1.0, 1.0, 1.0, 1.0])
    for b, mirrored in ((plain, False), (over, True)):
        alike = (np.abs(a[:, None, 5] - b[None, :, 5]) <= _SAME_LENGTH_MM) & (
            np.abs(a[:, None, 4] - b[None, :, 4]) <= 1e-3
        )
        for i, j in np.argwhere(alike).tolist():
            yield float(a[i, 5]), _motion(a[i, :4], b[j, :4], mirrored=mirrored)


def _hole_motions(old: Sequence[Hole], new: Sequence[Hole]) -> Iterator[tuple[float, Similarity]]:
    """Motions that lay two round holes on two others of their diameters and distance."""
    before, after = _round_pairs(old), _round_pairs(new)
    if not len(before) or not len(after):
        return
    for mirrored in (False, True):
        b = after * np.array([-1.0, 1.0, -1.0, 1.0, 1.0, 1.0, 1.0]) if mirrored else after
        alike = (np.abs(before[:, None, 4:] - b[None, :, 4:]) <= _SAME_LENGTH_MM).all(axis=2)
        for i, j in np.argwhere(alike)[:4000].tolist():
            yield float(before[i, 4]), _motion(before[i, :4], b[j, :4], mirrored=mirrored)


def _round_pairs(holes: Sequence[Hole]) -> Floats:
    """Ordered pairs of round holes as rows x0, y0, x1, y1, distance, diameter, diameter."""
    some = [(*h.at, h.width_mm) for h in holes if h.diameter_mm is not None][:_MOST_HOLES]
    rows = [
        (x0, y0, x1, y1, hypot(x1 - x0, y1 - y0), d0, d1)
        for k, (x0, y0, d0) in enumerate(some)
        for m, (x1, y1, d1) in enumerate(some)
        if k != m and hypot(x1 - x0, y1 - y0) > _LEAST_EDGE_MM
    ]
    return np.array(rows).reshape(-1, 7)


def _motion(a: Floats, b: Floats, *, mirrored: bool) -> Similarity:
    """Return the motion that lays the stretch b (after turning over) on the stretch a, middle on middle."""
    turn = degrees(atan2(a[3] - a[1], a[2] - a[0]) - atan2(b[3] - b[1], b[2] - b[0])) % 360.0
    quarter = round(turn / 90.0) * 90.0
    turn = quarter % 360.0 if abs(turn - quarter) < 1e-3 else turn
    middle = (b[:2] + b[2:]) / 2.0
    x, y = (a[:2] + a[2:]) / 2.0 - Similarity(turn).points(middle[None, :])[0]
    return Similarity(turn, _plain(float(x)), _plain(float(y)), mirrored)


def _plain(shift: float) -> float:
    return 0.0 if abs(shift) < 1e-4 else shift


def _plain_motions(old: Part, new: Part) -> Iterator[Similarity]:
    """Centre on centre in four turns, and each corner of the box on its like: where no edge and no hole says more."""
    for turn in (0.0, 90.0, 180.0, 270.0):
        x, y = np.array(old.moments.centroid) - Similarity(turn).points(np.array([new.moments.centroid]))[0]
        yield Similarity(turn, _plain(float(x)), _plain(float(y)))
    a, b = old.outer.bounds, new.outer.bounds
    for i, j in ((0, 1), (2, 1), (2, 3), (0, 3)):
        yield Similarity(0.0, _plain(a[i] - b[i]), _plain(a[j] - b[j]))
