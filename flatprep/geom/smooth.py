"""Smooth curves that are no arcs, as functions of a parameter: NURBS and ellipses, points with tangents."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from flatprep.geom.bulge import Floats

Ints = npt.NDArray[np.intp]
Evaluate = Callable[[Floats], tuple[Floats, Floats]]
"""Parameters, shape (m,) -> points and derivatives, each of shape (m, 2)."""


@dataclass(frozen=True, slots=True, eq=False)
class Smooth:
    """A curve to be replaced by arcs.

    Attributes
    ----------
    evaluate : callable
        See `Evaluate`.
    breaks : ndarray, shape (k,)
        Parameters, ascending, between which the curve has a continuous tangent; the first and last are its ends.
    """

    evaluate: Evaluate
    breaks: Floats


def ellipse(centre: Floats, major: Floats, minor: Floats, start_rad: float, end_rad: float) -> Smooth:
    """Arc of an ellipse, ``centre + major cos t + minor sin t``; `major` and `minor` are half axes, mm."""

    def evaluate(t: Floats) -> tuple[Floats, Floats]:
        c, s = np.cos(t)[:, None], np.sin(t)[:, None]
        return centre + c * major + s * minor, c * minor - s * major

    quarters = np.pi / 2 * np.arange(np.ceil(start_rad / (np.pi / 2)), np.floor(end_rad / (np.pi / 2)) + 1)
    inner = quarters[(quarters > start_rad + 1e-9) & (quarters < end_rad - 1e-9)]
    return Smooth(evaluate, np.concatenate([[start_rad], inner, [end_rad]]))


def nurbs(degree: int, knots: Sequence[float], control: Floats, weights: Sequence[float] | None = None) -> Smooth:
    """Non-uniform rational B-spline in the plane.

    Parameters
    ----------
    degree
        p >= 1.
    knots
        n + p + 1 of them, ascending.
    control : ndarray, shape (n, 2)
        mm.
    weights
        n positive weights, or None for a plain B-spline.

    Raises
    ------
    ValueError
        When the counts do not fit, the knots fall, the span is empty, or a weight is not positive and finite.

    Notes
    -----
    Cox and de Boor's recursion in the triangular form, vectorised over the parameters (Piegl and Tiller, The NURBS
    Book, algorithms A2.1 to A2.3 and A4.2).
    """
    u = np.asarray(knots, dtype=np.float64)
    n, p = len(control), degree
    if p < 1 or n < p + 1 or len(u) != n + p + 1:
        raise ValueError(f"{n} control points and {len(u)} knots do not make a spline of degree {p}")
    if not np.isfinite(u).all() or not np.isfinite(control).all() or (np.diff(u) < 0).any() or u[p] >= u[n]:
        raise ValueError("the knots are not an ascending list of finite numbers")
    w = np.ones(n) if weights is None or len(weights) == 0 else np.asarray(weights, dtype=np.float64)
    if len(w) != n or not np.isfinite(w).all() or (w <= 0).any():
        raise ValueError("a weight is missing, zero or negative")
    homogeneous = np.column_stack([control * w[:, None], w])

    def evaluate(t: Floats) -> tuple[Floats, Floats]:
        span = np.clip(np.searchsorted(u, t, side="right") - 1, p, n - 1)
        points, slopes = _de_boor(u, p, homogeneous, span, t)
        xy = points[:, :2] / points[:, 2:]
        return xy, (slopes[:, :2] - xy * slopes[:, 2:]) / points[:, 2:]

    inside, counts = np.unique(u[p : n + 1], return_counts=True)
    # within a knot span the curve is smooth; at simple knots it still is, but spans are good first pieces
    return Smooth(evaluate, inside if len(counts) > 1 else np.array([u[p], u[n]]))


def _de_boor(u: Floats, p: int, control: Floats, span: Ints, t: Floats) -> tuple[Floats, Floats]:
    d = control[span[:, None] + np.arange(-p, 1)[None, :]]
    slope = np.zeros((len(t), control.shape[1]))
    for r in range(1, p + 1):
        if r == p:
            width = u[span + 1] - u[span]
            slope = p * (d[:, p] - d[:, p - 1]) / width[:, None]
        for j in range(p, r - 1, -1):
            lo = u[span + j - p]
            hi = u[span + 1 + j - r]
            a = np.divide(t - lo, hi - lo, out=np.zeros_like(t), where=hi > lo)[:, None]
            d[:, j] = (1.0 - a) * d[:, j - 1] + a * d[:, j]
    return d[:, p], slope
