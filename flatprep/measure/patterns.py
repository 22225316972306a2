"""Hole patterns that several parts share, and those that nearly agree."""

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import combinations

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.measure.part import MeasuredPart

SAME_MM = 0.05
"""Patterns whose distances agree within this are the same."""
NEARLY_MM = 1.0
"""Patterns whose distances differ by no more than this were meant to agree."""
MOST_HOLES = 12
"""Larger groups of equal holes are grilles and rows, not bolt patterns."""
SAME_DIAMETER_MM = 0.05


@dataclass(frozen=True, slots=True)
class Pattern:
    """Equal round holes of a part.

    Attributes
    ----------
    part : str
    diameter_mm : float
    at : tuple of (float, float)
        Their centres, mm.
    distances_mm : tuple of float
        Between every two of them, rising.
    """

    part: str
    diameter_mm: float
    at: tuple[tuple[float, float], ...]
    distances_mm: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class Shared:
    """Two patterns of different parts with as many holes.

    Attributes
    ----------
    differs_mm : float
        Largest difference between their distances; 0 to `SAME_MM` for congruent ones.
    distances_mm : (float, float)
        The two distances that differ most: 40.0 here against 40.5 there.
    """

    first: Pattern
    second: Pattern
    differs_mm: float
    distances_mm: tuple[float, float]

    @property
    def congruent(self) -> bool:
        """Whether bolts go through both."""
        return self.differs_mm <= SAME_MM


def patterns_of(part: MeasuredPart) -> tuple[Pattern, ...]:
    """Return the groups of two equal round holes or more, the smallest diameter first."""
    groups: list[list[tuple[float, tuple[float, float]]]] = []
    for diameter, at in sorted((h.diameter_mm, h.at) for h in part.holes if h.diameter_mm is not None):
        if groups and diameter - groups[-1][0][0] <= SAME_DIAMETER_MM:
            groups[-1].append((diameter, at))
        else:
            groups.append([(diameter, at)])
    return tuple(
        Pattern(part.name, group[0][0], places, tuple(_distances(places)))
        for group in groups
        if 2 <= len(group) <= MOST_HOLES
        for places in [tuple(at for _, at in group)]
    )


def shared_patterns(parts: Sequence[MeasuredPart]) -> tuple[Shared, ...]:
    """Compare the patterns of different parts: those that agree, and the near misses, the latter first.

    Patterns whose distances differ by more than `NEARLY_MM` have nothing to do with each other and are left out.
    """
    by_count: dict[int, list[Pattern]] = {}
    for part in parts:
        for pattern in patterns_of(part):
            by_count.setdefault(len(pattern.at), []).append(pattern)
    out = [
        shared
        for patterns in by_count.values()
        for one, two in combinations(patterns, 2)
        if one.part != two.part and (shared := _compared(one, two)) is not None
    ]
    return tuple(sorted(out, key=lambda s: (s.congruent, -s.differs_mm, s.first.part, s.second.part)))


def _compared(one: Pattern, two: Pattern) -> Shared | None:
    off = np.abs(np.subtract(one.distances_mm, two.distances_mm))
    k = int(np.argmax(off))
    if off[k] > NEARLY_MM:
        return None
    return Shared(one, two, float(off[k]), (one.distances_mm[k], two.distances_mm[k]))


def _distances(places: Sequence[tuple[float, float]]) -> list[float]:
    xy: Floats = np.array(places)
    i, j = np.triu_indices(len(xy), 1)
    return sorted(np.hypot(*(xy[i] - xy[j]).T).tolist())
