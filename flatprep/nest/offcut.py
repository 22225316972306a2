"""What is left of a sheet: the largest usable rectangle, and the border of the remnant for next time."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from math import cos, pi

import numpy as np
import numpy.typing as npt
import shapely
from shapely.geometry import MultiPolygon, Point, Polygon
from shapely.geometry.base import BaseGeometry

from flatprep.geom.bulge import Floats
from flatprep.geom.outward import outside_points
from flatprep.model.drawing import Part
from flatprep.model.layout import SheetLayout

LEAST_MM = 50.0
"""Shorter side of a rectangle that is still worth keeping (common practice)."""
NECK_MM = 20.0
"""Narrower tongues of a remnant are not counted: they bend and tip."""
CHORD_MM = 0.05
LIGHT_MM = 0.5
QUARTER = 16
ROUND = 1.002 / cos(1.5 * pi / (4 * QUARTER))
"""What the distance is multiplied by so that chords of round corners keep it, too.

GEOS gives a corner that turns by less than one and a half steps a single chord, and takes ends of offset edges nearer
than a thousandth of the offset for one.
"""
CELLS = 100
"""Cells along the longer side of a sheet, when a first rectangle is looked for."""


@dataclass(frozen=True, slots=True, eq=False)
class Offcut:
    """The usable rest of a sheet, sheet coordinates, mm.

    Attributes
    ----------
    rectangle : (x0, y0, x1, y1)
        The largest one found, upright; nothing cut reaches into it.
    outline : ndarray, shape (n, 2)
        Border of the piece of the rest that holds the rectangle, tongues narrower than `NECK_MM` left out.
    holes : tuple of ndarray, shape (m, 2)
        Where parts were cut out of it.
    """

    rectangle: tuple[float, float, float, float]
    outline: Floats
    holes: tuple[Floats, ...]

    @property
    def area_mm2(self) -> float:
        """Area of the remnant."""
        return float(Polygon(self.outline, self.holes).area)


def offcut_of(
    sheet: SheetLayout, parts: Mapping[str, Part], spacing_mm: float, keep_out: Sequence[Sequence[float]] = ()
) -> Offcut | None:
    """Return the usable rest of a sheet, or None where no rectangle of `LEAST_MM` is left.

    Parameters
    ----------
    sheet
        Of fixed length: of open length only what is used was cut off.
    parts
        True shapes by the names that the placements use.
    spacing_mm
        The rest keeps this much away from the parts: the cut lies between.
    keep_out
        The sheet's clamps and screws: boxes (x0, y0, x1, y1) leave no trace, circles (x, y, radius) a hole.

    Notes
    -----
    What lies in a part's window is scrap, not part of the rest. The rectangle is the largest one on a raster of the
    sheet (maximal rectangle under a histogram, row by row), then widened side by side until it touches.
    """
    rest = _rest(sheet, parts, spacing_mm).difference(_screw_holes(keep_out))
    box = _largest_rectangle(rest)
    if box is None or min(box[2] - box[0], box[3] - box[1]) < LEAST_MM:
        return None
    opened = rest.buffer(-NECK_MM / 2.0).buffer(NECK_MM / 2.0 - LIGHT_MM).simplify(LIGHT_MM)
    around = opened.union(shapely.box(*box)).intersection(rest)
    middle = shapely.box(*box).centroid
    pieces = [p for p in getattr(around, "geoms", [around]) if isinstance(p, Polygon) and p.contains(middle)]
    piece = pieces[0] if pieces else shapely.box(*box)
    return Offcut(box, _ring(piece.exterior), tuple(_ring(h) for h in piece.interiors if Polygon(h).area > 1.0))


def _ring(line: BaseGeometry) -> Floats:
    return np.asarray(line.coords)[:-1].copy()


def _rest(sheet: SheetLayout, parts: Mapping[str, Part], spacing_mm: float) -> Polygon | MultiPolygon:
    """Sheet without its parts (windows counted to the part) and the cut around them."""
    taken = []
    for p in sheet.placements:
        ring = p.motion.points(outside_points(parts[p.part].outer.xyb, CHORD_MM))
        taken.append(Polygon(ring).buffer(spacing_mm * ROUND, quad_segs=QUARTER))
    return Polygon(sheet.outline, list(sheet.holes)).difference(shapely.union_all(taken))


def _screw_holes(keep_out: Sequence[Sequence[float]]) -> BaseGeometry:
    screws = [one for one in keep_out if len(one) == 3]
    return shapely.union_all([Point(x, y).buffer(radius * ROUND, quad_segs=QUARTER) for x, y, radius in screws])


def _largest_rectangle(region: Polygon | MultiPolygon) -> tuple[float, float, float, float] | None:
    """Largest upright rectangle in a region, to the raster; then as wide as it goes."""
    if region.is_empty:
        return None
    x0, y0, x1, y1 = region.bounds
    step = max(x1 - x0, y1 - y0) / CELLS
    xs, ys = np.arange(x0, x1 - step / 2, step), np.arange(y0, y1 - step / 2, step)
    if not len(xs) or not len(ys):
        return None
    shapely.prepare(region)
    grid_x, grid_y = np.meshgrid(xs, ys)
    free = shapely.contains_xy(region, grid_x + step / 2, grid_y + step / 2)  # boxes are made of few cells then
    low_x, low_y = grid_x[free], grid_y[free]
    free[free] = shapely.covers(region, shapely.box(low_x, low_y, low_x + step, low_y + step))
    found = _largest_of_raster(free)
    if found is None:
        return None
    r0, c0, r1, c1 = found
    return _widened(region, (float(xs[c0]), float(ys[r0]), float(xs[c1]) + step, float(ys[r1]) + step), step)


def _largest_of_raster(free: npt.NDArray[np.bool_]) -> tuple[int, int, int, int] | None:
    """First row and column, last row and column of the largest all-true rectangle."""
    best, found = 0, None
    heights = np.zeros(free.shape[1], dtype=np.int64)
    more = np.vstack([free[1:], np.zeros_like(free[:1])])
    goes_on: list[bool] = np.all(more | ~free, axis=1).tolist()  # with it each of its rectangles
    for row in range(free.shape[0]):
        heights = np.where(free[row], heights + 1, 0)
        if goes_on[row]:
            continue
        runs = np.flatnonzero(np.diff(heights, prepend=-1))
        stack = list[tuple[int, int]]()
        for column, now in zip([*runs.tolist(), len(heights)], [*heights[runs].tolist(), 0], strict=True):
            first = column
            while stack and stack[-1][1] >= now:
                first, tall = stack.pop()
                if tall * (column - first) > best:
                    best, found = tall * (column - first), (row - tall + 1, first, row, column - 1)
            stack.append((first, now))
    return found


def _widened(
    region: BaseGeometry, box: tuple[float, float, float, float], step: float
) -> tuple[float, float, float, float]:
    """Box whose sides are moved out, one after the other, as far as the region lets them, a cell at the most."""
    sides = list(box)
    for side, way in ((2, 1.0), (3, 1.0), (0, -1.0), (1, -1.0)):
        low, part = 0.0, step
        for _ in range(4):
            part /= 16
            tried = np.tile(sides, (15, 1))
            tried[:, side] += way * (low + part * np.arange(1, 16))
            low += part * float(np.logical_and.accumulate(shapely.covers(region, shapely.box(*tried.T))).sum())
        sides[side] += way * low
    return sides[0], sides[1], sides[2], sides[3]
