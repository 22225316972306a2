"""Open curves chained into closed contours where just two ends meet at every point."""

from collections import defaultdict
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from flatprep.drawing.ends import SAME_POINT_MM, Ints, dangling_pairs, node_ids
from flatprep.geom import bulge
from flatprep.geom.bulge import Floats
from flatprep.model.drawing import Contour, Curve


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
    ends = np.array([p for c in open_curves for p in (c.xyb[0, :2], c.xyb[-1, :2])])
    nodes = node_ids(ends, lambda i: bulge.length(open_curves[i].xyb, closed=False), join_mm)
    degree = np.bincount(nodes)
    loose: list[Chain] = []
    branched: list[Curve] = []
    for members in _components(nodes):
        if max(degree[nodes[2 * i]] for i in members) > 2 or max(degree[nodes[2 * i + 1]] for i in members) > 2:
            branched += [open_curves[i] for i in members]
            continue
        walked = _walk(members, open_curves, nodes)
        (rings if walked.closed else loose).append(walked)
    return Chained(tuple(rings), tuple(loose), tuple(branched), _joined(ends, nodes))


def bridge(chains: Sequence[Chain], reach_mm: float) -> tuple[list[Chain], list[Chain]]:
    """Close open chains over gaps up to `reach_mm`, nearest ends first.

    Only chains that are no single straight stroke take part, and a ring is taken only when its gaps are a small
    part of it (5 %): bend lines that lie side by side are no outline.

    Returns
    -------
    closed, rest
    """
    rest = [c for c in chains if _is_stroke(c)]
    able = [c for c in chains if not _is_stroke(c)]
    if not able:
        return [], rest
    ends = np.array([p for c in able for p in (c.xyb[0, :2], c.xyb[-1, :2])])
    pairs = dangling_pairs(ends, np.arange(len(ends)), reach_mm)
    partner = {i: (j, gap) for i, j, gap in pairs} | {j: (i, gap) for i, j, gap in pairs}
    closed, used = [], set()
    for start in range(len(able)):
        if start in used:
            continue
        ring = _follow(start, able, ends, partner)
        if ring is not None:
            closed.append(ring[0])
            used |= ring[1]
    return closed, rest + [c for i, c in enumerate(able) if i not in used]


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
    if sum(g for _, g in gaps) > 0.05 * total:
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


def _components(nodes: Ints) -> list[list[int]]:
    """Curves that hang together, each list ascending, in order of their first curve."""
    at_node = defaultdict(list)
    for end, node in enumerate(nodes.tolist()):
        at_node[node].append(end // 2)
    seen: set[int] = set()
    out = []
    for first in range(len(nodes) // 2):
        if first in seen:
            continue
        seen.add(first)
        members, todo = [], [first]
        while todo:
            i = todo.pop()
            members.append(i)
            for end in (2 * i, 2 * i + 1):
                fresh = [j for j in at_node[int(nodes[end])] if j not in seen]
                seen.update(fresh)
                todo += fresh
        out.append(sorted(members))
    return out


def _walk(members: list[int], curves: Sequence[Curve], nodes: Ints) -> Chain:
    """Run through a component in which no node has more than two ends."""
    at_node = defaultdict(list)
    for i in members:
        at_node[int(nodes[2 * i])].append(2 * i)
        at_node[int(nodes[2 * i + 1])].append(2 * i + 1)
    dangling = [ends[0] for _, ends in sorted(at_node.items()) if len(ends) == 1]
    at = dangling[0] if dangling else 2 * members[0]
    pieces: list[Floats] = []
    handles: list[str] = []
    layers: set[str] = set()
    left = set(members)
    while at // 2 in left:
        i = at // 2
        left.remove(i)
        xyb = curves[i].xyb if at % 2 == 0 else bulge.reverse(curves[i].xyb, closed=False)
        pieces.append(xyb)
        handles += [curves[i].handle] * (len(xyb) - 1)
        layers.add(curves[i].layer)
        onward = [e for e in at_node[int(nodes[at ^ 1])] if e // 2 in left]
        if not onward:
            break
        at = onward[0]
    closed = not dangling
    return Chain(_end_to_end(pieces, closed=closed), tuple(handles), tuple(sorted(layers)), closed, (), len(members))


def _end_to_end(pieces: Sequence[Floats], *, closed: bool) -> Floats:
    """One polyline out of pieces that follow each other; they meet midway, whichever of them was drawn first."""
    body = np.vstack([p[:-1] for p in pieces] + ([] if closed else [pieces[-1][-1:]]))
    first = np.cumsum([0, *(len(p) - 1 for p in pieces[:-1])])
    ends = np.array([p[-1, :2] for p in pieces])
    if closed:
        body[first, :2] = (body[first, :2] + np.roll(ends, 1, axis=0)) / 2.0
    else:
        body[first[1:], :2] = (body[first[1:], :2] + ends[:-1]) / 2.0
    return body
