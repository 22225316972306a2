"""Smooth curves that are no arcs, as functions of a parameter: NURBS and ellipses, points with tangents."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Any, Protocol

import numpy as np

from flatprep.geom.bulge import Floats, Ints


class Smooth(Protocol):
    """A curve to be replaced by arcs."""

    @property
    def kind(self) -> tuple[str, int]:
        """Curves of one kind can be worked out together."""
        ...

    @property
    def breaks(self) -> Floats:
        """Parameters, ascending, shape (k,), between which its tangent is continuous; the outer ones are its ends."""
        ...

    def together(self, others: Sequence[Any]) -> "Evaluate":
        """Return the evaluation of several curves of this kind."""
        ...


Evaluate = Callable[[Ints, Floats], tuple[Floats, Floats]]
"""Numbers of curves and parameters on them, shape (m,) each -> points and derivatives, each of shape (m, 2)."""


@dataclass(frozen=True, slots=True, eq=False)
class Ellipse:
    """Arc of an ellipse, ``centre + major cos t + minor sin t``; `major` and `minor` are half axes, mm."""

    centre: Floats
    major: Floats
    minor: Floats
    breaks: Floats

    @property
    def kind(self) -> tuple[str, int]:
        """All ellipses are of one kind."""
        return "ellipse", 0

    def together(self, others: Sequence["Ellipse"]) -> Evaluate:
        """See `Smooth`."""
        centre, major, minor = (np.array([getattr(e, k) for e in others]) for k in ("centre", "major", "minor"))

        def evaluate(which: Ints, t: Floats) -> tuple[Floats, Floats]:
            c, s = np.cos(t)[:, None], np.sin(t)[:, None]
            a, b = major[which], minor[which]
            return centre[which] + c * a + s * b, c * b - s * a

        return evaluate


def ellipse(centre: Floats, major: Floats, minor: Floats, start_rad: float, end_rad: float) -> Ellipse:
    """Arc of an ellipse from one parameter to another."""
    quarters = np.pi / 2 * np.arange(np.ceil(start_rad / (np.pi / 2)), np.floor(end_rad / (np.pi / 2)) + 1)
    inner = quarters[(quarters > start_rad + 1e-9) & (quarters < end_rad - 1e-9)]
    return Ellipse(centre, major, minor, np.concatenate([[start_rad], inner, [end_rad]]))


@dataclass(frozen=True, slots=True, eq=False)
class Nurbs:
    """Non-uniform rational B-spline: knots, and control points (n, 3) as x w, y w and w."""

    degree: int
    knots: Floats
    control: Floats
    breaks: Floats

    @property
    def kind(self) -> tuple[str, int]:
        """Splines of one degree are of one kind."""
        return "spline", self.degree

    def together(self, others: Sequence["Nurbs"]) -> Evaluate:
        """See `Smooth`.

        Notes
        -----
        Cox and de Boor's recursion in the triangular form, vectorised over the parameters (Piegl and Tiller, The NURBS
        Book, algorithms A2.1 to A2.3 and A4.2).
        """
        u, control = np.concatenate([s.knots for s in others]), np.concatenate([s.control for s in others])
        counts = np.array([len(s.control) for s in others])
        first = np.cumsum(counts) - counts  # of control points; each spline has p + 1 knots more than points
        lead = (self.degree + 1) * np.arange(len(others))
        lo, hi = first + lead + self.degree, first + lead + counts - 1

        def evaluate(which: Ints, t: Floats) -> tuple[Floats, Floats]:
            span = _span(u, lo[which], hi[which], t)
            points, slopes = _de_boor(u, self.degree, control, (span, span - lead[which]), t)
            xy = points[:, :2] / points[:, 2:]
            return xy, (slopes[:, :2] - xy * slopes[:, 2:]) / points[:, 2:]

        return evaluate


def nurbs(degree: int, knots: Sequence[float], control: Floats, weights: Sequence[float] | None = None) -> Nurbs:
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
    inside, counts = np.unique(u[p : n + 1], return_counts=True)
    # within a knot span the curve is smooth; at simple knots it still is, but spans are good first pieces
    breaks = inside if len(counts) > 1 else np.array([u[p], u[n]])
    return Nurbs(p, u, np.column_stack([control * w[:, None], w]), breaks)


def _span(u: Floats, lo: Ints, hi: Ints, t: Floats) -> Ints:
    """Last knots, from `lo` to `hi`, that are not above t."""
    lo, hi = lo.copy(), hi.copy()
    while (lo < hi).any():
        middle = (lo + hi + 1) // 2
        up = u[middle] <= t
        lo, hi = np.where(up, middle, lo), np.where(up, hi, middle - 1)
    return lo


def _de_boor(u: Floats, p: int, control: Floats, span: tuple[Ints, Ints], t: Floats) -> tuple[Floats, Floats]:
    knot, point = span
    d = control[point[:, None] + np.arange(-p, 1)[None, :]]
    slope = np.zeros((len(t), control.shape[1]))
    for r in range(1, p + 1):
        if r == p:
            width = u[knot + 1] - u[knot]
            slope = p * (d[:, p] - d[:, p - 1]) / width[:, None]
        for j in range(p, r - 1, -1):
            lo = u[knot + j - p]
            hi = u[knot + 1 + j - r]
            a = np.divide(t - lo, hi - lo, out=np.zeros_like(t), where=hi > lo)[:, None]
            d[:, j] = (1.0 - a) * d[:, j - 1] + a * d[:, j]
    return d[:, p], slope
