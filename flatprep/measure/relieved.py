"""Parts with their inside corners relieved, where that breaks neither a web nor another edge."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from math import dist

import numpy as np
import shapely

from flatprep.geom.bulge import points_along
from flatprep.geom.polygons import polygon, valid_polygon
from flatprep.job.corners import Corners, Point, ReliefKind, WhichCorners
from flatprep.measure.corners import Corner
from flatprep.measure.facing import TooFineError
from flatprep.measure.part import MeasuredPart
from flatprep.measure.relief import SAME_MM, Relief, apply, reliefs
from flatprep.model.drawing import Part

NEAR_MM = 0.5
"""A place this near to a corner names it."""
_CHORD_MM = 0.002
_SLACK_MM = 1e-3


@dataclass(frozen=True, slots=True)
class ReliefAsk:
    """How corners are to be relieved.

    Attributes
    ----------
    kind
    tool_radius_mm
    web_mm
        So much material must be left beside a relief.
    corners
        Which of those that the tool does not reach.
    """

    kind: ReliefKind
    tool_radius_mm: float
    web_mm: float = 0.0
    corners: WhichCorners = Corners.SQUARE


def among(corners: Sequence[Corner], which: WhichCorners) -> tuple[Corner, ...]:
    """Return the corners that matter."""
    if isinstance(which, Corners):
        if which is Corners.NONE:
            return ()
        return tuple(c for c in corners if which is Corners.ALL or c.is_square)
    return tuple(c for c in corners if any(is_named(c, at) for at in which))


def is_named(corner: Corner, at: Point) -> bool:
    """Tell whether a place names a corner: the corner itself, or a fillet's arc."""
    return min(dist(at, place) for place in (corner.at, *corner.ends)) <= NEAR_MM


def relieved(part: MeasuredPart, ask: ReliefAsk, corners: Sequence[Corner] | None = None) -> tuple[Part, list[Relief]]:
    """Open corners of a part for a square mate.

    Parameters
    ----------
    part
    ask
    corners
        Of `part.unreached_corners`; those that `ask` chooses by default.

    Returns
    -------
    part, reliefs
        The opened part (the same where nothing is opened), and what was done, or why not, at each corner.
    """
    if corners is None:
        corners = among(part.unreached_corners(ask.tool_radius_mm), ask.corners)
    found = list(reliefs(part.part, corners, ask.tool_radius_mm, ask.kind))
    found = _clear_of_edges(part.part, found)
    if any(not one.why_not for one in found):
        found = _with_webs(apply(part.part, found), found, ask.web_mm)
    if all(one.why_not for one in found):
        return part.part, found
    return apply(part.part, found), found


def _clear_of_edges(part: Part, found: Sequence[Relief]) -> list[Relief]:
    """Refuse reliefs that would cut into another edge, or into a relief before them."""
    if all(one.why_not for one in found):
        return list(found)
    material = valid_polygon(polygon(part.outer.xyb, [h.xyb for h in part.holes], chord_mm=_CHORD_MM))
    shapely.prepare(material)
    rings = [shapely.LinearRing(points_along(c.xyb, closed=True, chord_mm=_CHORD_MM)) for c in part.contours]
    taken: list[shapely.Geometry] = []
    out = []
    for one in found:
        if one.why_not:
            out.append(one)
            continue
        bite = shapely.Point(one.centre).buffer(one.radius_mm, quad_segs=32).intersection(material)
        others = [ring for k, ring in enumerate(rings) if k != one.corner.contour]
        if any(bite.intersects(edge) for edge in (*others, *_rest(part, one), *taken)):
            out.append(replace(one, why_not="it would cut into another edge"))
        else:
            taken.append(bite)
            out.append(one)
    return out


def _rest(part: Part, one: Relief) -> Iterator[shapely.LineString]:
    """Yield the corner's own contour without the corner and the two walls beside it."""
    xyb = part.contours[one.corner.contour].xyb
    n = len(xyb)
    rows = np.arange(one.first + one.count, one.first + n) % n
    if len(rows) > 1:
        yield shapely.LineString(points_along(xyb[rows], closed=False, chord_mm=_CHORD_MM))


def _with_webs(opened: Part, found: Sequence[Relief], web_mm: float) -> list[Relief]:
    """Refuse reliefs that leave too narrow a web."""
    measured = MeasuredPart(opened)
    try:
        webs = [web for web in measured.webs(web_mm) if web.width_mm < web_mm - _SLACK_MM] if web_mm > 0.0 else []
    except TooFineError:
        why = "the edges around it are too fine to measure what would be left"
        return [one if one.why_not else replace(one, why_not=why) for one in found]
    b = measured.boundary
    sides = [(float(b.centre[row, 0]), float(b.centre[row, 1]), web.width_mm) for web in webs for row in web.rows]
    out = []
    for one in found:
        left = [width for x, y, width in sides if dist((x, y), one.centre) <= SAME_MM]
        why = f"only {min(left):.2f} mm of material would be left beside it, {web_mm:g} mm is needed" if left else ""
        out.append(one if one.why_not or not why else replace(one, why_not=why))
    return out
