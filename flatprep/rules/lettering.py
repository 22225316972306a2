"""Letters cut out as outlines: what is wrong with a word is told once a rule, not for each letter."""

from collections import Counter
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass, replace
from itertools import pairwise

import shapely

from flatprep.geom.bulge import points_along
from flatprep.measure.holes import Hole, HoleShape
from flatprep.measure.part import MeasuredPart
from flatprep.model.finding import Finding, Severity

LEAST_LETTERS = 3
MOST_TALL_MM = 200.0
ALIKE = 3.0
"""The tallest letter of a word is no more than so many times as tall as the smallest."""
NEAR = 0.6
"""Letters of a word are no further apart than this share of their height."""
SAME = 0.03
"""Areas that differ by no more than this share are of one shape."""
HOLLOW, LEAST_HOLLOW = 0.85, 2
"""Letters that fill less of their hull, and how many of those a word has at least."""
ROOM = 0.3
"""Dots and accents lie within this share of the height around the letters."""
CHORD_MM = 0.05
_HANDLES = 20
_LOUDNESS = {Severity.ERROR: 0, Severity.WARNING: 1, Severity.NOTE: 2}


@dataclass(frozen=True, slots=True)
class Word:
    """Holes of a part that are letters beside each other; `region` is the hull around them."""

    letters: int
    region: shapely.Geometry


def gathered(found: Iterable[Finding], parts: Sequence[MeasuredPart]) -> Iterator[Finding]:
    """Pass findings on; those of one rule in one word become the worst of them, which says how many they are."""
    every = list(found)
    repeated = {rule for rule, times in Counter(f.rule for f in every if f.at is not None).items() if times > 1}
    words = [word for part in parts for word in words_of(part)] if repeated else []
    if not words:
        yield from every
        return
    groups: dict[tuple[str, int], list[Finding]] = {}
    for finding in every:
        word = _word_at(finding, words) if finding.rule in repeated else None
        if word is None:
            groups[(finding.rule, -1 - len(groups))] = [finding]
        else:
            groups.setdefault((finding.rule, word), []).append(finding)
    for (_, word), group in groups.items():
        yield group[0] if len(group) == 1 else _one(group, words[word])


def _word_at(finding: Finding, words: Sequence[Word]) -> int | None:
    if finding.at is None or finding.severity is Severity.NOTE:
        return None
    place = shapely.Point(finding.at)
    return next((k for k, word in enumerate(words) if word.region.covers(place)), None)


def _one(group: Sequence[Finding], word: Word) -> Finding:
    worst = min(group, key=lambda f: (_LOUDNESS[f.severity], f.measured if f.measured is not None else 0.0))
    handles = tuple(dict.fromkeys(h for f in group for h in f.handles))[:_HANDLES]
    message = f"{len(group)} places in this lettering of {word.letters} letters; the worst: {worst.message}"
    return replace(worst, message=message, handles=handles)


def words_of(part: MeasuredPart) -> tuple[Word, ...]:
    """Find lettering: holes of free and differing shapes beside each other, about as tall as each other."""
    if sum(hole.shape is HoleShape.OTHER for hole in part.holes) < LEAST_LETTERS:
        return ()
    small = [hole for hole in part.holes if _tall_mm(hole) <= MOST_TALL_MM]
    return tuple(Word(len(group), _around(group)) for group in _neighbours(small) if _is_lettering(group))


def _around(group: Sequence[Hole]) -> shapely.Geometry:
    hull = shapely.union_all([_box(hole) for hole in group]).convex_hull
    return hull.buffer(ROOM * max(map(_tall_mm, group)))


def _tall_mm(hole: Hole) -> float:
    x0, y0, x1, y1 = hole.contour.bounds
    return max(x1 - x0, y1 - y0)


def _box(hole: Hole) -> shapely.Geometry:
    return shapely.box(*hole.contour.bounds)


def _neighbours(holes: Sequence[Hole]) -> list[list[Hole]]:
    """Group holes whose boxes come near each other for their size."""
    boxes = [_box(hole) for hole in holes]
    tall = [_tall_mm(hole) for hole in holes]
    group = list(range(len(holes)))
    tree = shapely.STRtree(boxes)
    for k, box in enumerate(boxes):
        for other in tree.query(box, predicate="dwithin", distance=NEAR * tall[k]).tolist():
            low, high = sorted((tall[k], tall[other]))
            if other != k and high <= ALIKE * low:
                old, new = group[other], group[k]
                group = [new if g == old else g for g in group]
    return [[holes[k] for k, g in enumerate(group) if g == one] for one in dict.fromkeys(group)]


def _is_lettering(group: Sequence[Hole]) -> bool:
    """Tell letters from slots and grilles: most are of no simple shape, most differ, and some are hollow."""
    free = [hole for hole in group if hole.shape is HoleShape.OTHER]
    if len(free) < LEAST_LETTERS or 2 * len(free) < len(group):
        return False
    areas = sorted(hole.contour.area_mm2 for hole in free)
    kinds = 1 + sum(large > (1.0 + SAME) * small for small, large in pairwise(areas))
    return 2 * kinds > len(free) and sum(map(_is_hollow, free)) >= LEAST_HOLLOW


def _is_hollow(hole: Hole) -> bool:
    """Tell whether a shape fills its hull badly, as L, T and s do and windows do not."""
    shape = shapely.Polygon(points_along(hole.contour.xyb, closed=True, chord_mm=CHORD_MM))
    return bool(shape.area < HOLLOW * shape.convex_hull.area)
