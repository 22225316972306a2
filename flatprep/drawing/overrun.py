"""Outlines whose lines run past their corners, stop on each other or overlap, so that no chain of ends closes."""

from collections.abc import Sequence
from itertools import groupby

import numpy as np
from shapely import STRtree, is_simple

from flatprep.drawing.chain import Chain
from flatprep.drawing.doubles import lines_of, overlaps
from flatprep.drawing.ends import groups
from flatprep.drawing.planar import regions_of_net
from flatprep.geom.bulge import length
from flatprep.model.drawing import Curve, Fault

OUTLINE_SHARE = 0.9
"""Lines are an outline where so much of their length bounds what they enclose; less of it are hatches and leaders."""
MOST_TOUCHES = 4
"""Lines of an outline touch two others, and a few more where they run past; those of a net touch many."""
MOST_BOXES = 64
"""Where each line's box meets so many others, it is not asked which lines touch: that takes long, and it is a net."""
SAME_MM = 0.01
"""Ends that miss each other by so little miss nothing."""


def without_overruns(loose: Sequence[Chain], join_mm: float) -> tuple[list[Chain], list[Chain], list[Fault]]:
    """Take the outlines out of open chains that touch, cross or overlap each other.

    Returns
    -------
    rings, rest, faults
        Outlines, the chains that are none, and what was wrong with each outline's lines.
    """
    rings: list[Chain] = []
    rest: list[Chain] = []
    faults: list[Fault] = []
    for group, touches in _touching(loose, join_mm):
        alone = len(group) == 1 and is_simple(lines_of([group[0].xyb])[0])
        if alone or touches > MOST_TOUCHES * len(group):
            rest += group
            continue
        curves = [piece for chain in group for piece in _curves(chain)]
        found = regions_of_net(curves, join_mm)
        outer = sum(length(r.xyb, closed=True) for r in found.rings)
        total = sum(length(c.xyb, closed=False) for c in curves)
        if found.inner or found.rest or outer < OUTLINE_SHARE * total:
            rest += group
            continue
        rings += found.rings
        faults += _told(curves, outer, total)
    return rings, rest, faults


def _touching(chains: Sequence[Chain], reach_mm: float) -> list[tuple[list[Chain], int]]:
    """Chains that hang together by points where they come within `reach_mm`, and at how many pairs they do."""
    if len(chains) < 2:
        return [([c], 0) for c in chains]
    lines = lines_of([c.xyb for c in chains])
    tree = STRtree(lines)
    if tree.query(lines).shape[1] > MOST_BOXES * len(chains):
        return [([c], 0) for c in chains]
    a, b = tree.query(lines, predicate="dwithin", distance=reach_mm)
    own = groups(len(chains), a, b)
    order = np.argsort(own, kind="stable")
    members = np.split(order, np.flatnonzero(np.diff(own[order])) + 1)
    pairs = np.bincount(own[a[a < b]], minlength=len(members))
    return [([chains[k] for k in m.tolist()], int(n)) for m, n in zip(members, pairs, strict=True)]


def _curves(chain: Chain) -> list[Curve]:
    """Return the pieces of a chain that were drawn as one entity each."""
    out = []
    for handle, run in groupby(range(len(chain.handles)), key=lambda k: chain.handles[k]):
        rows = list(run)
        xyb = chain.xyb[rows[0] : rows[-1] + 2].copy()
        xyb[-1, 2] = 0.0
        out.append(Curve(xyb, closed=False, layer=chain.layers[0], handle=handle))
    return out


def _told(curves: Sequence[Curve], outer_mm: float, total_mm: float) -> list[Fault]:
    twice, shared_mm = overlaps(curves)
    past_mm = total_mm - shared_mm - outer_mm
    if twice and past_mm < SAME_MM:
        return twice
    handles = tuple(dict.fromkeys(c.handle for c in curves if c.handle))
    what = "lines of the outline stop on each other or run past its corners: the outline alone is taken"
    x, y = curves[0].xyb[0, :2].tolist()
    return [*twice, Fault("open-contour", (x, y), max(0.0, past_mm), handles, what, closed=True)]
