"""One cut for two parts: straight edges of neighbours that face each other exactly a kerf apart.

Where the middle of the cut runs along an edge of one part, it then runs along that of its neighbour too. The part that
comes first in the order of cutting keeps its whole contour; of the later one the common stretch is left out.
"""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

import numpy as np
import shapely
from shapely import STRtree

from flatprep.drawing.gaps import opened
from flatprep.drawing.order import cutting_order
from flatprep.geom.bulge import Floats, segments
from flatprep.geom.stretch import Span, lengths
from flatprep.model.drawing import Contour, Curve, Part
from flatprep.model.layout import SheetLayout

SAME_MM = 0.02
"""Cuts whose middles run this near to each other are one (a tenth of a usual kerf: common practice)."""
LEAST_MM = 3.0
"""Shorter stretches are not worth an open contour."""
PARALLEL = 0.9999
"""Cosine between the directions of two edges that may have a stretch in common."""


@dataclass(frozen=True, slots=True)
class SharedCuts:
    """The cut lines of a sheet, each common stretch once.

    Attributes
    ----------
    lines : tuple of Curve
        In the order of cutting, sheet coordinates, mm.
    stretches : int
        Common stretches.
    saved_mm : float
        Their length: so much less is cut.
    """

    lines: tuple[Curve, ...]
    stretches: int
    saved_mm: float


@dataclass(frozen=True, slots=True)
class _Edges:
    """Straight segments of all contours of a sheet, a row each: contour, start and end, where it starts along it."""

    contour: "np.ndarray[tuple[int], np.dtype[np.int64]]"
    start: Floats
    end: Floats
    s_mm: Floats

    @property
    def length(self) -> Floats:
        return np.asarray(np.hypot(*(self.end - self.start).T))


def shared_cuts(sheet: SheetLayout, paths: Mapping[str, Part]) -> SharedCuts:
    """Find the stretches that two parts have in common, and leave each out of the contour that is cut later.

    Parameters
    ----------
    paths
        The parts with their contours where the middle of the cut runs (`flatprep.drawing.forms.with_kerf`).
    """
    contours, piece = _contours(sheet, paths)
    gaps: list[list[Span]] = [[] for _ in contours]
    saved, count = 0.0, 0
    for late, span in _common(_edges(contours), np.array(piece)):
        gaps[late].append(span)
        saved += span[1] - span[0]
        count += 1
    lines = (line for contour, some in zip(contours, gaps, strict=True) for line in opened(contour, some))
    return SharedCuts(tuple(lines), count, saved)


def _contours(sheet: SheetLayout, paths: Mapping[str, Part]) -> tuple[list[Contour], list[int]]:
    """Contours in the order of cutting, and the piece that each belongs to."""
    contours, piece = [], []
    for index in cutting_order(sheet, paths):
        placement = sheet.placements[index]
        part = paths[placement.part]
        for contour in (*part.holes, part.outer):
            contours.append(Contour(placement.motion.polyline(contour.xyb)))
            piece.append(index)
    return contours, piece


def _edges(contours: Sequence[Contour]) -> _Edges:
    rows = []
    for n, contour in enumerate(contours):
        seg = segments(contour.xyb, closed=True)
        size = lengths(seg)
        before = np.cumsum(size) - size
        for k in np.flatnonzero(~seg.is_arc & (size >= LEAST_MM)):
            rows.append((n, *seg.start[k], *seg.end[k], before[k]))
    table = np.array(rows).reshape(-1, 6)
    return _Edges(table[:, 0].astype(np.int64), table[:, 1:3], table[:, 3:5], table[:, 5])


def _common(edges: _Edges, piece: "np.ndarray[tuple[int], np.dtype[np.int64]]") -> Iterator[tuple[int, Span]]:
    """Yield common stretches: the later contour, and the stretch along it."""
    if not len(edges.s_mm):
        return
    lines = shapely.linestrings(np.stack([edges.start, edges.end], axis=1))
    near = STRtree(lines).query(lines, predicate="dwithin", distance=SAME_MM).T
    along = (edges.end - edges.start) / edges.length[:, None]
    for late, early in near[near[:, 0] > near[:, 1]].tolist():
        one, other = edges.contour[late], edges.contour[early]
        if piece[one] == piece[other] or abs(float(along[late] @ along[early])) < PARALLEL:
            continue
        ends = np.array([edges.start[early], edges.end[early]]) - edges.start[late]
        ends = ends[np.argsort(ends @ along[late])]
        where, off = ends @ along[late], ends @ np.array([-along[late, 1], along[late, 0]])
        span = max(0.0, float(where[0])), min(float(edges.length[late]), float(where[1]))
        if span[1] - span[0] >= LEAST_MM and float(np.abs(np.interp(span, where, off)).max()) <= SAME_MM:
            yield int(one), (float(edges.s_mm[late]) + span[0], float(edges.s_mm[late]) + span[1])
