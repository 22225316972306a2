"""Where the name of a piece is written: on its own material, level, as large as fits."""

from dataclasses import dataclass
from functools import lru_cache
from typing import NamedTuple

import numpy as np
import shapely
from shapely.geometry import LineString, Polygon

from flatprep.geom.bulge import Floats, Similarity
from flatprep.geom.polygons import ring, valid_polygon
from flatprep.model.drawing import Part

WIDE = 0.62
"""Width of a letter over its height."""
_HEIGHTS = (0.5, 0.38, 0.62, 0.25, 0.75, 0.13, 0.87)
"""Where a line of text is tried, as shares of the piece's height; the middle first."""
_ROOM = 0.6
"""What a run of material keeps free beside the text, in letter heights."""


@dataclass(frozen=True, slots=True)
class Spot:
    """Middle of a line of text and its letters' height, mm."""

    x: float
    y: float
    size: float


class Lying(NamedTuple):
    """How a piece lies, but for where: pieces that lie alike are labelled alike.

    `upright` looks at it with x and y changed over, for text that is then turned back.
    """

    part: Part
    turn_deg: float
    mirrored: bool
    upright: bool = False

    @property
    def region(self) -> Polygon:
        """Material of the piece, the origin of its drawing at (0, 0), mm."""
        motion = Similarity(turn_deg=self.turn_deg, mirrored=self.mirrored)
        outer, *inner = (motion.points(points) for points in _rings_of(self.part))
        return Polygon(outer[:, ::-1], [h[:, ::-1] for h in inner]) if self.upright else Polygon(outer, inner)


@lru_cache(maxsize=1024)
def _rings_of(part: Part) -> tuple[Floats, ...]:
    return tuple(ring(contour.xyb, 0.5) for contour in part.contours)


@lru_cache(maxsize=4096)
def spot_on_piece(lying: Lying, letters: int, most: float) -> Spot | None:
    """`spot_on_material` of a piece, about the origin of its drawing; found once for all that lie alike."""
    return spot_on_material(lying.region, letters, most)


def spot_on_material(region: Polygon, letters: int, most: float) -> Spot | None:
    """Return the spot for the largest line of so many letters that no edge crosses; None where none was found.

    Parameters
    ----------
    region
        The piece as it lies, holes and all.
    letters
        How many stand in the line.
    most
        Largest height of a letter, mm.
    """
    shape = valid_polygon(region)
    x0, y0, x1, y1 = shape.bounds
    levels = [y0 + share * (y1 - y0) for share in _HEIGHTS]
    across = shapely.linestrings([[(x0 - 1.0, y), (x1 + 1.0, y)] for y in levels])
    runs = shapely.bounds(shapely.get_parts(shapely.intersection(shape, across)))
    left, y, right, _ = runs[runs[:, 2] > runs[:, 0]].T
    size = np.minimum(most, (right - left) / (WIDE * letters + _ROOM))
    x, half = (left + right) / 2.0, WIDE * letters * size / 2.0
    shapely.prepare(shape)
    free = shapely.covers(shape, shapely.box(x - half, y - size / 2.0, x + half, y + size / 2.0))
    if not free.any():
        return None
    best = int(np.argmax(np.where(free, size, 0.0)))
    return Spot(float(x[best]), float(y[best]), float(size[best]))


def _letter(across: float, letters: int, most: float) -> float:
    return min(most, across / (WIDE * letters + _ROOM))


def spot_anywhere(region: Polygon, letters: int, most: float) -> Spot:
    """Return the middle of a wide level run of material half way up a piece, whatever edges the text crosses there."""
    shape = valid_polygon(region)
    middle = shape.representative_point()  # which is the middle of the widest run at that height
    x0, _, x1, _ = shape.bounds
    run = shape.intersection(LineString([(x0 - 1, middle.y), (x1 + 1, middle.y)]))
    runs = [piece for piece in getattr(run, "geoms", [run]) if piece.distance(middle) < 1e-6]
    across = max((piece.length for piece in runs), default=0.0)
    return Spot(float(middle.x), float(middle.y), _letter(float(across), letters, most))
