"""In which order the pieces of a sheet are cut.

First articles go before all others, with what lies in their windows. Pieces in windows go before the piece around
them, the deepest first: they would fall with it. Small ones go before large ones, to within a factor of `SAME_SIZE`: a
small piece may shift when its larger neighbour has come loose. And pieces cut in a row lie apart, so that the heat of
neighbours does not add up: of those whose turn it may be, one is taken that is no neighbour of the last few; among
these the one with most neighbours that still wait, lest they be left over together at the end, then the nearest. Where
all are neighbours the farthest one is taken. Two pieces are neighbours where nothing of the width of the smaller one
fits between their boxes. The rule is greedy and our own.
"""

from collections.abc import Mapping
from functools import lru_cache

import numpy as np
import numpy.typing as npt

from flatprep.geom.bulge import Floats, Similarity
from flatprep.model.drawing import Contour, Part
from flatprep.model.layout import Placement, SheetLayout

SAME_SIZE = 2.0
"""Pieces up to this many times the area of the smallest one left may be cut in its place."""
HOT = 1.0, 0.5
"""Weights of being a neighbour of the last piece and of the one before: so many pieces back, the place is still hot."""

Flags = npt.NDArray[np.bool_]


def cutting_order(sheet: SheetLayout, parts: Mapping[str, Part]) -> list[int]:
    """Return the indices of a sheet's placements in the order of cutting, by the rule above.

    Parameters
    ----------
    parts
        Shapes by the names that the placements use.
    """
    return list(_order(sheet, tuple((name, parts[name]) for name in dict.fromkeys(p.part for p in sheet.placements))))


@lru_cache(maxsize=16)
def _order(sheet: SheetLayout, named: tuple[tuple[str, Part], ...]) -> list[int]:
    """Return the order of one sheet: its drawing and its picture ask one after the other."""
    if not sheet.placements:
        return []
    parts = dict(named)
    boxes = np.array([_box(parts[p.part], p) for p in sheet.placements])
    areas = np.array([parts[p.part].area_mm2 for p in sheet.placements])
    depth = _depths(sheet, parts, boxes)
    early = _early(sheet, parts, boxes)
    order: list[int] = []
    for first in (True, False):
        for level in np.unique(depth)[::-1]:
            rank = [int(k) for k in np.lexsort((boxes[:, 0], areas)) if depth[k] == level and early[k] == first]
            if rank:
                _append_apart(order, rank, boxes, areas)
    return order


def gaps_mm(boxes: Floats, one: Floats) -> Floats:
    """Distance of each box (x0, y0, x1, y1), shape (n, 4), from one of them; 0 where they meet."""
    apart = np.maximum(np.maximum(boxes[:, :2] - one[2:], one[:2] - boxes[:, 2:]), 0.0)
    return np.asarray(np.hypot(apart[:, 0], apart[:, 1]))


def _append_apart(order: list[int], rank: list[int], boxes: Floats, areas: Floats) -> None:
    """Append pieces of one level, given by rising size, to what is cut before them."""
    mine, size = boxes[rank], areas[rank]
    near = np.array([_near(mine, box) for box in mine])  # each of itself, too, which changes no order
    waiting, waits = near.sum(axis=1), np.ones(len(rank), dtype=bool)
    for _ in rank:
        may = waits & (size <= SAME_SIZE * size[int(np.argmax(waits))])
        k = _next(order, may, waiting, boxes, mine)
        waits[k] = False
        waiting = waiting - near[k]
        order.append(rank[k])


def _next(order: list[int], may: Flags, waiting: npt.NDArray[np.int64], boxes: Floats, mine: Floats) -> int:
    """Pick the next of the pieces that may be cut; `waiting` counts the neighbours of each that wait."""
    if not order:
        return int(np.argmax(may))
    gap = gaps_mm(mine, boxes[order[-1]])
    hot = np.where(may, 0.0, np.inf)
    for weight, k in zip(HOT, reversed(order), strict=False):
        hot = hot + weight * _near(mine, boxes[k])
    coolest = hot <= hot.min()
    if hot.min() >= HOT[0]:
        return int(np.argmax(np.where(coolest, gap, -1.0)))
    return int(np.lexsort((gap, -waiting, ~coolest))[0])


def _near(boxes: Floats, one: Floats) -> Flags:
    """Which boxes are neighbours of one: nothing of the width (shorter side) of the smaller of both fits between."""
    own = np.minimum(boxes[:, 2] - boxes[:, 0], boxes[:, 3] - boxes[:, 1])
    return np.asarray(gaps_mm(boxes, one) < np.minimum(own, min(one[2] - one[0], one[3] - one[1])))


def _depths(sheet: SheetLayout, parts: Mapping[str, Part], boxes: Floats) -> npt.NDArray[np.int64]:
    """In how many windows of other pieces each one lies, by boxes: never fewer than in truth, and in their order."""
    depth = np.zeros(len(boxes), dtype=np.int64)
    for placement in sheet.placements:
        for window in _window_boxes(parts[placement.part], placement):
            depth += _within(boxes, window)  # never itself
    return depth


def _early(sheet: SheetLayout, parts: Mapping[str, Part], boxes: Floats) -> Flags:
    """Which pieces are first articles, or lie in the windows of one."""
    early = np.array([p.first for p in sheet.placements])
    for placement in sheet.placements:
        for window in _window_boxes(parts[placement.part], placement) if placement.first else ():
            early |= _within(boxes, window)
    return early


def _within(boxes: Floats, window: Floats) -> Flags:
    inside = (boxes[:, :2] >= window[:2]).all(axis=1) & (boxes[:, 2:] <= window[2:]).all(axis=1)
    return np.asarray(inside, dtype=np.bool_)


def _box(part: Part, placement: Placement) -> Floats:
    return np.asarray(_boxes_turned(part, placement.turn_deg, mirrored=placement.mirrored)[0] + _shift(placement))


def _window_boxes(part: Part, placement: Placement) -> Floats:
    return np.asarray(_boxes_turned(part, placement.turn_deg, mirrored=placement.mirrored)[1:] + _shift(placement))


def _shift(placement: Placement) -> Floats:
    return np.array([placement.dx, placement.dy, placement.dx, placement.dy])


@lru_cache(maxsize=1024)
def _boxes_turned(part: Part, turn_deg: float, *, mirrored: bool) -> Floats:
    """Boxes (x0, y0, x1, y1) of a part's outline and of its holes, about the origin of its drawing; shape (n, 4)."""
    motion = Similarity(turn_deg=turn_deg, mirrored=mirrored)
    return np.array([Contour(motion.polyline(c.xyb)).bounds for c in (part.outer, *part.holes)])
