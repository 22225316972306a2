"""Area moments of regions that closed polylines bound, exact on lines and arcs."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from flatprep.geom.bulge import Floats, Ints
from flatprep.geom.rings import Rings


@dataclass(frozen=True, slots=True)
class Moments:
    """Area moments of a closed region about the origin of its drawing.

    Attributes
    ----------
    area : float
        mm², positive.
    sx, sy : float
        First moments ∫x dA and ∫y dA, mm³.
    xx, yy, xy : float
        Second moments ∫x² dA, ∫y² dA and ∫xy dA, mm⁴.
    """

    area: float
    sx: float
    sy: float
    xx: float
    yy: float
    xy: float

    @property
    def centroid(self) -> tuple[float, float]:
        """Centre of area, mm."""
        return self.sx / self.area, self.sy / self.area

    def about_centroid(self) -> tuple[float, float, float]:
        """Second moments (∫x², ∫y², ∫xy) about the centroid, mm⁴ (parallel axes)."""
        cx, cy = self.centroid
        return self.xx - cx * self.sx, self.yy - cy * self.sy, self.xy - cx * self.sy


_OF_LINES = np.polynomial.legendre.leggauss(3)
_OF_ARCS = np.polynomial.legendre.leggauss(20)


def moments(xyb: Floats) -> Moments:
    """Area moments of a closed polyline, whatever its direction; area positive."""
    return region_moments(xyb, ())


def region_moments(outer: Floats, holes: Sequence[Floats]) -> Moments:
    """Area moments of what lies within the outer polyline and in no hole, whatever their directions.

    Notes
    -----
    Green's theorem, ∫xᵖ yᵠ dA = ∮ xᵖ⁺¹ yᵠ / (p + 1) dy, integrated along each segment by Gauss-Legendre quadrature:
    with 3 points exact for lines (degree 4), and with 20 for arcs of a half circle at the most exact to rounding (the
    integrands are trigonometric polynomials of degree 4). Taken about the first vertex of each polyline, then shifted.
    """
    rings = Rings.of([outer, *holes])
    sums = _sums(rings) * np.where(rings.signed_areas >= 0.0, 1.0, -1.0)[:, None]
    area, sx, sy, xx, yy, xy = sums.T
    ox, oy = rings.rows[rings.first, :2].T
    whole = np.stack(
        [
            area,
            sx + ox * area,
            sy + oy * area,
            xx + 2 * ox * sx + ox * ox * area,
            yy + 2 * oy * sy + oy * oy * area,
            xy + ox * sy + oy * sx + ox * oy * area,
        ]
    )
    return Moments(*(whole[:, 0] - whole[:, 1:].sum(axis=1)).tolist())


def _sums(rings: Rings) -> Floats:
    """Integrals of 1, x, y, x², y² and xy about the first vertex of each ring, signed, shape (n, 6)."""
    sweep = rings.segments.sweep
    out = np.zeros((len(rings.counts), 6))
    for rows, (nodes, weights) in ((np.flatnonzero(sweep == 0.0), _OF_LINES), (np.flatnonzero(sweep), _OF_ARCS)):
        if len(rows):
            x, y, dy = _nodes_along(rings, rows, nodes)
            kernels = (x, x * x / 2.0, x * y, x**3 / 3.0, x * y * y, x * x * y / 2.0)
            parts = [(f * dy) @ (weights / 2.0) for f in kernels]
            owner = rings.owner[rows]
            out += np.stack([np.bincount(owner, part, len(out)) for part in parts], axis=1)
    return out


def _nodes_along(rings: Rings, rows: Ints, nodes: Floats) -> tuple[Floats, Floats, Floats]:
    """x, y and dy/dt at the nodes of segments, t from 0 to 1, about the first vertex of each ring; shape (m, nodes).

    Written from the chord, with half the sweep h and the angle φ from the arc's top: no radius occurs, so that
    nearly straight arcs keep their digits.
    """
    seg = rings.segments
    origin = rings.rows[rings.first, :2][rings.owner[rows]]
    start, end = seg.start[rows] - origin, seg.end[rows] - origin
    chord, middle = end - start, (start + end) / 2.0
    if not seg.sweep[rows[0]]:
        x, y = (middle[:, k, None] + chord[:, k, None] * nodes / 2.0 for k in (0, 1))
        return x, y, np.broadcast_to(chord[:, 1:], x.shape)
    h = seg.sweep[rows, None] / 2.0
    phi, sine = h * nodes, np.sin(h)
    along = np.sin(phi) / sine / 2.0
    lift = np.sin((h + phi) / 2.0) * np.sin((h - phi) / 2.0) / sine
    # an arc of positive bulge lies right of its chord
    x = middle[:, :1] + chord[:, :1] * along + chord[:, 1:] * lift
    y = middle[:, 1:] + chord[:, 1:] * along - chord[:, :1] * lift
    return x, y, h / sine * (chord[:, 1:] * np.cos(phi) + chord[:, :1] * np.sin(phi))
