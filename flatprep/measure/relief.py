"""Relief of inside corners, so that a square mate seats though the tool is round."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from enum import StrEnum
from math import cos, dist, hypot, pi, tan

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.model.drawing import Contour, Part

ROOM = 1.03
"""The relief's circle is so much larger than the tool that its path is no single point (common practice)."""
NEAR_MM = 0.05
"""A place this near to a corner names it."""
LEAST_TURN_RAD = pi / 6
"""Flatter corners need no relief: a round tool leaves 0.035 of its radius in them."""

Point = tuple[float, float]


class ReliefKind(StrEnum):
    """Ways of opening a corner."""

    DOGBONE = "dogbone"
    T_BONE = "t-bone"


@dataclass(frozen=True, slots=True)
class Relief:
    """A corner that was opened, or why it was left.

    Attributes
    ----------
    at : tuple of float
        The corner, mm.
    radius_mm : float
        Of the relief's circle.
    why_not : str
        Empty where it was opened.
    """

    at: Point
    radius_mm: float
    why_not: str = ""


def relieve(
    part: Part, tool_radius_mm: float, *, kind: ReliefKind = ReliefKind.DOGBONE, at: Sequence[Point] | None = None
) -> tuple[Part, tuple[Relief, ...]]:
    """Open the sharp inside corners of a part.

    Parameters
    ----------
    part
    tool_radius_mm
    kind
        A circle through the corner on its bisector (dogbone), or on the second wall beside the corner (T-bone),
        which opens one wall only.
    at
        Corners to open, mm; all of them by default.

    Returns
    -------
    part, reliefs
        The opened part, and what was done at each corner.

    Notes
    -----
    A circle of radius r through a corner of angle θ, centred on its bisector, meets both walls 2 r cos(θ / 2) from
    the corner; the arc through the corner between them sweeps 2 π - 2 θ.
    """
    told: list[Relief] = []
    contours = [_relieved(c, ROOM * tool_radius_mm, kind, at, told) for c in part.contours]
    return replace(part, outer=contours[0], holes=tuple(contours[1:])), tuple(told)


def _relieved(contour: Contour, r: float, kind: ReliefKind, at: Sequence[Point] | None, told: list[Relief]) -> Contour:
    xyb = contour.xyb
    names = contour.handles if len(contour.handles) == len(xyb) else ("",) * len(xyb)
    rows: list[tuple[float, float, float]] = []
    handles: list[str] = []
    for k in range(len(xyb)):
        before, here, after = (xyb[(k + step) % len(xyb)] for step in (-1, 0, 1))
        turn = _turn(before, here, after)
        asked = at is None or any(dist(place, (here[0], here[1])) <= NEAR_MM for place in at)
        opened: list[tuple[float, float, float]] = []
        if turn <= -LEAST_TURN_RAD and before[2] == 0.0 and asked:
            opened, why = _open(before, here, after, r, kind)
            told.append(Relief((float(here[0]), float(here[1])), r, why))
        rows += opened or [(float(here[0]), float(here[1]), float(here[2]))]
        handles += [names[k]] * (len(opened) or 1)
    return contour if len(rows) == len(xyb) else Contour(np.array(rows), tuple(handles), contour.layers)


def _turn(before: Floats, here: Floats, after: Floats) -> float:
    """Turn between two straight edges, rad; 0 where the second is an arc."""
    if here[2] != 0.0:
        return 0.0
    a, b = here[:2] - before[:2], after[:2] - here[:2]
    return float(np.arctan2(a[0] * b[1] - a[1] * b[0], a @ b))


def _open(
    before: Floats, here: Floats, after: Floats, r: float, kind: ReliefKind
) -> tuple[list[tuple[float, float, float]], str]:
    """Rows in place of the corner, or why there are none."""
    turn = abs(_turn(before, here, after))
    into, out = here[:2] - before[:2], after[:2] - here[:2]
    one, two = hypot(*into.tolist()), hypot(*out.tolist())
    if kind is ReliefKind.T_BONE:
        if two < 2.0 * r:
            return [], "the wall beside it is shorter than the tool"
        end = here[:2] + out / two * 2.0 * r
        return [(float(here[0]), float(here[1]), -1.0), (float(end[0]), float(end[1]), 0.0)], ""
    angle = pi - turn
    reach = 2.0 * r * cos(angle / 2.0)
    # the wall between two corners carries half of each relief at the most
    if min(one, two) < 2.0 * reach:
        return [], "the walls beside it are shorter than the relief"
    start, end = here[:2] - into / one * reach, here[:2] + out / two * reach
    # more than a half circle is drawn as two arcs that meet in the corner
    half = -tan((pi - angle) / 4.0)
    return [
        (float(start[0]), float(start[1]), half),
        (float(here[0]), float(here[1]), half),
        (float(end[0]), float(end[1]), 0.0),
    ], ""
