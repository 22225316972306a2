"""Open curves chained into closed contours where just two ends meet at every point."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from flatprep.drawing.ends import SAME_POINT_MM, Ints, dangling_pairs, groups, node_ids
from flatprep.drawing.walk import Laid, Walk, walks
from flatprep.geom import bulge
from flatprep.geom.bulge import Floats
from flatprep.model.drawing import Contour, Curve

GAPS_SHARE = 0.05
"""Gaps of a bridged ring together, over its length."""
WIDTH_OVER_GAP = 4.0
"""Mean width of a ring of straight strokes over its widest gap."""


@dataclass(frozen=True, slots=True, eq=False)
class Chain:
    """Curves joined end to end.

    Attributes
    ----------
    xyb : ndarray, shape (n, 3)
    handles : tuple of str
        One a segment.
    layers : tuple of str
    closed : bool
    gaps : tuple of ((x, y), mm)
        Gaps wider than the silent ones that were bridged to close it.
    pieces : int
        Curves in it.
    """

    xyb: Floats
    handles: tuple[str, ...]
    layers: tuple[str, ...]
    closed: bool
    gaps: tuple[tuple[tuple[float, float], float], ...] = ()
    pieces: int = 1

    @property
    def contour(self) -> Contour:
        """The chain as a contour, whatever its direction."""
        return Contour(self.xyb, self.handles, self.layers)


@dataclass(frozen=True, slots=True, eq=False)
class Chained:
    """What chaining makes.

    Attributes
    ----------
    closed, open : tuple of Chain
        Chains without a branch.
    branched : tuple of Curve
        Curves that hang together at points where more than two ends meet.
    joined : tuple of ((x, y), mm)
        Gaps that were closed in silence and are wider than rounding explains.
    """

    closed: tuple[Chain, ...]
    open: tuple[Chain, ...]
    branched: tuple[Curve, ...]
    joined: tuple[tuple[tuple[float, float], float], ...] = ()


def chain(curves: Sequence[Curve], join_mm: float) -> Chained:
    """Chain curves; ends within `join_mm` that dangle alone are one point."""
    rings = [_ring_of(c) for c in curves if c.closed]
    open_curves = [c for c in curves if not c.closed]
    if not open_curves:
        return Chained(tuple(rings), (), ())
    laid = Laid.of([c.xyb for c in open_curves])
    nodes = node_ids(laid.ends, lambda i: bulge.length(open_curves[i].xyb, closed=False), join_mm)
    tangled = _tangled(nodes)
    plain = np.ones(len(open_curves), dtype=bool)
    plain[tangled] = False
    ways = list(walks(np.flatnonzero(plain).tolist(), nodes))
    chains = [_chain(way, xyb, open_curves) for way, xyb in zip(ways, laid.along(ways), strict=True)]
    rings += [c for c in chains if c.closed]
    loose = [c for c in chains if not c.closed]
    branched = [open_curves[i] for i in tangled.tolist()]
    return Chained(tuple(rings), tuple(loose), tuple(branched), _joined(laid.ends, nodes))


def _chain(way: Walk, xyb: Floats, curves: Sequence[Curve]) -> Chain:
    members = [curves[i] for i in way.curves]
    handles = tuple(c.handle for c in members for _ in range(len(c.xyb) - 1))
    layers = tuple(sorted({c.layer for c in members}))
    return Chain(xyb, handles, layers, way.closed, pieces=len(members))


def _tangled(nodes: Ints) -> Ints:
    """Curves that hang together with a point where more than two ends meet: net by net, in order in each."""
    branches = np.bincount(nodes) > 2
    if not branches.any():
        return np.empty(0, dtype=np.int64)
    net = groups(len(branches), nodes[0::2], nodes[1::2])
    own = net[nodes[0::2]]
    rows = np.flatnonzero(np.isin(own, net[branches]))
    first = np.unique(own, return_index=True)[1]
    return rows[np.lexsort((rows, first[own[rows]]))]


def bridge(chains: Sequence[Chain], reach_mm: float) -> tuple[list[Chain], list[Chain]]:
    """Close open chains over gaps up to `reach_mm`, nearest ends first.

    A ring is taken only when its gaps are a small part of it (`GAPS_SHARE`). First those chains are tried that are no
    single straight stroke, then all that are left; where strokes take part the ring must be wide for its gaps
    (`WIDTH_OVER_GAP`), too: bend lines that lie side by side are no outline.

    Returns
    -------
    closed, rest
    """
    closed, rest = _bridged([c for c in chains if not _is_stroke(c)], reach_mm)
    rest += [c for c in chains if _is_stroke(c)]
    wide, rest = _bridged(rest, reach_mm, WIDTH_OVER_GAP)
    return closed + wide, rest


def _bridged(able: Sequence[Chain], reach_mm: float, width_over_gap: float = 0.0) -> tuple[list[Chain], list[Chain]]:
    if not able:
        return [], []
    ends = np.array([p for c in able for p in (c.xyb[0, :2], c.xyb[-1, :2])])
    pairs = dangling_pairs(ends, np.arange(len(ends)), reach_mm)
    partner = {i: (j, gap) for i, j, gap in pairs} | {j: (i, gap) for i, j, gap in pairs}
    closed, used = [], set()
    for start in range(len(able)):
        if start in used:
            continue
        ring = _follow(start, able, ends, partner)
        if ring is not None and _width(ring[0]) >= width_over_gap * max(gap for _, gap in ring[0].gaps):
            closed.append(ring[0])
            used |= ring[1]
    return closed, [c for i, c in enumerate(able) if i not in used]


def _width(ring: Chain) -> float:
    """Mean width of what a ring encloses: that of a strip as long as half its border."""
    return 2.0 * abs(bulge.signed_area(ring.xyb)) / bulge.length(ring.xyb, closed=True)


def _joined(ends: Floats, nodes: Ints) -> tuple[tuple[tuple[float, float], float], ...]:
    """Nodes whose two ends lie apart."""
    order = np.argsort(nodes, kind="stable")
    firsts = np.flatnonzero(np.diff(nodes[order], prepend=-1))
    pairs = firsts[np.bincount(nodes) == 2]
    a, b = ends[order[pairs]], ends[order[pairs + 1]]
    gaps = np.hypot(*(a - b).T)
    return tuple(
        (tuple(((p + q) / 2.0).tolist()), float(g)) for p, q, g in zip(a, b, gaps, strict=True) if g > SAME_POINT_MM
    )


def _follow(
    start: int, able: Sequence[Chain], ends: Floats, partner: dict[int, tuple[int, float]]
) -> tuple[Chain, set[int]] | None:
    pieces, gaps, seen, at = [], [], set(), 2 * start
    while True:
        index = at // 2
        if index in seen:
            break
        seen.add(index)
        pieces.append(able[index] if at % 2 == 0 else _reversed(able[index]))
        out = at ^ 1
        if out not in partner:
            return None
        at, gap = partner[out]
        x, y = (ends[out] + ends[at]) / 2.0
        gaps.append(((float(x), float(y)), gap))
    if at // 2 != start:
        return None
    total = sum(bulge.length(p.xyb, closed=False) for p in pieces)
    if sum(g for _, g in gaps) > GAPS_SHARE * total:
        return None
    # the gap is bridged by a straight line from end to end
    rows = np.vstack([p.xyb for p in pieces])
    handles = tuple(h for p in pieces for h in (*p.handles, ""))
    layers = tuple(sorted({n for p in pieces for n in p.layers}))
    return Chain(rows, handles, layers, closed=True, gaps=tuple(gaps), pieces=sum(p.pieces for p in pieces)), seen


def _is_stroke(c: Chain) -> bool:
    """Tell whether a chain hardly leaves the straight line between its ends."""
    span = float(np.hypot(*(c.xyb[-1, :2] - c.xyb[0, :2])))
    return span > 0.9 * bulge.length(c.xyb, closed=False)


def _reversed(c: Chain) -> Chain:
    return Chain(bulge.reverse(c.xyb, closed=False), c.handles[::-1], c.layers, c.closed, c.gaps, c.pieces)


def _ring_of(c: Curve) -> Chain:
    return Chain(c.xyb, (c.handle,) * len(c.xyb), (c.layer,), closed=True)
