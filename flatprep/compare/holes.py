"""Holes of two revisions, paired: the same, moved, another size, another shape, come or gone."""

from collections.abc import Callable, Sequence
from math import hypot

import numpy as np
import shapely

from flatprep.compare.values import HoleChange, HolePair
from flatprep.geom.polygons import ring
from flatprep.measure.holes import Hole

SAME_MM = 0.02
"""Holes whose edges are nowhere further apart are the same."""
_REACH_MM = 20.0
_REACH_WIDTHS = 5.0
_Judge = Callable[[Hole, Hole], float | None]


def pair_holes(old: Sequence[Hole], new: Sequence[Hole]) -> tuple[HolePair, ...]:
    """Pair the holes of two revisions that lie in the same coordinates.

    Returns
    -------
    tuple of HolePair
        Every hole of either, once: what did not change first.
    """
    before, after = list(old), list(new)
    pairs: list[HolePair] = []
    for judge, change in (
        (_equal, HoleChange.SAME),
        (_in_place, HoleChange.RESIZED),
        (_moved, HoleChange.MOVED),
        (_touching, HoleChange.RESIZED),
    ):
        for a, b in _nearest(before, after, judge):
            before.remove(a)
            after.remove(b)
            kind = HoleChange.RESHAPED if change is HoleChange.RESIZED and a.shape is not b.shape else change
            pairs.append(HolePair(kind, a, b))
    pairs += [HolePair(HoleChange.APPEARED, None, b) for b in after]
    pairs += [HolePair(HoleChange.GONE, a, None) for a in before]
    return tuple(pairs)


def _nearest(old: Sequence[Hole], new: Sequence[Hole], judge: _Judge) -> list[tuple[Hole, Hole]]:
    """Pairs that the judge accepts, the least distance first, each hole once."""
    if not old or not new:
        return []
    places = shapely.points(np.array([h.at for h in new]))
    tree = shapely.STRtree(places)
    found = []
    for k, a in enumerate(old):
        near = tree.query(shapely.Point(a.at), predicate="dwithin", distance=_reach(a))
        for m in near.tolist():
            far = judge(a, new[m])
            if far is not None:
                found.append((far, k, m))
    used_old: set[int] = set()
    used_new: set[int] = set()
    out = []
    for _, k, m in sorted(found):
        if k not in used_old and m not in used_new:
            used_old.add(k)
            used_new.add(m)
            out.append((old[k], new[m]))
    return out


def _reach(hole: Hole) -> float:
    return max(_REACH_MM, _REACH_WIDTHS * hole.length_mm)


def _distance(a: Hole, b: Hole) -> float:
    return hypot(a.at[0] - b.at[0], a.at[1] - b.at[1])


def _alike(a: Hole, b: Hole) -> bool:
    return a.shape is b.shape and max(abs(a.width_mm - b.width_mm), abs(a.length_mm - b.length_mm)) <= SAME_MM


def _apart(a: Hole, b: Hole, shift: tuple[float, float] = (0.0, 0.0)) -> float:
    """Largest distance between the edges, b moved by `shift`."""
    one = shapely.LinearRing(ring(a.exact, SAME_MM / 8.0))
    two = shapely.LinearRing(ring(b.exact, SAME_MM / 8.0) + np.array(shift))
    return float(shapely.hausdorff_distance(one, two))


def _equal(a: Hole, b: Hole) -> float | None:
    # what a hole is called may hang on a rounded figure; where its edge runs does not
    far = _distance(a, b)
    near = far <= 2.0 * SAME_MM and abs(a.width_mm - b.width_mm) <= SAME_MM
    return far if near and _apart(a, b) <= SAME_MM else None


def _in_place(a: Hole, b: Hole) -> float | None:
    far = _distance(a, b)
    return far if far <= 2.5 * SAME_MM and not (_alike(a, b) and a.diameter_mm is not None) else None


def _moved(a: Hole, b: Hole) -> float | None:
    far = _distance(a, b)
    if not _alike(a, b):
        return None
    shift = (a.at[0] - b.at[0], a.at[1] - b.at[1])
    return far if a.diameter_mm is not None or _apart(a, b, shift) <= 2.0 * SAME_MM else None


def _touching(a: Hole, b: Hole) -> float | None:
    far = _distance(a, b)
    return far if far < (a.width_mm + b.width_mm) / 2.0 else None
