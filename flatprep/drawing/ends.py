"""Which ends of open curves are one point."""

from collections.abc import Callable, Iterable

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
    groups = _Groups(len(ends))
    for i, j, _ in _near_pairs(ends, min(SAME_POINT_MM, join_mm)):
        groups.join(i, j)
    _join_dangling(groups, ends, length_mm, join_mm)
    return groups.numbered()


def dangling_pairs(ends: Floats, dangling: Ints, reach_mm: float) -> list[tuple[int, int, float]]:
    """Pairs of dangling ends (indices into `ends`) within `reach_mm`, nearest first, each end once."""
    taken: set[int] = set()
    pairs = []
    for a, b, gap in _near_pairs(ends[dangling], reach_mm):
        i, j = int(dangling[a]), int(dangling[b])
        if i not in taken and j not in taken:
            taken |= {i, j}
            pairs.append((i, j, gap))
    return pairs


def _join_dangling(groups: "_Groups", ends: Floats, length_mm: Callable[[int], float], join_mm: float) -> None:
    ids = groups.numbered()
    alone = np.flatnonzero(np.bincount(ids)[ids] == 1)
    for i, j, gap in dangling_pairs(ends, alone, join_mm):
        stray_dash = i // 2 == j // 2 and length_mm(i // 2) < 4.0 * gap
        if not stray_dash:
            groups.join(i, j)


def _near_pairs(xy: Floats, reach: float) -> Iterable[tuple[int, int, float]]:
    if len(xy) < 2:
        return []
    shapes = points(xy)
    a, b = STRtree(shapes).query(shapes, predicate="dwithin", distance=reach)
    first = a < b
    a, b = a[first], b[first]
    gap = np.hypot(*(xy[a] - xy[b]).T)
    order = np.lexsort((b, a, gap))
    return list(zip(a[order].tolist(), b[order].tolist(), gap[order].tolist(), strict=True))


class _Groups:
    """Disjoint sets."""

    def __init__(self, size: int) -> None:
        self._parent = list(range(size))

    def root(self, i: int) -> int:
        while self._parent[i] != i:
            self._parent[i] = self._parent[self._parent[i]]
            i = self._parent[i]
        return i

    def join(self, i: int, j: int) -> None:
        a, b = self.root(i), self.root(j)
        self._parent[max(a, b)] = min(a, b)

    def numbered(self) -> Ints:
        roots = np.array([self.root(i) for i in range(len(self._parent))], dtype=np.int64)
        return np.unique(roots, return_inverse=True)[1].astype(np.int64)
