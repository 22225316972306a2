"""Two revisions of a drawing held against each other."""

from collections.abc import Iterator, Sequence
from dataclasses import replace

import numpy as np
import shapely

from flatprep.compare.align import IN_PLACE, material, motions, moved
from flatprep.compare.holes import pair_holes
from flatprep.compare.regions import regions
from flatprep.compare.rework import rework
from flatprep.compare.values import Comparison, Lines, PartChange
from flatprep.geom import bulge
from flatprep.geom.bulge import Similarity
from flatprep.geom.polygons import polygon, valid_polygon
from flatprep.measure.holes import recognise
from flatprep.model.drawing import Contour, Curve, Drawing, Part

EDGE_MM = 0.03
"""Edges nearer to each other than this are the same: three times the chord error of both."""
_SAME_LINE_MM = 0.02
_LEAST_LIKENESS = 0.3
_WAYS = 6
"""So many ways of laying the new part on the old one are tried for rework."""


def compare(old: Drawing, new: Drawing) -> Comparison:
    """Hold a new revision against an old one, part by part.

    Parts that overlap most in the drawing's coordinates are held against each other, then those most alike in size.
    """
    pairs = _paired(old.parts, new.parts)
    changes = tuple(compare_parts(old.parts[i], new.parts[j]) for i, j in pairs)
    held_old, held_new = {i for i, _ in pairs}, {j for _, j in pairs}
    return Comparison(
        old.file,
        new.file,
        old.units,
        new.units,
        changes,
        appeared=tuple(p for j, p in enumerate(new.parts) if j not in held_new),
        gone=tuple(p for i, p in enumerate(old.parts) if i not in held_old),
    )


def compare_parts(old: Part, new: Part) -> PartChange:
    """Hold one part against its new revision, wherever and however it lies in its drawing."""
    old_holes, new_holes = ([recognise(h) for h in p.holes] for p in (old, new))
    ways = motions(old, new, old_holes, new_holes)
    best = _change(old, new, ways[0])
    if best.rework.possible:
        return best
    for way in ways[1:_WAYS]:
        other = _change(old, new, way)
        if other.rework.possible:
            return replace(best, rework=other.rework)
    return best


def _change(old: Part, new: Part, motion: Similarity) -> PartChange:
    laid = lay(new, motion)
    holes = pair_holes([recognise(h) for h in old.holes], [recognise(h) for h in laid.holes])
    outlines = [valid_polygon(polygon(p.outer.xyb, (), chord_mm=EDGE_MM / 3.0)) for p in (old, laid)]
    edges = tuple(regions(outlines[0], outlines[1], EDGE_MM))
    return PartChange(
        old,
        new,
        motion,
        laid,
        holes,
        edges,
        bends=_lines(old.bends, laid.bends),
        marks=_lines(old.marks, laid.marks),
        rework=rework(old, laid, motion, holes, edges),
    )


def lay(part: Part, motion: Similarity) -> Part:
    """Return the part moved; contours turned over run the right way again."""
    if motion == IN_PLACE:
        return part

    def contour(c: Contour) -> Contour:
        xyb = motion.polyline(c.xyb)
        return replace(c, xyb=bulge.reverse(xyb, closed=True) if motion.mirrored else xyb)

    def curve(c: Curve) -> Curve:
        return replace(c, xyb=motion.polyline(c.xyb))

    return replace(
        part,
        outer=contour(part.outer),
        holes=tuple(contour(h) for h in part.holes),
        marks=tuple(curve(m) for m in part.marks),
        bends=tuple(curve(b) for b in part.bends),
    )


def _lines(old: Sequence[Curve], new: Sequence[Curve]) -> Lines:
    """Lines that came and went; those that lie on each other all along are the same."""
    before, after = list(old), list(new)
    for a in old:
        same = next((b for b in after if _on_each_other(a, b)), None)
        if same is not None:
            before = [c for c in before if c is not a]
            after = [c for c in after if c is not same]
    return Lines(tuple(after), tuple(before))


def _on_each_other(a: Curve, b: Curve) -> bool:
    one, two = (
        shapely.linestrings(bulge.points_along(c.xyb, closed=c.closed, chord_mm=_SAME_LINE_MM / 4.0)) for c in (a, b)
    )
    return bool(shapely.hausdorff_distance(one, two) <= _SAME_LINE_MM)


def _paired(old: Sequence[Part], new: Sequence[Part]) -> list[tuple[int, int]]:
    """Pairs of indices: parts that overlap most, then parts most alike."""
    if len(old) == 1 and len(new) == 1:
        return [(0, 0)]
    taken: list[tuple[int, int]] = []
    for scores in (list(_overlaps(old, new)), list(_likenesses(old, new))):
        for score, i, j in sorted(scores, key=lambda s: -s[0]):
            if score >= _LEAST_LIKENESS and all(i != a and j != b for a, b in taken):
                taken.append((i, j))
    return sorted(taken)


def _overlaps(old: Sequence[Part], new: Sequence[Part]) -> Iterator[tuple[float, int, int]]:
    """Share of the common area in the area of both together, for parts in the same coordinates."""
    before, after = [material(p) for p in old], [material(p) for p in new]
    for i, j in np.argwhere(shapely.intersects(np.array(before)[:, None], np.array(after)[None, :])).tolist():
        common = before[i].intersection(after[j]).area
        yield common / (before[i].area + after[j].area - common), i, j


def _likenesses(old: Sequence[Part], new: Sequence[Part]) -> Iterator[tuple[float, int, int]]:
    for i, a in enumerate(old):
        for j, b in enumerate(new):
            ratios = [
                min(x, y) / max(x, y)
                for x, y in ((a.area_mm2, b.area_mm2), (a.cut_length_mm, b.cut_length_mm), (a.pierces, b.pierces))
            ]
            yield float(np.prod(ratios)), i, j


__all__ = ["IN_PLACE", "compare", "compare_parts", "lay", "moved"]
