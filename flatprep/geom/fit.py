"""Arcs in place of smooth curves: biarcs that meet the curve's points and tangents."""

import numpy as np

from flatprep.geom.bulge import Floats, arc
from flatprep.geom.smooth import Smooth

_INNER = np.arange(1, 8) / 8.0
"""Where between its ends a biarc is held against the curve."""
_MOST_HALVINGS = 14


def fit_arcs(curve: Smooth, tol_mm: float) -> Floats:
    """Open bulge polyline within `tol_mm` of the curve, tangent to it at the joints.

    Parameters
    ----------
    curve
        See `flatprep.geom.smooth`.
    tol_mm
        Largest distance at the points where the fit is checked (7 inside every biarc).

    Returns
    -------
    ndarray, shape (n, 3)
        A single arc or line where one is enough (a spline that draws a circle comes out as the circle).
    """
    whole = _single_arc(curve, tol_mm)
    if whole is not None:
        return whole
    lo, hi = curve.breaks[:-1], curve.breaks[1:]
    pieces: list[tuple[Floats, Floats]] = []
    for halving in range(_MOST_HALVINGS + 1):
        joints, bulges, error = _biarcs(curve, lo, hi)
        good = (error <= tol_mm) | (halving == _MOST_HALVINGS)
        pieces.append((lo[good], np.hstack([joints[good], bulges[good]])))
        if good.all():
            break
        middle = (lo[~good] + hi[~good]) / 2.0
        lo, hi = np.concatenate([lo[~good], middle]), np.concatenate([middle, hi[~good]])
    at = np.concatenate([p[0] for p in pieces])
    rows = np.concatenate([p[1] for p in pieces])[np.argsort(at, kind="stable")]
    end = curve.evaluate(curve.breaks[-1:])[0]
    out = np.empty((2 * len(rows) + 1, 3))
    out[0:-1:2] = rows[:, [0, 1, 4]]
    out[1::2] = rows[:, [2, 3, 5]]
    out[-1] = (end[0, 0], end[0, 1], 0.0)
    return _without_empty(out)


def _biarcs(curve: Smooth, lo: Floats, hi: Floats) -> tuple[Floats, Floats, Floats]:
    """Start and joint (n, 4), the two bulges (n, 2), and the largest distance (n,) of each piece's biarc."""
    inward = (hi - lo) * 1e-9  # tangents are taken just inside: at a kink each side has its own
    n = len(lo)
    inner = (lo[:, None] + (hi - lo)[:, None] * _INNER[None, :]).ravel()
    xy, slope = curve.evaluate(np.concatenate([lo, hi, lo + inward, hi - inward, inner]))
    p0, p1, sample = xy[:n], xy[n : 2 * n], xy[4 * n :].reshape(n, len(_INNER), 2)
    t0, t1 = _unit(slope[2 * n : 3 * n]), _unit(slope[3 * n : 4 * n])
    chord = p1 - p0
    v = np.sum(chord * chord, axis=1)
    along = np.sum(chord * (t0 + t1), axis=1)
    # the joint that gives both arcs equal tangent lengths d: |P1 - d T1 - P0 - d T0| = 2 d
    k = 2.0 * (1.0 - np.sum(t0 * t1, axis=1))
    root = np.sqrt(np.maximum(along * along + k * v, 0.0))
    with np.errstate(divide="ignore", invalid="ignore"):
        # the stable form of the quadratic's positive root
        d = v / (along + root)
    d = np.where(np.isfinite(d), d, np.sqrt(v) / 2.0)
    joint = (p0 + p1) / 2.0 + (t0 - t1) * (d / 2.0)[:, None]
    b0 = np.tan(_angle(t0, joint - p0) / 2.0)
    b1 = np.tan(_angle(p1 - joint, t1) / 2.0)
    off = np.minimum(_off(sample, p0, joint, b0), _off(sample, joint, p1, b1))
    wide = (np.abs(b0) > 1.0) | (np.abs(b1) > 1.0) | ~np.isfinite(b0) | ~np.isfinite(b1)
    return np.hstack([p0, joint]), np.column_stack([b0, b1]), np.where(wide, np.inf, off.max(axis=1))


def _off(points: Floats, start: Floats, end: Floats, bulge: Floats) -> Floats:
    """Distance of points (n, m, 2) from the circle or line of n arcs, shape (n, m)."""
    chord = end - start
    length = np.hypot(chord[:, 0], chord[:, 1])
    safe = np.where(length > 0, length, 1.0)
    ux, uy = (chord / safe[:, None]).T
    local = points - start[:, None, :]
    x = local[..., 0] * ux[:, None] + local[..., 1] * uy[:, None] - (length / 2.0)[:, None]
    y = -local[..., 0] * uy[:, None] + local[..., 1] * ux[:, None]
    b = bulge[:, None]
    half = (length / 2.0)[:, None]
    # the circle through both ends and the arc's top, written so that b = 0 gives the line (curvature form)
    curvature = np.where(length > 0, 4.0 * bulge / ((1.0 + bulge**2) * safe), 0.0)[:, None]
    lift = (1.0 - b * b) / (1.0 + b * b)
    value = curvature * (x * x + y * y - half * half) / 2.0 - lift * y
    gradient = np.hypot(curvature * x, curvature * y - lift)
    inside = np.abs(value) / np.where(gradient > 1e-9, gradient, 1e-9)
    return np.where(length[:, None] > 0, inside, np.hypot(local[..., 0], local[..., 1]))


def _single_arc(curve: Smooth, tol_mm: float) -> Floats | None:
    """Return the whole curve as one line or one arc, where it is one within the tolerance."""
    steps = np.linspace(0.0, 1.0, 9)[:-1]
    t = np.append((curve.breaks[:-1, None] + np.diff(curve.breaks)[:, None] * steps).ravel(), curve.breaks[-1])
    xy, _ = curve.evaluate(t)
    a, z = xy[0], xy[-1]
    chord = z - a
    length = float(np.hypot(*chord))
    size = float(np.ptp(xy, axis=0).max())
    if size == 0.0:
        return None
    if length > 0.5 * size:
        off = (xy - a) @ np.array([-chord[1], chord[0]]) / length
        forward = np.diff((xy - a) @ chord)
        if np.abs(off).max() <= tol_mm and (forward >= -1e-9 * length * length).all():
            return np.array([[a[0], a[1], 0.0], [z[0], z[1], 0.0]])
    fitted = _circle_through(xy)
    if fitted is None:
        return None
    cx, cy, r = fitted
    if np.abs(np.hypot(xy[:, 0] - cx, xy[:, 1] - cy) - r).max() > tol_mm or r > 1e5:
        return None
    angles = np.unwrap(np.arctan2(xy[:, 1] - cy, xy[:, 0] - cx))
    sweep = float(angles[-1] - angles[0])
    turns = np.diff(angles) * np.sign(sweep)
    if (turns < -1e-9).any() or abs(sweep) > 2 * np.pi + 1e-3:
        return None
    out = arc(cx, cy, r, float(angles[0]), sweep)
    if abs(sweep) < 2 * np.pi - 1e-3:
        out[0, :2], out[-1, :2] = a, z
    else:
        out[-1, :2] = out[0, :2]
    return out


def _circle_through(xy: Floats) -> tuple[float, float, float] | None:
    """Circle of least algebraic distance (Kåsa 1976) through points (n, 2)."""
    if not np.isfinite(xy).all():  # of which LAPACK would complain on stdout
        return None
    middle = xy.mean(axis=0)
    p = xy - middle
    system = np.column_stack([2.0 * p, np.ones(len(p))])
    solution, _, rank, _ = np.linalg.lstsq(system, np.sum(p * p, axis=1), rcond=None)
    if rank < 3:
        return None
    squared = solution[2] + solution[0] ** 2 + solution[1] ** 2
    if squared <= 0.0:
        return None
    return float(middle[0] + solution[0]), float(middle[1] + solution[1]), float(np.sqrt(squared))


def _without_empty(xyb: Floats) -> Floats:
    keep = np.append(np.hypot(*np.diff(xyb[:, :2], axis=0).T) > 1e-9, True)
    return np.asarray(xyb[keep], dtype=np.float64)


def _unit(v: Floats) -> Floats:
    norm = np.hypot(v[:, 0], v[:, 1])[:, None]
    return np.divide(v, norm, out=np.zeros_like(v), where=norm > 0)


def _angle(a: Floats, b: Floats) -> Floats:
    """Signed angle from a to b, rad, row by row."""
    return np.asarray(np.arctan2(a[:, 0] * b[:, 1] - a[:, 1] * b[:, 0], np.sum(a * b, axis=1)), dtype=np.float64)
