"""Whether a piece that is already cut can become one of the new revision, and what is to be done to it."""

from collections.abc import Iterator, Sequence

from flatprep.compare.align import material
from flatprep.compare.regions import regions
from flatprep.compare.values import HoleChange, HolePair, Region, Rework, Step, Task
from flatprep.geom.bulge import Similarity
from flatprep.model.drawing import Part

TOLERANCE_MM = 0.05
"""Material missing by no more than this is no loss: no cut edge is truer (common practice)."""


def rework(old: Part, laid: Part, motion: Similarity, holes: Sequence[HolePair], edges: Sequence[Region]) -> Rework:
    """Judge one way of laying the new part on the old one.

    Parameters
    ----------
    old, laid
        Both in the old one's coordinates.
    motion
        How the new part came there.
    holes, edges
        What changed, in the same coordinates.
    """
    missing = tuple(r for r in regions(material(old), material(laid), TOLERANCE_MM) if r.added)
    steps = () if missing else tuple(_steps(holes, edges))
    return Rework(motion, missing, steps)


def _steps(holes: Sequence[HolePair], edges: Sequence[Region]) -> Iterator[Step]:
    """Holes first: they are measured from edges that are still whole."""
    for pair in holes:
        new, old = pair.new, pair.old
        if new is None or pair.change is HoleChange.SAME:
            continue
        size, before = new.diameter_mm, old.diameter_mm if old else None
        if size is None:
            yield Step(Task.CUT_HOLE, new.at, new.width_mm, length_mm=new.length_mm)
        elif old is None:
            yield Step(Task.DRILL, new.at, size)
        else:
            yield Step(Task.OPEN_UP, new.at, size, before)
    for region in edges:
        if not region.added:
            yield Step(Task.RECUT, region.at, region.depth_mm, length_mm=region.length_mm)
