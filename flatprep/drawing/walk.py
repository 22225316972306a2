"""Walks along open curves where no more than two ends meet, and the polylines that they make."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from flatprep.drawing.ends import Ints
from flatprep.geom.bulge import Floats


@dataclass(frozen=True, slots=True)
class Walk:
    """Curves in the order in which they follow each other.

    Attributes
    ----------
    entries : list of int
        The ends that they are entered by: end 2 i is the start of curve i, end 2 i + 1 its end.
    closed : bool
        Whether the last one leads to the first.
    """

    entries: list[int]
    closed: bool

    @property
    def curves(self) -> list[int]:
        """Numbers of the curves."""
        return [end // 2 for end in self.entries]


def partners(nodes: Ints) -> list[int]:
    """Tell for each end which other end it meets, -1 for none; ends that have company of more than one meet none."""
    order = np.argsort(nodes, kind="stable")
    first = np.flatnonzero(np.diff(nodes[order], prepend=-1))[np.bincount(nodes) == 2]
    out = np.full(len(nodes), -1)
    out[order[first]], out[order[first + 1]] = order[first + 1], order[first]
    found: list[int] = out.tolist()
    return found


def walks(curves: Sequence[int], nodes: Ints) -> Iterator[Walk]:
    """Walk along curves (ascending numbers) none of whose ends meets more than one other.

    A ring begins with its first curve, run forwards; an open walk at the one of its two ends whose node has the lower
    number.
    """
    meets = partners(nodes)
    seen: set[int] = set()
    for first in curves:
        if first in seen:
            continue
        entries = list(_onward(2 * first, meets))
        closed = meets[entries[-1] ^ 1] == 2 * first
        if not closed:
            before = [end ^ 1 for end in _onward(2 * first + 1, meets)][:0:-1]
            entries = before + entries
            if nodes[entries[0]] > nodes[entries[-1] ^ 1]:
                entries = [end ^ 1 for end in reversed(entries)]
        seen.update(end // 2 for end in entries)
        yield Walk(entries, closed)


def _onward(start: int, meets: Sequence[int]) -> Iterator[int]:
    """Entries from one on, until nothing follows or the first comes again."""
    at = start
    while True:
        yield at
        at = meets[at ^ 1]
        if at in (-1, start):
            return


@dataclass(frozen=True, slots=True, eq=False)
class Laid:
    """Open polylines one after the other: `rows` (m, 3), and where each begins and ends, shape (n,) each."""

    rows: Floats
    first: Ints
    last: Ints

    @classmethod
    def of(cls, polylines: Sequence[Floats]) -> "Laid":
        """Lay them one after the other."""
        sizes = np.array([len(xyb) for xyb in polylines])
        last = np.cumsum(sizes) - 1
        return cls(np.concatenate(polylines), last - sizes + 1, last)

    @property
    def ends(self) -> Floats:
        """Start and end of each in turn, shape (2 n, 2)."""
        return self.rows[np.stack([self.first, self.last], axis=1).ravel(), :2]

    def along(self, ways: Sequence[Walk]) -> list[Floats]:
        """Return one polyline for each walk; curves meet midway, whichever of them was drawn first."""
        if not ways:
            return []
        entries = np.array([end for way in ways for end in way.entries], dtype=np.int64)
        curve, back = entries // 2, entries % 2
        first, last = self.first[curve], self.last[curve]
        counts = last - first
        piece = np.repeat(np.arange(len(entries)), counts)
        begin = np.cumsum(counts) - counts
        step = np.arange(len(piece)) - begin[piece]
        row = np.where(back[piece], last[piece] - step, first[piece] + step)
        out = self.rows[row]
        # run backwards a segment's bulge stands at its other vertex, and turns over
        out[:, 2] = np.where(back[piece], -self.rows[row - back[piece], 2], out[:, 2])
        exits = self.rows[np.where(back, first, last)]
        exits[back == 1, 2] = 0.0
        sizes = np.array([len(way.entries) for way in ways])
        heads = np.cumsum(sizes) - sizes
        before = np.arange(len(entries)) - 1
        before[heads] = heads + sizes - 1
        met = np.ones(len(entries), dtype=bool)
        met[heads] = [way.closed for way in ways]
        out[begin[met], :2] = (out[begin[met], :2] + exits[before[met], :2]) / 2.0
        pieces = np.split(out, begin[heads[1:]])
        tails = exits[heads + sizes - 1]
        return [
            p if way.closed else np.vstack([p, tails[k]]) for k, (way, p) in enumerate(zip(ways, pieces, strict=True))
        ]
