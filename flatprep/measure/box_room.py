"""Where a box of given proportions goes into a region, as large as it may."""

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt
import shapely
from shapely import affinity
from shapely.geometry import MultiPolygon, Polygon

from flatprep.geom.bulge import Floats

ACROSS = 33
"""Places tried along each side of the region's box; odd, so that its middle is among them."""
NEARLY = 0.9
"""Places this near to the farthest from the edge are as good: of them the one nearest to the middle is taken."""
HALVINGS = 6
"""Steps by which the height is narrowed down: within 2 % of the range."""

Shapes = npt.NDArray[np.object_]


@dataclass(frozen=True, slots=True)
class BoxRoom:
    """A box in a region: its middle (mm), the turn of its long side (degrees), its height (mm)."""

    middle: tuple[float, float]
    turn_deg: float
    height_mm: float


def box_room(
    region: Polygon | MultiPolygon,
    width_over_height: float,
    heights_mm: tuple[float, float],
    turns_deg: Iterable[float],
) -> BoxRoom | None:
    """Return the highest box found in a region, or None where not even the lowest has room.

    Parameters
    ----------
    region
        Where the box may lie.
    width_over_height
        Proportion of the box.
    heights_mm
        Least and largest height.
    turns_deg
        Turns of the box that are tried; of equal ones the first is taken, there where it is farthest from the edge.

    Notes
    -----
    On a raster of places over the region's box: a box that fits at a place fits there at every lesser height, so the
    places are sifted as the height is narrowed down.
    """
    best = None
    for turn in turns_deg:
        found = _upright(affinity.rotate(region, -turn, origin=(0.0, 0.0)), width_over_height, heights_mm)
        if found is not None and (best is None or found.height_mm > best.height_mm):
            x, y = affinity.rotate(shapely.Point(found.middle), turn, origin=(0.0, 0.0)).coords[0]
            best = BoxRoom((float(x), float(y)), turn, found.height_mm)
        if best is not None and best.height_mm >= heights_mm[1]:
            break
    return best


def _upright(region: Polygon | MultiPolygon, ratio: float, heights_mm: tuple[float, float]) -> BoxRoom | None:
    if region.is_empty:
        return None
    shapely.prepare(region)
    least, most = heights_mm
    places = _fitting(region, _raster(region), ratio, least)
    if not len(places):
        return None
    top = _fitting(region, places, ratio, most)
    low, high = (most, most) if len(top) else (least, most)
    places = top if len(top) else places
    for _ in range(HALVINGS if low < high else 0):
        middle = (low + high) / 2.0
        left = _fitting(region, places, ratio, middle)
        low, high = (middle, high) if len(left) else (low, middle)
        places = left if len(left) else places
    x, y = _clearest(region, places, _boxes(places, ratio, low))
    return BoxRoom((float(x), float(y)), 0.0, low)


def _clearest(region: Polygon | MultiPolygon, places: Floats, boxes: Shapes) -> Floats:
    spare = shapely.distance(region.boundary, boxes)
    good = places[spare >= NEARLY * spare.max()]
    middle = np.asarray(region.centroid.coords)[0]
    return np.asarray(good[int(np.argmin(np.hypot(*(good - middle).T)))], dtype=np.float64)


def _raster(region: Polygon | MultiPolygon) -> Floats:
    """Places in the region, and the middle of its largest inscribed circle."""
    x0, y0, x1, y1 = region.bounds
    share = (np.arange(ACROSS) + 0.5) / ACROSS
    x, y = np.meshgrid(x0 + share * (x1 - x0), y0 + share * (y1 - y0))
    inside = shapely.contains_xy(region, x, y)
    circle = shapely.maximum_inscribed_circle(region, tolerance=0.01 * max(x1 - x0, y1 - y0))
    return np.vstack([np.asarray(circle.coords)[:1], np.column_stack([x[inside], y[inside]])])


def _fitting(region: Polygon | MultiPolygon, places: Floats, ratio: float, height: float) -> Floats:
    return np.asarray(places[shapely.covers(region, _boxes(places, ratio, height))], dtype=np.float64)


def _boxes(places: Floats, ratio: float, height: float) -> Shapes:
    half = np.array([ratio * height / 2.0, height / 2.0])
    return np.asarray(shapely.box(*(places - half).T, *(places + half).T))
