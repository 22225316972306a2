"""Arcs in place of smooth curves: biarcs that meet the curve's points and tangents."""

from collections.abc import Sequence

import numpy as np
import numpy.typing as npt

from flatprep.geom.bulge import Floats, Ints, arc
from flatprep.geom.smooth import Evaluate, Smooth

Bools = npt.NDArray[np.bool_]

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
    return fit_all([curve], tol_mm)[0]


def fit_all(curves: Sequence[Smooth], tol_mm: float) -> list[Floats]:
    """Fit arcs to many curves at once; see `fit_arcs`."""
    kinds: dict[tuple[str, int], list[int]] = {}
    for k, curve in enumerate(curves):
        kinds.setdefault(curve.kind, []).append(k)
    out = [np.empty((0, 3))] * len(curves)
    for members in kinds.values():
        alike = [curves[k] for k in members]
        fitted = _fit_alike(alike, alike[0].together(alike), tol_mm)
        for k, xyb in zip(members, fitted, strict=True):
            out[k] = xyb
    return out


def _fit_alike(curves: Sequence[Smooth], evaluate: Evaluate, tol_mm: float) -> list[Floats]:
    singles = _single_arcs([curve.breaks for curve in curves], evaluate, tol_mm)
    left = [k for k, single in enumerate(singles) if single is None]
    breaks = [curves[k].breaks for k in left]
    which = np.repeat(np.array(left, dtype=np.intp), [len(u) - 1 for u in breaks])
    pieces = iter(_rows(evaluate, which, breaks, tol_mm) if left else ())
    return [next(pieces) if single is None else single for single in singles]


def _rows(evaluate: Evaluate, which: Ints, breaks: Sequence[Floats], tol_mm: float) -> list[Floats]:
    """Biarcs, halved until they are near enough: one polyline for each curve."""
    lo, hi = np.concatenate([u[:-1] for u in breaks]), np.concatenate([u[1:] for u in breaks])
    pieces: list[tuple[Ints, Floats, Floats]] = []
    for halving in range(_MOST_HALVINGS + 1):
        joints, bulges, error = _biarcs(evaluate, which, lo, hi)
        good = (error <= tol_mm) | (halving == _MOST_HALVINGS)
        pieces.append((which[good], lo[good], np.hstack([joints[good], bulges[good]])))
        if good.all():
            break
        which, middle = which[~good], (lo[~good] + hi[~good]) / 2.0
        lo, hi = np.concatenate([lo[~good], middle]), np.concatenate([middle, hi[~good]])
        which = np.concatenate([which, which])
    owner, at, rows = (np.concatenate(column) for column in zip(*pieces, strict=True))
    order = np.lexsort((at, owner))
    owner, rows = owner[order], rows[order]
    curves, counts = np.unique(owner, return_counts=True)
    ends = evaluate(curves, np.array([u[-1] for u in breaks]))[0]
    sizes = 2 * counts + 1
    last = np.cumsum(sizes) - 1
    joint = np.ones(last[-1] + 1, dtype=bool)
    joint[last] = False
    out = np.empty((len(joint), 3))
    out[last] = np.column_stack([ends, np.zeros(len(ends))])
    out[joint] = rows[:, [0, 1, 4, 2, 3, 5]].reshape(-1, 3)
    # a piece without length, between two points that are one
    keep = np.append(np.hypot(*np.diff(out[:, :2], axis=0).T) > 1e-9, True) | ~joint
    return np.split(out[keep], np.cumsum(np.add.reduceat(keep.astype(np.intp), last - sizes + 1))[:-1])


def _biarcs(evaluate: Evaluate, which: Ints, lo: Floats, hi: Floats) -> tuple[Floats, Floats, Floats]:
    """Start and joint (n, 4), the two bulges (n, 2), and the largest distance (n,) of each piece's biarc."""
    inward = (hi - lo) * 1e-9  # tangents are taken just inside: at a kink each side has its own
    n = len(lo)
    inner = (lo[:, None] + (hi - lo)[:, None] * _INNER[None, :]).ravel()
    of = np.concatenate([which, which, which, which, np.repeat(which, len(_INNER))])
    xy, slope = evaluate(of, np.concatenate([lo, hi, lo + inward, hi - inward, inner]))
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


def _single_arcs(breaks: Sequence[Floats], evaluate: Evaluate, tol_mm: float) -> list[Floats | None]:
    """Return whole curves as one line or one arc each, where they are one within the tolerance."""
    steps = np.linspace(0.0, 1.0, 9)[:-1]
    params = [np.append((u[:-1, None] + np.diff(u)[:, None] * steps).ravel(), u[-1]) for u in breaks]
    counts = np.array([len(t) for t in params])
    which = np.repeat(np.arange(len(params)), counts)
    xy, _ = evaluate(which, np.concatenate(params))
    first = np.cumsum(counts) - counts
    a, z = xy[first], xy[first + counts - 1]
    straight = _straight(xy, which, first, tol_mm)
    hopeless = _far_from_circles(xy, which, counts, tol_mm)
    out: list[Floats | None] = []
    for k, points in enumerate(np.split(xy, first[1:])):
        if straight[k]:
            out.append(np.array([[*a[k], 0.0], [*z[k], 0.0]]))
        else:
            out.append(None if hopeless[k] else _one_arc(points, tol_mm))
    return out


def _straight(xy: Floats, which: Ints, first: Ints, tol_mm: float) -> Bools:
    """Whether the points of each curve lie along the line between its ends, one after the other."""
    last = np.append(first[1:], len(xy)) - 1
    chord = xy[last] - xy[first]
    length = np.hypot(chord[:, 0], chord[:, 1])
    size = (np.maximum.reduceat(xy, first) - np.minimum.reduceat(xy, first)).max(axis=1)
    ray, way = xy - xy[first][which], chord[which]
    aside = np.maximum.reduceat(np.abs(ray[:, 1] * way[:, 0] - ray[:, 0] * way[:, 1]), first)
    step = np.append(np.diff(np.sum(ray * way, axis=1)), 0.0)
    step[last] = 0.0
    back = np.minimum.reduceat(step, first)
    sound = (length > 0.5 * size) & (size > 0.0) & (aside <= tol_mm * length)
    return np.asarray(sound & (back >= -1e-9 * length * length))


def _far_from_circles(xy: Floats, which: Ints, counts: Ints, tol_mm: float) -> Bools:
    """Which curves are surely no arcs: the circle of least algebraic distance (Kåsa 1976) is far from a point.

    It is worked out here by its normal equations, which tell nothing of points that lie nearly in line.
    """
    first = np.cumsum(counts) - counts

    def mean(v: Floats) -> Floats:
        return np.asarray(np.add.reduceat(v, first) / counts)

    x, y = (v - mean(v)[which] for v in xy.T)
    squares = x * x + y * y
    a, b, d, e, f = (mean(v) for v in (x * x, x * y, y * y, x * squares / 2.0, y * squares / 2.0))
    det = a * d - b * b
    told = det > 1e-6 * np.maximum(a, d) ** 2
    safe = np.where(told, det, 1.0)
    cx, cy = (e * d - b * f) / safe, (a * f - e * b) / safe
    r = np.sqrt(cx * cx + cy * cy + mean(squares))
    off = np.abs(np.hypot(x - cx[which], y - cy[which]) - r[which])
    return np.asarray(told & (np.maximum.reduceat(off, first) > 2.0 * tol_mm))


def _one_arc(xy: Floats, tol_mm: float) -> Floats | None:
    """Return points, shape (n, 2), as one arc through the first and the last, where they lie on one."""
    a, z = xy[0], xy[-1]
    if not np.ptp(xy, axis=0).any():
        return None
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


def _unit(v: Floats) -> Floats:
    norm = np.hypot(v[:, 0], v[:, 1])[:, None]
    return np.divide(v, norm, out=np.zeros_like(v), where=norm > 0)


def _angle(a: Floats, b: Floats) -> Floats:
    """Signed angle from a to b, rad, row by row."""
    return np.asarray(np.arctan2(a[:, 0] * b[:, 1] - a[:, 1] * b[:, 0], np.sum(a * b, axis=1)), dtype=np.float64)
