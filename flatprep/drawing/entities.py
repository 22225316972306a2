"""DXF entities as bulge polylines in world coordinates, still in drawing units."""

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass
from math import cos, hypot, isfinite, pi, radians, sin, tan
from typing import Any

import numpy as np
from ezdxf.math import BSpline, Vec3, fit_points_to_cad_cv

from flatprep.geom.bulge import Floats, split_arcs
from flatprep.geom.fit import fit_all
from flatprep.geom.smooth import Smooth, ellipse, nurbs

# ezdxf types its DXF attributes only loosely
Dxf = Any
FAR = 1e12
"""Control points and axes beyond it, or no numbers, are not even looked at: their squares lose all digits."""
FULL_RAD = 1e-5
"""An arc that misses a full turn by less is a circle: programs write angles with five decimals."""
PAST_FULL_RAD = 1e-4
"""One that runs past a full turn by less is no short arc but a circle: 2 pi is 6.2832 in four decimals."""


class UnusableEntityError(Exception):
    """An entity whose numbers make no curve; the message says why."""


@dataclass(frozen=True, slots=True, eq=False)
class Shape:
    """A curve in drawing units, and the heights it spans."""

    xyb: Floats
    closed: bool
    z_low: float
    z_high: float


@dataclass(frozen=True, slots=True, eq=False)
class SplineData:
    """Control points (n, 3), knots, weights (none: all alike) and degree of a spline."""

    control: Floats
    knots: Sequence[float]
    weights: Sequence[float]
    degree: int


@dataclass(frozen=True, slots=True, eq=False)
class _Smooth:
    """A curve that arcs are to be fitted to, and the heights it spans; `closed` is None where its ends tell."""

    curve: Smooth
    z_low: float
    z_high: float
    closed: bool | None


def shapes_of(entities: Iterable[Dxf], tol: float) -> list[Shape | UnusableEntityError | None]:
    """Return the curve of each entity, None for one that is no curve, the error for one whose numbers make none.

    Parameters
    ----------
    entities
        LINE, ARC, CIRCLE, ELLIPSE, SPLINE, LWPOLYLINE and POLYLINE, or a `Shape` or `SplineData` that was read before.
    tol
        Largest distance of the arcs that stand for a spline or ellipse, drawing units.

    Notes
    -----
    Coordinates that are no numbers are left to the caller, who checks them for all curves at once.
    """
    made = [_made(entity) for entity in entities]
    smooth = [one.curve for one in made if isinstance(one, _Smooth)]
    rows = iter(fit_all(smooth, tol))
    return [
        _drawn(next(rows), one.z_low, one.z_high, closed=one.closed) if isinstance(one, _Smooth) else one
        for one in made
    ]


def _made(entity: Dxf) -> Shape | _Smooth | UnusableEntityError | None:
    made = entity if isinstance(entity, Shape) else _read(entity)
    if isinstance(made, Shape | _Smooth) and not (isfinite(made.z_low) and isfinite(made.z_high)):
        return UnusableEntityError("a height is not a finite number")
    return made


def _read(entity: Dxf) -> Shape | _Smooth | UnusableEntityError | None:
    make = _of_spline if isinstance(entity, SplineData) else _MAKERS.get(entity.dxftype())
    if make is None:
        return None
    try:
        return make(entity)
    except UnusableEntityError as err:
        return err
    except (ValueError, ZeroDivisionError, OverflowError, IndexError, TypeError, AttributeError) as err:
        return UnusableEntityError(str(err) or type(err).__name__)


def _drawn(xyb: Floats, z_low: float, z_high: float, *, closed: bool | None) -> Shape | UnusableEntityError:
    """Curve of rows from its start to its end, without the last one where it closes."""
    if len(xyb) < 2:
        return UnusableEntityError("the spline is a single point")
    if closed is None:
        size = max(1.0, float(np.abs(xyb[:, :2]).max()))
        closed = len(xyb) > 2 and hypot(*(xyb[0, :2] - xyb[-1, :2])) <= 1e-9 * size
    return Shape(xyb[:-1] if closed else xyb, closed, z_low, z_high)


def _line(e: Dxf) -> Shape:
    a, b = e.dxf.start, e.dxf.end
    return Shape(np.array([[a.x, a.y, 0.0], [b.x, b.y, 0.0]]), closed=False, z_low=min(a.z, b.z), z_high=max(a.z, b.z))


def flat(extrusion: Iterable[float]) -> float:
    """+1 or -1 for an extrusion along z; the mirrored plane is what many programs write after a flip.

    Raises
    ------
    UnusableEntityError
        When the plane is tilted.
    """
    x, y, z = extrusion
    if hypot(x, y) > 1e-6 * abs(z):
        raise UnusableEntityError("it lies in a tilted plane")
    return 1.0 if z > 0 else -1.0


def _circle(e: Dxf) -> Shape:
    return circle_shape(e.dxf.center.xyz, e.dxf.radius, flat(e.dxf.extrusion))


def circle_shape(centre: tuple[float, float, float], radius: float, flip: float) -> Shape:
    """Full circle in a plane that looks up (`flip` 1) or down (-1)."""
    if not radius > 0:
        raise UnusableEntityError(f"its radius is {radius:g}")
    x, y, z = flip * centre[0], centre[1], flip * centre[2]
    # it starts at OCS angle 0 and runs anticlockwise whichever way the plane looks: a full circle has no direction
    return Shape(np.array([[x + radius, y, 1.0], [x - radius, y, 1.0]]), closed=True, z_low=z, z_high=z)


def _arc(e: Dxf) -> Shape:
    return arc_shape(e.dxf.center.xyz, e.dxf.radius, e.dxf.start_angle, e.dxf.end_angle, flat(e.dxf.extrusion))


def arc_shape(centre: tuple[float, float, float], r: float, start_deg: float, end_deg: float, flip: float) -> Shape:
    """Arc that runs anticlockwise in a plane that looks up (`flip` 1) or down (-1)."""
    start, end = radians(start_deg), radians(end_deg)
    sweep = (end - start) % (2 * pi)
    if _is_full(start, end) or not r > 0:
        return circle_shape(centre, r, flip)
    x, y, z = centre
    pieces = 1 if sweep <= pi + 1e-9 else 2
    bulge = tan(sweep / pieces / 4.0)
    rows = []
    for k in range(pieces + 1):
        a = start + sweep * k / pieces
        rows.append((flip * (x + r * cos(a)), y + r * sin(a), flip * bulge if k < pieces else 0.0))
    return Shape(np.array(rows), closed=False, z_low=flip * z, z_high=flip * z)


def _is_full(start: float, end: float) -> bool:
    """Tell whether an arc between two angles (radians) is a full turn, or one that rounding made a hair longer."""
    sweep = (end - start) % (2 * pi)
    return sweep < 1e-9 or sweep > 2 * pi - FULL_RAD or (sweep < PAST_FULL_RAD and end - start > pi)


def _ellipse(e: Dxf) -> _Smooth:
    flip = flat(e.dxf.extrusion)
    c, m, ratio = e.dxf.center, e.dxf.major_axis, e.dxf.ratio
    major = np.array([m.x, m.y])
    if hypot(m.x, m.y) <= 0 or not 0 < abs(ratio) <= 1e3:
        raise UnusableEntityError("an axis of the ellipse is zero")
    if not all(abs(v) <= FAR for v in (c.x, c.y, m.x, m.y, m.x * ratio, m.y * ratio)):
        raise UnusableEntityError("the ellipse is out of all bounds")
    minor = flip * ratio * np.array([-m.y, m.x])
    start, end = e.dxf.start_param, e.dxf.end_param
    sweep = (end - start) % (2 * pi)
    full = _is_full(start, end) or sweep < 1e-6
    start, sweep = (0.0, 2 * pi) if full else (start % (2 * pi), sweep)
    return _Smooth(ellipse(np.array([c.x, c.y]), major, minor, start, start + sweep), c.z, c.z, full)


def _spline(e: Dxf) -> Shape | _Smooth | UnusableEntityError:
    control = np.asarray(e.control_points, dtype=np.float64)
    if len(control):
        return _of_spline(SplineData(control, e.knots, e.weights, e.dxf.degree))
    tool = _through(e) if e.closed and len(e.fit_points) > 2 else e.construction_tool()
    control = np.array([(p.x, p.y, p.z) for p in tool.control_points])
    return _of_spline(SplineData(control, tool.knots(), tool.weights(), tool.degree))


def _through(e: Dxf) -> BSpline:
    """Lay a closed curve through the fit points of a spline; where it closes it runs along its neighbours' chord."""
    points = [Vec3(p) for p in e.fit_points]
    points = points if points[0].isclose(points[-1]) else [*points, points[0]]
    along = points[1] - points[-2]
    return fit_points_to_cad_cv(points, tangents=[along, along])


def _of_spline(data: SplineData) -> Shape | _Smooth | UnusableEntityError:
    control = data.control
    if not np.abs(control).max(initial=0.0) <= FAR:
        raise UnusableEntityError("a control point is out of all bounds")
    low, high = float(control[:, 2].min()), float(control[:, 2].max())
    if data.degree == 1:
        return _drawn(np.column_stack([control[:, :2], np.zeros(len(control))]), low, high, closed=None)
    return _Smooth(nurbs(data.degree, data.knots, control[:, :2], data.weights), low, high, closed=None)


def _lwpolyline(e: Dxf) -> Shape:
    rows = np.array(e.get_points("xyb"), dtype=np.float64).reshape(-1, 3)
    return polyline_shape(rows, e.dxf.flags, e.dxf.elevation, flat(e.dxf.extrusion))


def polyline_shape(rows: Floats, flags: int, height: float, flip: float) -> Shape:
    """Polyline of x, y and bulge, in a plane that looks up (`flip` 1) or down (-1); closed where bit 1 is set."""
    z = flip * height
    return _from_rows(rows * np.array([flip, 1.0, flip]), closed=bool(flags & 1), z=(z, z))


def _polyline(e: Dxf) -> Shape:
    if e.is_poly_face_mesh or e.is_polygon_mesh:
        raise UnusableEntityError("it is a mesh")
    # flag 16: a control point of the spline frame, beside the vertices that draw the curve
    vertices = [v for v in e.vertices if not v.dxf.flags & 16]
    rows = np.array([(*v.dxf.location, v.dxf.get("bulge", 0.0)) for v in vertices], dtype=np.float64).reshape(-1, 4)
    height = float(e.dxf.elevation.z) if e.dxf.hasattr("elevation") else None
    return old_polyline_shape(rows, e.dxf.flags, height, e.dxf.extrusion)


def old_polyline_shape(rows: Floats, flags: int, height: float | None, extrusion: Iterable[float]) -> Shape:
    """Polyline of vertices x, y, z and bulge; closed where flag 1 is set, and in space where 8 is."""
    if len(rows) == 0:
        raise UnusableEntityError("it has no vertices")
    closed, z = bool(flags & 1), (float(rows[:, 2].min()), float(rows[:, 2].max()))
    if flags & 8:
        return _from_rows(np.column_stack([rows[:, :2], np.zeros(len(rows))]), closed=closed, z=z)
    flip = flat(extrusion)
    height = flip * (z[0] if height is None else height)
    return _from_rows(rows[:, [0, 1, 3]] * np.array([flip, 1.0, flip]), closed=closed, z=(height, height))


def _from_rows(rows: Floats, *, closed: bool, z: tuple[float, float]) -> Shape:
    if len(rows) < 2:
        raise UnusableEntityError("it has fewer than two vertices")
    if not np.isfinite(rows).all() or np.abs(rows[:, 2]).max() > 1e6:
        raise UnusableEntityError("a coordinate or bulge is not a usable number")
    count = len(rows) if closed else len(rows) - 1
    step = np.hypot(*(np.roll(rows[:, :2], -1, axis=0) - rows[:, :2]).T)
    # a closing point that repeats the first one, or a doubled vertex, makes a segment without length
    keep = step > 1e-12 * max(1.0, float(np.abs(rows[:, :2]).max()))
    if not closed:
        keep[count] = True
    if not keep[:count].any():
        raise UnusableEntityError("it has no length")
    rows = rows[keep]
    if len(rows) < 2:
        raise UnusableEntityError("it has no length")
    if not closed:
        rows = rows.copy()
        rows[-1, 2] = 0.0
    return Shape(split_arcs(rows, closed=closed), closed, *z)


_MAKERS: dict[str, Callable[[Dxf], Shape | _Smooth | UnusableEntityError]] = {
    "LINE": _line,
    "ARC": _arc,
    "CIRCLE": _circle,
    "ELLIPSE": _ellipse,
    "SPLINE": _spline,
    "LWPOLYLINE": _lwpolyline,
    "POLYLINE": _polyline,
}
