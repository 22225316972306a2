"""From cut curves to closed contours: tidy, chain, bridge, and the planar graph where a chain cannot do it."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from flatprep.base.tolerances import Tolerances
from flatprep.drawing.chain import Chain, Chained, bridge, chain
from flatprep.drawing.crossing import Crossings, crossings
from flatprep.drawing.doubles import overlaps, without_double_rings, without_overlapped
from flatprep.drawing.overrun import without_overruns
from flatprep.drawing.planar import even_odd, regions_of_net, regions_of_rings
from flatprep.drawing.tidy import tidy
from flatprep.drawing.tree import CHORD_MM, Polygons, polygons_of
from flatprep.geom.bulge import length
from flatprep.model.drawing import Curve, Fault

BRIDGE_MM = 2.0
"""A gap up to this is measured as if it were closed, and is still an error: the part is not lost."""
NOTED_GAP_MM = 0.1
"""A gap up to this is closed with a note (common practice); `join_gap` and less in silence."""


@dataclass(frozen=True, slots=True, eq=False)
class Outlines:
    """Closed contours and what is left.

    Attributes
    ----------
    rings : tuple of Chain
    shapes : ndarray of Polygon
        One a ring, chords within `CHORD_MM`.
    inner : tuple of Curve
        Shared edges that lie inside an outline.
    loose : tuple of Curve
        Cut lines that close nothing.
    crossing : tuple of Chain
        Contours that cross themselves, as drawn; `rings` hold what they enclose.
    faults : tuple of Fault
    """

    rings: tuple[Chain, ...]
    shapes: Polygons
    inner: tuple[Curve, ...]
    loose: tuple[Curve, ...]
    faults: tuple[Fault, ...]
    crossing: tuple[Chain, ...] = ()


def outlines(curves: Sequence[Curve], tol: Tolerances) -> Outlines:
    """Make closed contours of the lines that are to be cut."""
    single, faults = tidy(curves, tol)
    chained = chain(single, tol.join_mm)
    faults += _told_joins(chained)
    rings, loose = list(chained.closed), list(chained.open)
    inner: list[Curve] = []
    if chained.branched:
        net = regions_of_net(chained.branched, tol.join_mm)
        rings += net.rings
        inner += net.inner
        loose += [Chain(c.xyb, (c.handle,) * (len(c.xyb) - 1), (c.layer,), closed=False) for c in net.rest]
        faults += [*_told_inner(net.inner), *overlaps(chained.branched)[0]]
    loose, overlapped = without_overlapped(loose, rings, tol.same_mm)
    faults += overlapped
    overrun, loose, told = without_overruns(loose, tol.join_mm)
    faults += told
    bridged, loose = bridge(loose, BRIDGE_MM)
    rings += [*overrun, *bridged]
    faults += [_gap(at, gap, ring) for ring in bridged for at, gap in ring.gaps]
    shapes = polygons_of([r.xyb for r in rings], CHORD_MM)
    single_rings, doubles = without_double_rings(rings, shapes, max(tol.same_mm, tol.join_mm))
    rings, shapes = [rings[k] for k in single_rings], shapes[single_rings]
    crossed = crossings(rings, shapes)
    crossing = tuple(rings[i] for i in sorted(crossed.selfish))
    rings, shapes = _sound(rings, shapes, crossed)
    faults += [*doubles, *crossed.faults]
    faults += [_open(c) for c in loose]
    left = tuple(Curve(c.xyb, closed=False, layer=c.layers[0], handle=c.handles[0]) for c in loose)
    return Outlines(tuple(rings), shapes, tuple(inner), left, tuple(faults), crossing)


def _sound(rings: Sequence[Chain], shapes: Polygons, found: Crossings) -> tuple[list[Chain], Polygons]:
    """Contours that neither cross themselves nor share edges."""
    if not found.selfish and not found.clusters:
        return list(rings), shapes
    unsound = found.selfish | found.touching
    out = [r for i, r in enumerate(rings) if i not in unsound]
    for i in sorted(found.selfish):
        out += even_odd(rings[i])
    for cluster in found.clusters:
        out += regions_of_rings([rings[i] for i in cluster])
    return out, polygons_of([r.xyb for r in out], CHORD_MM)


def _gap(at: tuple[float, float], gap: float, ring: Chain) -> Fault:
    handles = tuple(dict.fromkeys(h for h in ring.handles if h))
    what = "a small gap, closed" if gap <= NOTED_GAP_MM else "the outline does not close"
    return Fault("open-contour", at, gap, handles, what, closed=True)


def _open(c: Chain) -> Fault:
    a, z = c.xyb[0, :2], c.xyb[-1, :2]
    gap = float(np.hypot(*(z - a)))
    x, y = (a + z) / 2.0
    handles = tuple(dict.fromkeys(h for h in c.handles if h))
    ends = f"its ends are at ({a[0]:.2f}, {a[1]:.2f}) and ({z[0]:.2f}, {z[1]:.2f})"
    stroke = gap > 0.9 * length(c.xyb, closed=False)
    detail = (
        f"a single line that encloses nothing; {ends}" if stroke else f"a chain of lines that does not close; {ends}"
    )
    return Fault("open-contour", (float(x), float(y)), gap, handles, detail)


def _told_joins(chained: Chained) -> list[Fault]:
    if not chained.joined:
        return []
    at, gap = max(chained.joined, key=lambda place: place[1])
    count = len(chained.joined)
    what = "a small gap, closed" if count == 1 else f"{count} small gaps, closed; the widest one"
    return [Fault("open-contour", at, gap, (), what, tuple(at for at, _ in chained.joined), closed=True)]


def _told_inner(inner: Sequence[Curve]) -> list[Fault]:
    if not inner:
        return []
    handles = tuple(c.handle for c in inner)
    x, y = inner[0].xyb[:, :2].mean(axis=0)
    detail = f"{len(inner)} lines inside an outline branch off it: taken as marks, not cut"
    return [Fault("open-contour", (float(x), float(y)), None, handles, detail)]
