"""Which ends of open curves are one point."""

from collections.abc import Callable

import numpy as np
import numpy.typing as npt
from shapely import STRtree, points

from flatprep.geom.bulge import Floats

Ints = npt.NDArray[np.int64]
SAME_POINT_MM = 1e-3
"""Ends this near are one point whatever hangs on them: below what any program writes on purpose."""


def node_ids(ends: Floats, length_mm: Callable[[int], float], join_mm: float) -> Ints:
    """Give ends that are one point the same number.

    Points where two or more ends meet are taken as they are; only ends that dangle alone look further, up to
    `join_mm`, nearest pairs first, so that a small true segment is never swallowed.

    Parameters
    ----------
    ends : ndarray, shape (n, 2)
        Ends 2 i and 2 i + 1 belong to curve i.
    length_mm
        Curve index -> its length.
    join_mm
        Largest gap that is closed.

    Returns
    -------
    ndarray, shape (n,)
        Node of each end, numbered from 0.
    """
    a, b, _ = _near_pairs(ends, min(SAME_POINT_MM, join_mm))
    nodes = groups(len(ends), a, b)
    alone = np.flatnonzero(np.bincount(nodes)[nodes] == 1)
    joined = [
        (i, j)
        for i, j, gap in dangling_pairs(ends, alone, join_mm)
        if i // 2 != j // 2 or length_mm(i // 2) >= 4.0 * gap  # else it is a stray dash
    ]
    if not joined:
        return nodes
    i, j = np.array(joined, dtype=np.int64).T
    return groups(len(ends), np.concatenate([a, i]), np.concatenate([b, j]))


def dangling_pairs(ends: Floats, dangling: Ints, reach_mm: float) -> list[tuple[int, int, float]]:
    """Pairs of dangling ends (indices into `ends`) within `reach_mm`, nearest first, each end once."""
    taken: set[int] = set()
    pairs = []
    a, b, gaps = _near_pairs(ends[dangling], reach_mm)
    for i, j, gap in zip(dangling[a].tolist(), dangling[b].tolist(), gaps.tolist(), strict=True):
        if i not in taken and j not in taken:
            taken |= {i, j}
            pairs.append((i, j, gap))
    return pairs


def _near_pairs(xy: Floats, reach: float) -> tuple[Ints, Ints, Floats]:
    """Pairs of points within `reach`, the nearest first, with their distances."""
    if len(xy) < 2:
        return np.empty(0, dtype=np.int64), np.empty(0, dtype=np.int64), np.empty(0)
    shapes = points(xy)
    a, b = STRtree(shapes).query(shapes, predicate="dwithin", distance=reach)
    first = a < b
    a, b = a[first], b[first]
    gap = np.hypot(*(xy[a] - xy[b]).T)
    order = np.lexsort((b, a, gap))
    return a[order], b[order], gap[order]


def groups(size: int, a: Ints, b: Ints) -> Ints:
    """Give what hangs together by the pairs a, b the same number, in order of the first members."""
    least = np.arange(size)
    while True:
        low = np.minimum(least[a], least[b])
        if np.array_equal(least[a], low) and np.array_equal(least[b], low):
            return np.unique(least, return_inverse=True)[1].astype(np.int64)
        np.minimum.at(least, a, low)
        np.minimum.at(least, b, low)
        least = least[least]
