"""Chords turned back into the arcs and circles they stand for."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import degrees, pi, sin, sqrt, tan

import numpy as np

from flatprep.geom import bulge
from flatprep.geom.bulge import Floats, segments
from flatprep.model.drawing import Contour, Part
from flatprep.repair.runs import Run, circle_through, runs
from flatprep.repair.values import Place, RoundLimits

_NEARLY_MM = 0.002
"""Arcs this near to one circle are that circle."""
_ON_CIRCLE_MM = 0.02
"""The vertices of a polygon that stands for a circle lie this near to it."""


@dataclass(frozen=True, slots=True)
class Rounded:
    """An arc or circle in the place of chords.

    Attributes
    ----------
    at : tuple of float
        Middle of the circle, mm.
    radius_mm, sweep_deg : float
    chords : int
    deviation_mm : float
        Largest distance between the chords and the arc.
    """

    at: Place
    radius_mm: float
    sweep_deg: float
    chords: int
    deviation_mm: float


def round_part(part: Part, limits: RoundLimits) -> tuple[Part, tuple[Rounded, ...]]:
    """Turn the chords of a part into arcs; its net area stays within `limits.area_share`.

    Notes
    -----
    Programs write chords with their ends on the arc, so the arc through the vertices is the true one. Where that
    would change the net area by more than `area_share`, the arc that encloses the area of its chords is taken.
    """
    through = [round_contour(c, limits, equal_area=False) for c in part.contours]
    change = [abs(new.area_mm2 - old.area_mm2) for (new, _), old in zip(through, part.contours, strict=True)]
    budget = limits.area_share * part.area_mm2
    done = dict(enumerate(through))
    for k in sorted(done, key=lambda k: change[k]):  # the smallest first: many keep their true radius
        budget -= change[k]
        if budget < 0.0:
            done[k] = round_contour(part.contours[k], limits, equal_area=True)
    outer, *holes = (contour for contour, _ in done.values())
    return replace(part, outer=outer, holes=tuple(holes)), tuple(r for _, told in done.values() for r in told)


def round_contour(contour: Contour, limits: RoundLimits, *, equal_area: bool) -> tuple[Contour, tuple[Rounded, ...]]:
    """Turn the chords of a closed contour into arcs, or the whole into a circle."""
    whole = _whole_circle(contour.xyb, limits, equal_area=equal_area)
    if whole is not None:
        xyb, told = whole
        return replace(contour, xyb=xyb, handles=contour.distinct_handles[:1] * len(xyb)), told
    found = list(runs(contour.xyb, limits))
    if not found:
        return contour, ()
    return _with_arcs(contour, found, equal_area=equal_area)


def _whole_circle(xyb: Floats, limits: RoundLimits, *, equal_area: bool) -> tuple[Floats, tuple[Rounded, ...]] | None:
    """Return the circle that a closed polyline stands for; nothing is told where arcs drew it already."""
    if len(xyb) == 2 and abs(abs(xyb[0, 2]) - 1.0) < 1e-9 and xyb[0, 2] == xyb[1, 2]:
        return None
    drawn = bulge.as_circle(xyb, tol_mm=_NEARLY_MM)
    if drawn is not None:
        return _like(xyb, *drawn), ()
    if len(xyb) < limits.least_sides or xyb[:, 2].any():
        return None
    found = circle_through(xyb[:, :2])
    area = abs(bulge.signed_area(xyb))
    if found is None or area < 0.9 * pi * found.radius**2 or area > pi * found.radius**2 * 1.01:
        return None
    side = np.roll(xyb[:, :2], -1, axis=0) - xyb[:, :2]
    reach = np.hypot(*(xyb[:, :2] - (found.x, found.y)).T)
    middles = np.hypot(*(xyb[:, :2] + side / 2.0 - (found.x, found.y)).T)
    radius = sqrt(area / pi) if equal_area else found.radius
    off = float(max(np.abs(reach - radius).max(), np.abs(middles - radius).max()))
    regular = float(np.ptp(np.hypot(*side.T))) <= 2.0 * _ON_CIRCLE_MM
    if np.abs(reach - found.radius).max() > _ON_CIRCLE_MM or off > (
        limits.polygon_mm if regular else limits.deviation_mm
    ):
        return None
    told = Rounded((found.x, found.y), radius, 360.0, len(xyb), off)
    return _like(xyb, found.x, found.y, radius), (told,)


def _like(xyb: Floats, x: float, y: float, radius: float) -> Floats:
    """Return the circle, run the same way as the polyline."""
    full = bulge.circle(x, y, radius)
    return full if bulge.signed_area(xyb) > 0.0 else bulge.reverse(full, closed=True)


def _with_arcs(contour: Contour, found: Sequence[Run], *, equal_area: bool) -> tuple[Contour, tuple[Rounded, ...]]:
    xyb, n = contour.xyb, len(contour.xyb)
    gone = np.zeros(n, dtype=np.bool_)
    out = xyb.copy()
    told = []
    for run in found:
        pieces = [(run.first, run.last)]
        if abs(run.sweep_rad) > 0.9 * pi:
            middle = (run.first + run.last) // 2
            pieces = [(run.first, middle), (middle, run.last)]
        off = 0.0
        for first, last in pieces:
            points = xyb[np.arange(first, last + 1) % n, :2]
            value = _equal_area_bulge(points) if equal_area else _bulge_about(points, run)
            out[first % n, 2] = value
            gone[np.arange(first + 1, last) % n] = True
            off = max(off, _deviation(points, value))
        c = run.circle
        told.append(Rounded((c.x, c.y), c.radius, degrees(abs(run.sweep_rad)), run.last - run.first, off))
    handles = tuple(np.array(contour.handles, dtype=object)[~gone]) if len(contour.handles) == n else contour.handles
    return replace(contour, xyb=out[~gone], handles=handles), tuple(told)


def _bulge_about(points: Floats, run: Run) -> float:
    """Bulge of the arc about the run's centre from the first to the last point."""
    ray = points - (run.circle.x, run.circle.y)
    turn = np.unwrap(np.arctan2(ray[:, 1], ray[:, 0]))
    return tan(float(turn[-1] - turn[0]) / 4.0)


def _equal_area_bulge(points: Floats) -> float:
    """Bulge of the arc from the first to the last point that encloses, with its chord, as much as the points do.

    Notes
    -----
    With chord c and sweep θ the segment's area is c² (θ - sin θ) / (8 sin² (θ / 2)), rising from 0 with θ: halved
    in between until nothing is left to halve.
    """
    x, y = (points - points[0]).T
    area = float(np.sum(x[:-1] * y[1:] - x[1:] * y[:-1])) / 2.0
    chord = float(np.hypot(x[-1], y[-1]))
    ratio = 8.0 * abs(area) / (chord * chord)
    low, high = 1e-9, 2.0 * pi - 1e-9
    for _ in range(100):
        theta = (low + high) / 2.0
        larger = (theta - sin(theta)) / sin(theta / 2.0) ** 2 > ratio
        low, high = (low, theta) if larger else (theta, high)
    # chords that turn left run anticlockwise, so that with the chord back they enclose a positive area
    return tan(theta / 4.0) * (1.0 if area > 0.0 else -1.0)


def _deviation(points: Floats, value: float) -> float:
    """Largest distance of the points, and of the middles between them, from the arc through the first and last."""
    seg = segments(np.array([[*points[0], value], [*points[-1], 0.0]]), closed=False)
    probe = np.vstack([points, (points[1:] + points[:-1]) / 2.0])
    return float(np.abs(np.hypot(*(probe - seg.centre[0]).T) - seg.radius[0]).max())
