"""Relief of inside corners, so that a square mate seats though the tool is round: the shapes of it."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import cos, hypot, pi, tan

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.job.corners import Point, ReliefKind
from flatprep.measure.corners import Corner
from flatprep.model.drawing import Contour, Part

ROOM = 1.03
"""The relief's circle is so much larger than the tool that its path is no single point (common practice)."""
MOST_TURN_RAD = 0.8 * pi
"""Sharper corners are slits, and arcs that turn further are round ends: no circle opens them."""
SAME_MM = 1e-6
"""Vertices of a contour and of its boundary this near are one."""

Row = tuple[float, float, float]


@dataclass(frozen=True, slots=True)
class Relief:
    """A corner that is to be opened, and with what; or why it cannot be.

    Attributes
    ----------
    corner : Corner
    kind : ReliefKind
        A dogbone becomes a T-bone where the wall is too short for it.
    radius_mm : float
        Of the relief's circle.
    centre : tuple of float
        Of that circle, mm.
    first, count : int
        Vertices of the drawn contour that the rows replace.
    rows : tuple of (x, y, bulge)
    why_not : str
        Empty where it can be opened.
    """

    corner: Corner
    kind: ReliefKind
    radius_mm: float
    centre: Point = (0.0, 0.0)
    first: int = 0
    count: int = 0
    rows: tuple[Row, ...] = ()
    why_not: str = ""


@dataclass(frozen=True, slots=True)
class _Walls:
    """A corner and the straight walls that run into it and out of it, up to the next vertex each.

    `into` and `out` are unit vectors along the contour; `room` is what a relief may take of each wall, `length` what
    there is, mm.
    """

    apex: Floats
    into: Floats
    out: Floats
    room: tuple[float, float]
    length: tuple[float, float]
    turn_rad: float


def reliefs(part: Part, corners: Sequence[Corner], tool_radius_mm: float, kind: ReliefKind) -> tuple[Relief, ...]:
    """Work out the relief of each corner.

    Notes
    -----
    Dogbone: a circle of radius r through a corner of angle θ, centred on its bisector, meets both walls
    2 r cos(θ / 2) from the corner; the arc through the corner between them sweeps 2 π - 2 θ. T-bone: a circle
    through a square corner, centred on one of its walls, is a half circle in that wall. The relief of a fillet goes
    through the corner that its walls would meet in.
    """
    placed = [_place(part.contours[corner.contour], corner) for corner in corners]
    taken = [{first for c, (first, _) in zip(corners, placed, strict=True) if c.contour == k} for k in _contours(part)]
    ends = [{last for c, (_, last) in zip(corners, placed, strict=True) if c.contour == k} for k in _contours(part)]
    out = []
    for corner, (first, last) in zip(corners, placed, strict=True):
        found = Relief(corner, kind, ROOM * tool_radius_mm, first=first, count=0)
        xyb = part.contours[corner.contour].xyb
        walls = _walls(xyb, first, last, (ends[corner.contour], taken[corner.contour]))
        out.append(replace(found, why_not=walls) if isinstance(walls, str) else _opened(found, walls, last, len(xyb)))
    return tuple(out)


def apply(part: Part, chosen: Sequence[Relief]) -> Part:
    """Return the part with its corners opened; reliefs that cannot be cut are passed over."""
    every = [
        _with_reliefs(contour, [r for r in chosen if r.corner.contour == k and not r.why_not])
        for k, contour in enumerate(part.contours)
    ]
    return replace(part, outer=every[0], holes=tuple(every[1:]))


def _contours(part: Part) -> range:
    return range(len(part.contours))


def _place(contour: Contour, corner: Corner) -> tuple[int, int]:
    """First and last vertex of a corner: the same for a sharp one, both ends of a fillet's arcs; -1 if not found."""
    xy = contour.xyb[:, :2]
    away = [np.hypot(*(xy - end).T) for end in corner.ends]
    first, last = (int(np.argmin(far)) for far in away)
    found = max(float(far.min()) for far in away) <= SAME_MM
    return (first, last) if found else (-1, -1)


def _walls(xyb: Floats, first: int, last: int, corners: tuple[set[int], set[int]]) -> _Walls | str:
    """Walls of a corner, or why it has none; `corners` are the last and the first vertices of all of them."""
    n = len(xyb)
    if first < 0:
        return "it is drawn with too many vertices"
    before, after = (first - 1) % n, (last + 1) % n
    if xyb[before, 2] != 0.0 or xyb[last, 2] != 0.0:
        return "one of its sides is an arc"
    into, out = xyb[first, :2] - xyb[before, :2], xyb[after, :2] - xyb[last, :2]
    one, two = hypot(*into.tolist()), hypot(*out.tolist())
    if min(one, two) < SAME_MM:
        return "it is drawn with too many vertices"
    into, out = into / one, out / two
    turn = float(np.arctan2(into[0] * out[1] - into[1] * out[0], into @ out))
    if not -MOST_TURN_RAD <= turn < 0.0:
        return "it is a slit or a round end"
    # from the fillet's start to the corner that the walls would meet in, along each wall
    gap = xyb[last, :2] - xyb[first, :2]
    ahead = float(gap[0] * out[1] - gap[1] * out[0]) / float(into[0] * out[1] - into[1] * out[0])
    apex = xyb[first, :2] + ahead * into
    back = float((xyb[last, :2] - apex) @ out)
    lasts, firsts = corners
    whole = one + ahead, two + back
    # the wall between two corners carries half of each relief at the most
    room = whole[0] * (0.5 if before in lasts else 1.0), whole[1] * (0.5 if after in firsts else 1.0)
    return _Walls(apex, into, out, room, whole, abs(turn))


def _opened(found: Relief, w: _Walls, last: int, n: int) -> Relief:
    r = found.radius_mm
    found = replace(found, count=(last - found.first) % n + 1)
    reach = 2.0 * r * cos((pi - w.turn_rad) / 2.0)
    if found.kind is ReliefKind.DOGBONE and min(w.room) >= reach:
        return _dogbone(found, w, reach)
    if not found.corner.is_square:
        why = "the walls beside it are shorter than the relief"
        return replace(found, why_not=why if found.kind is ReliefKind.DOGBONE else "a T-bone needs a square corner")
    t_bone = replace(found, kind=ReliefKind.T_BONE)
    if max(w.room) >= 2.0 * r:
        return _t_bone(t_bone, w, on_out=w.room[1] >= w.room[0])
    # every corner of a small pocket takes the wall that leaves it
    if w.length[1] >= 2.0 * r:
        return _t_bone(t_bone, w, on_out=True)
    return replace(found, why_not="the walls beside it are shorter than the relief")


def _dogbone(found: Relief, w: _Walls, reach: float) -> Relief:
    start, end = w.apex - w.into * reach, w.apex + w.out * reach
    # more than a half circle is drawn as two arcs that meet in the corner
    half = -tan(w.turn_rad / 4.0)
    inward = w.out - w.into
    centre = w.apex + found.radius_mm * inward / hypot(*inward.tolist())
    rows = (_row(start, half), _row(w.apex, half), _row(end, 0.0))
    return replace(found, rows=rows, centre=_point(centre))


def _t_bone(found: Relief, w: _Walls, *, on_out: bool) -> Relief:
    far = w.apex + 2.0 * found.radius_mm * (w.out if on_out else -w.into)
    ends = (w.apex, far) if on_out else (far, w.apex)
    return replace(found, rows=(_row(ends[0], -1.0), _row(ends[1], 0.0)), centre=_point((w.apex + far) / 2.0))


def _row(at: Floats, bulge: float) -> Row:
    return float(at[0]), float(at[1]), bulge


def _point(at: Floats) -> Point:
    return float(at[0]), float(at[1])


def _with_reliefs(contour: Contour, chosen: Sequence[Relief]) -> Contour:
    if not chosen:
        return contour
    by_first = {relief.first: relief for relief in chosen}
    n = len(contour.xyb)
    gone = {(r.first + k) % n for r in chosen for k in range(r.count)}
    names = contour.handles if len(contour.handles) == n else ("",) * n
    rows: list[Row] = []
    handles: list[str] = []
    for k in range(n):
        if k in by_first:
            new = by_first[k]
            rows += new.rows
            # the arcs count as drawn by the edge before them
            handles += [names[k - 1]] * (len(new.rows) - 1) + [names[(k + new.count - 1) % n]]
        elif k not in gone:
            rows.append(_row(contour.xyb[k], float(contour.xyb[k, 2])))
            handles.append(names[k])
    return Contour(np.array(rows), tuple(handles) if contour.handles else (), contour.layers)
