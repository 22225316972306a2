"""Pieces of one web (or slot) put together, so that it is told once."""

from collections.abc import Sequence

import numpy as np
import shapely

from flatprep.geom.bulge import Floats
from flatprep.measure.boundary import Boundary
from flatprep.measure.discs import Pieces

SAMPLES = 17
"""So many places on each side are looked at between two pieces."""
ROOM = 1.02
"""What is at most so many times the sought width stays one web."""

Arc = tuple[int, float, float]
"""A run along a contour: contour, from and to, mm."""


def groups(b: Boundary, s: Pieces, most_mm: float) -> list[list[int]]:
    """Group pieces between which the boundary stays within `most_mm`; each group in order along the web."""
    links: dict[int, set[int]] = {k: set() for k in range(len(s))}
    for i, j in _neighbours(s):
        if j not in links[i] and _linked(b, s, i, j, most_mm):
            links[i].add(j)
            links[j].add(i)
    return [_walk(start, links) for start in _starts(links)]


def _neighbours(s: Pieces) -> list[tuple[int, int]]:
    """Pairs of pieces whose ends follow each other on a contour, both between the same two contours."""
    lines: dict[tuple[int, int], list[tuple[int, float, int]]] = {}
    low, high = s.contour.min(axis=1).tolist(), s.contour.max(axis=1).tolist()
    middle = s.place.mean(axis=2).tolist()
    contour = s.contour.tolist()
    for k in range(len(s)):
        ends = lines.setdefault((low[k], high[k]), [])
        ends += [(contour[k][side], middle[k][side], k) for side in (0, 1)]
    pairs = set()
    for ends in lines.values():
        ends.sort()
        for (c, _, i), (d, _, j) in zip(ends, ends[1:] + ends[:1], strict=True):
            if c == d and i != j:
                pairs.add((min(i, j), max(i, j)))
        # the last end on a contour is followed by its first
        for c in {e[0] for e in ends}:
            own = [e[2] for e in ends if e[0] == c]
            if own[0] != own[-1]:
                pairs.add((min(own[0], own[-1]), max(own[0], own[-1])))
    return sorted(pairs)


def _linked(b: Boundary, s: Pieces, i: int, j: int, most_mm: float) -> bool:
    """Whether the strip between two pieces is nowhere wider than what is looked for."""
    sides = _between(b, s, i, j)
    if sides is None:
        return False
    one, two = (shapely.LineString(_run(b, side)) for side in sides)
    room = ROOM * most_mm
    return _near(one, two, room) and _near(two, one, room)


def _near(one: shapely.LineString, two: shapely.LineString, room_mm: float) -> bool:
    points = shapely.points(shapely.get_coordinates(one))
    return bool((shapely.distance(points, two) <= room_mm).all())


def _between(b: Boundary, s: Pieces, i: int, j: int) -> tuple[Arc, Arc] | None:
    """Find the two runs of boundary between two pieces: the shortest that face each other, or None."""
    best: tuple[float, Arc, Arc] | None = None
    ci, cj = s.contour[i], s.contour[j]
    pi, pj = s.place[i].mean(axis=1), s.place[j].mean(axis=1)
    for side in (0, 1):
        if ci[0] != cj[side] or ci[1] != cj[1 - side]:
            continue
        for ahead in (True, False):
            # material lies to the left on both sides, so the sides run against each other
            a = _arc(b, ci[0], pi[0], pj[side], ahead=ahead)
            z = _arc(b, ci[1], pi[1], pj[1 - side], ahead=not ahead)
            size = (a[2] - a[1]) + (z[2] - z[1])
            if best is None or size < best[0]:
                best = size, a, z
    return None if best is None else best[1:]


def _arc(b: Boundary, contour: int, here: float, there: float, *, ahead: bool) -> Arc:
    first, last = (here, there) if ahead else (there, here)
    return int(contour), float(first), float(first + (last - first) % b.total[contour])


def _run(b: Boundary, arc: Arc) -> Floats:
    """Points along a run of a contour: evenly, and its corners."""
    contour, first, last = arc
    rows = np.nonzero(b.contour == contour)[0]
    total = b.total[contour]
    at = np.linspace(first, last, SAMPLES)
    corner = b.run[rows]
    turns = np.floor((last - corner) / total) * total + corner
    at = np.sort(np.concatenate([at, turns[turns > first]]))
    place = np.mod(at, total)
    k = np.clip(np.searchsorted(b.run[rows], place, side="right") - 1, 0, len(rows) - 1)
    share = np.clip((place - b.run[rows][k]) / b.length[rows][k], 0.0, 1.0)
    return b.points(rows[k], share)


def _starts(links: dict[int, set[int]]) -> list[int]:
    """One piece of each group, an end of its chain where it has one."""
    seen: set[int] = set()
    out = []
    for k in links:
        if k in seen:
            continue
        group = _reach(k, links)
        seen |= group
        out.append(min(group, key=lambda m: (len(links[m]), m)))
    return out


def _reach(start: int, links: dict[int, set[int]]) -> set[int]:
    found, todo = {start}, [start]
    while todo:
        fresh = links[todo.pop()] - found
        found |= fresh
        todo += fresh
    return found


def _walk(start: int, links: dict[int, set[int]]) -> list[int]:
    """Return the group in order, neighbours after each other."""
    order, seen, todo = [], {start}, [start]
    while todo:
        k = todo.pop()
        order.append(k)
        fresh: Sequence[int] = sorted(links[k] - seen)
        seen |= set(fresh)
        todo += fresh
    return order
