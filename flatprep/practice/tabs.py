"""Holding tabs: which parts are too small to lie free, and where on the outline tabs go."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from math import ceil, hypot

import numpy as np
import shapely

from flatprep.geom.bulge import Floats, Segments, segments
from flatprep.geom.stretch import lengths, point_at
from flatprep.model.drawing import Part
from flatprep.model.tab import Tab
from flatprep.profile.process import Limit, TabRule

STEP_SHARE = 0.25
"""Places are tried so far apart, as a share of a tab with its cut."""
MOST_TRIES = 40
"""At the most so many on each half of a run."""
CLEAR_MM, CLEAR_TO_THICKNESS = 2.0, 2.0
"""A tab stays so far from bend lines and from holes that get a fit (common practice: its stub is ground off there)."""
CORNER_RAD = 0.2
"""An outline that turns by more than this at a vertex has a corner there; chords of a circle turn by less."""
NEAR_SHARE = 0.5
"""Tabs are at least this share of an even distribution apart."""


@dataclass(frozen=True, slots=True)
class Keep:
    """What a tab keeps away from.

    Attributes
    ----------
    lines : tuple of ((x, y), (x, y))
        Bend lines, mm.
    rims : tuple of (x, y, radius)
        Holes that get a fit, mm.
    clear_mm : float
        By how much.
    """

    lines: tuple[tuple[tuple[float, float], tuple[float, float]], ...] = ()
    rims: tuple[tuple[float, float, float], ...] = ()
    clear_mm: float = CLEAR_MM


@dataclass(frozen=True, slots=True)
class _Place:
    """A place for a tab: length along the outline, distance from the nearest corner."""

    s_mm: float
    clear_mm: float


def free_limit_mm(limit: Limit | None) -> float | None:
    """Return the larger side below which a part does not lie free, mm: the warning level of the limit of ``part``."""
    if limit is None:
        return None
    return limit.error if limit.warn is None else limit.warn


def clear_mm(thickness_mm: float | None) -> float:
    """Return how far tabs stay from bends and fits, mm."""
    return max(CLEAR_MM, CLEAR_TO_THICKNESS * (thickness_mm or 0.0))


def tabs_on(part: Part, rule: TabRule, thickness_mm: float | None, kerf_mm: float, keep: Keep) -> tuple[Tab, ...]:
    """Return tabs spread around a part's outline; fewer than the rule asks for, or none, where there is no place.

    Parameters
    ----------
    rule
        Number and width.
    kerf_mm
        What the cut takes away on both sides of a tab.
    keep
        Bends and fits.

    Notes
    -----
    The first tab goes where the outline runs straight and the next corner is farthest, the others to the free places
    nearest to an even distribution by length. Arcs take tabs only where no straight run does.
    """
    xyb = part.outer.xyb
    whole = part.outer.length_mm
    width = rule.width(thickness_mm)
    count = rule.number(whole)
    straight, every = (_places(xyb, width + kerf_mm, keep, on_arcs=on_arcs) for on_arcs in (False, True))
    for fewer in range(count, 0, -1):
        for places in (straight, every):
            found = _spread(places, fewer, whole)
            if len(found) == fewer:
                return tuple(_tab(xyb, place, width) for place in sorted(found, key=lambda p: p.s_mm))
    return ()


def _spread(places: Sequence[_Place], count: int, whole_mm: float) -> list[_Place]:
    """Pick places that come near to an even distribution."""
    if not places:
        return []
    chosen = [max(places, key=lambda p: p.clear_mm)]
    for k in range(1, count):
        target = chosen[0].s_mm + k * whole_mm / count
        apart = [p for p in places if min(_along(p.s_mm, c.s_mm, whole_mm) for c in chosen)
                 >= NEAR_SHARE * whole_mm / count]  # fmt: skip
        if apart:
            chosen.append(min(apart, key=lambda p: (round(_along(p.s_mm, target, whole_mm), 6), -p.clear_mm)))
    return chosen


def _along(a_mm: float, b_mm: float, whole_mm: float) -> float:
    """Distance of two places along a closed outline."""
    off = abs(a_mm - b_mm) % whole_mm
    return min(off, whole_mm - off)


def _places(xyb: Floats, gap_mm: float, keep: Keep, *, on_arcs: bool) -> list[_Place]:
    """Places where a tab with its cut is clear of corners, bends and fits."""
    seg = segments(xyb, closed=True)
    size = lengths(seg)
    sharp, whole = _is_corner(seg), float(size.sum()) - 1e-9
    corners = shapely.multipoints(seg.start[sharp])
    found = []
    for start, length in _runs(seg, size, on_arcs=on_arcs):
        tries = min(MOST_TRIES, ceil(length / (STEP_SHARE * gap_mm))) * 2  # even, so that the middle is among them
        for k in range(tries):
            s = start + length * k / tries
            at = shapely.Point(point_at(xyb, s)[0])
            ends = min(k, tries - k) * length / tries if length < whole else length
            room = min(float(at.distance(corners)), ends) if sharp.any() else ends
            if room >= gap_mm and _is_clear(at, keep, gap_mm / 2.0):
                found.append(_Place(s, room))
    return found


def _runs(seg: Segments, size: Floats, *, on_arcs: bool) -> Iterator[tuple[float, float]]:
    """Straight runs, or with `on_arcs` those of any shape, between corners: start and length along the outline."""
    ends = np.concatenate([[0.0], np.cumsum(size)])
    breaks = _is_corner(seg) if on_arcs else _is_corner(seg) | _changes(seg)
    first = int(np.argmax(breaks)) if breaks.any() else 0
    begin, length = first, 0.0
    for n in range(len(seg)):
        k = (first + n) % len(seg)
        if n and breaks[k]:
            if on_arcs or not seg.is_arc[begin]:
                yield float(ends[begin]), length
            begin, length = k, 0.0
        length += float(size[k])
    if on_arcs or not seg.is_arc[begin]:
        yield float(ends[begin]), length


def _is_corner(seg: Segments) -> "np.ndarray[tuple[int], np.dtype[np.bool_]]":
    """Where the outline turns sharply at the start of a segment, or runs into an arc that turns inward."""
    chord = np.arctan2(*(seg.end - seg.start).T[::-1])
    leave, arrive = chord - seg.sweep / 2.0, np.roll(chord + seg.sweep / 2.0, 1)
    off = np.abs((leave - arrive + np.pi) % (2.0 * np.pi) - np.pi)
    hollow = seg.sweep < 0.0
    return np.asarray((off > CORNER_RAD) | hollow | np.roll(hollow, 1))


def _changes(seg: Segments) -> "np.ndarray[tuple[int], np.dtype[np.bool_]]":
    """Where a line meets an arc, or one arc another."""
    return np.asarray(seg.is_arc | np.roll(seg.is_arc, 1))


def _is_clear(at: shapely.Point, keep: Keep, half_mm: float) -> bool:
    reach = keep.clear_mm + half_mm
    lines = (shapely.LineString(line).distance(at) for line in keep.lines)
    rims = (hypot(at.x - x, at.y - y) - radius for x, y, radius in keep.rims)
    return all(d >= reach for d in (*lines, *rims))


def _tab(xyb: Floats, place: _Place, width_mm: float) -> Tab:
    at, along = point_at(xyb, place.s_mm)
    return Tab((float(at[0]), float(at[1])), (float(along[1]), -float(along[0])), width_mm)
