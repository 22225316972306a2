"""Give a constructive answer to the search, and take back what is better.

Sheets that allow different turns (their grain runs differently) are searched apart. Pieces that found no place wait
on a further sheet that does not count: the search empties it if it can.
"""

from collections import Counter
from collections.abc import Callable, Sequence
from contextlib import suppress
from dataclasses import dataclass, replace

import numpy as np
from shapely.geometry import MultiPoint, Polygon

from flatprep.geom.bulge import Floats, Similarity
from flatprep.nest.clock import EVALUATIONS_A_STEP, Clock
from flatprep.nest.construct import Bin, Layer
from flatprep.nest.firstfit import Answer, answer_of
from flatprep.nest.group import Group
from flatprep.nest.search import search, sheets_task
from flatprep.nest.shapes import Best, Container, Place, Shape
from flatprep.nest.solo import StartOverlapsError

Turns = tuple[float, ...] | None
SAME_MM = 1e-6


@dataclass(frozen=True, slots=True)
class Effort:
    """What a search of one group may spend."""

    clock: Clock
    seed: int
    jobs: int


@dataclass(frozen=True, slots=True)
class Portion:
    """Sheets that allow the same turns, and the pieces on them, as the search wants them.

    Attributes
    ----------
    sheets : tuple of int
        Their numbers in the supply.
    shapes : tuple of Shape
        Those with pieces on these sheets (or waiting), `of_group` their indices in the group.
    containers : tuple of Container
        Of the sheets; where pieces wait, one more.
    start : tuple of Place
    """

    sheets: tuple[int, ...]
    shapes: tuple[Shape, ...]
    of_group: tuple[int, ...]
    containers: tuple[Container, ...]
    start: tuple[Place, ...]

    def places(self, best: Best) -> tuple[Place, ...]:
        """Places in the terms of the group; those of waiting pieces are left out."""
        return tuple(
            replace(p, shape=self.of_group[p.shape], container=self.sheets[p.container])
            for p in best.places
            if p.container < len(self.sheets)
        )


def improve(answer: Answer, margin_mm: float, effort: Effort, found: Callable[[Answer], None]) -> None:
    """Search from an answer on.

    Parameters
    ----------
    answer
        Its places are free of overlap; it stays as it is where the search, on its slightly larger outlines, sees one.
    effort
        Shared out over the classes of sheets, if there are several.
    found
        Told of every layout of the group that is better than the one before.
    """
    current = answer
    classes = turn_classes(answer.group, answer.supply)
    for number, turns in enumerate(classes):
        sheets = [n for n, kind in enumerate(current.supply) if answer.group.bins[kind].turns == turns]
        portion = portion_of(current, sheets, waiting=number == len(classes) - 1)
        if len(portion.start) < 2 or is_shortest(portion):
            continue
        task = sheets_task(portion.shapes, portion.containers, portion.start)
        track = _Track(current, portion, margin_mm, found)
        clock = clock_share(effort.clock, 1.0 / (len(classes) - number))
        with suppress(StartOverlapsError):  # it may be sound on the true shapes, which are smaller: then it is kept
            search(task, clock, effort.seed, track, effort.jobs)
        effort.clock.spend(clock.evaluations)
        current = track.best


class _Track:
    """Receives the layouts of one portion, and puts them together with the sheets that stay as they are."""

    def __init__(self, best: Answer, portion: Portion, margin_mm: float, found: Callable[[Answer], None]) -> None:
        self.best = best
        self._supply, self._portion, self._margin_mm, self._found = best.supply, portion, margin_mm, found
        self._others = tuple(p for p in best.places if p.container not in portion.sheets)

    def __call__(self, best: Best) -> None:
        places = (*self._others, *self._portion.places(best))
        made = answer_of(self.best.group, places, self._supply, self._margin_mm)
        if made.value < self.best.value:
            self.best = made
            self._found(made)


def turn_classes(group: Group, supply: Sequence[int]) -> list[tuple[Turns, ...]]:
    """List the different turns that the sheets of a supply allow, in the order of the sheets."""
    return list(dict.fromkeys(group.bins[kind].turns for kind in supply))


def portion_of(answer: Answer, sheets: Sequence[int], *, waiting: bool) -> Portion:
    """Pieces of some sheets of an answer, and, if asked, those that are left out, for the search."""
    group = answer.group
    kinds = [group.bins[answer.supply[n]] for n in sheets]
    on_sheets = [p for p in answer.places if p.container in sheets]
    counts = Counter(p.shape for p in on_sheets)
    containers = [k.container for k in kinds]
    start = [replace(p, container=sheets.index(p.container)) for p in on_sheets]
    if waiting:
        late, room = _waiting(answer, kinds)
        counts.update(p.shape for p in late)
        start += [replace(p, container=len(containers)) for p in late]
        containers += [room] if room is not None else []
    of_group = tuple(sorted(counts))
    shapes = tuple(replace(group.shapes[s], turns_deg=kinds[0].turns[s], count=counts[s]) for s in of_group)
    own = {s: n for n, s in enumerate(of_group)}
    return Portion(
        tuple(sheets), shapes, of_group, tuple(containers), tuple(replace(p, shape=own[p.shape]) for p in start)
    )


def is_shortest(portion: Portion) -> bool:
    """Tell whether one sheet is used no further than its widest piece, or the area of all pieces, asks for."""
    if len(portion.containers) > 1:
        return False
    outer = portion.containers[0].outer
    reach = max(_extent(portion.shapes[p.shape].outer, p.turn_deg, mirrored=p.mirrored)[1] + p.x for p in portion.start)
    area = sum(s.count * Polygon(s.outer, s.holes).area for s in portion.shapes)
    least = max(area / float(np.ptp(outer[:, 1])), *(_least_width(s) for s in portion.shapes))
    return bool(reach - float(outer[:, 0].min()) <= least + SAME_MM)


def _least_width(shape: Shape) -> float:
    """Least extent of a shape along x over its turns; for a free one, across some edge of its hull."""
    turns = shape.turns_deg
    if turns is None:
        hull = np.asarray(MultiPoint(shape.outer).convex_hull.boundary.coords)
        turns = tuple(float(90.0 - np.degrees(np.arctan2(dy, dx))) for dx, dy in np.diff(hull, axis=0))
    extents = [_extent(shape.outer, t, mirrored=m) for t in turns for m in shape.mirror]
    return min(high - low for low, high in extents)


def _extent(ring: Floats, turn_deg: float, *, mirrored: bool) -> tuple[float, float]:
    """Least and greatest x of a ring turned about its origin."""
    x = Similarity(turn_deg=turn_deg, mirrored=mirrored).points(ring)[:, 0]
    return float(x.min()), float(x.max())


def _waiting(answer: Answer, kinds: Sequence[Bin]) -> tuple[list[Place], Container | None]:
    """Lay the pieces that are left out, as far as some sheet can hold them, on a sheet of their own."""
    group = answer.group
    counts = Counter(p.shape for p in answer.places)
    layer = Layer(group.shapes, kinds, coarse=False)
    order = [
        s
        for s, shape in enumerate(group.shapes)
        if counts[s] < shape.count and any(layer.fits_alone(s, k) for k in range(len(kinds)))
        for _ in range(shape.count - counts[s])
    ]
    if not order:
        return [], None
    room = _overflow(kinds, [group.shapes[s] for s in order])
    laid = Layer(group.shapes, [Bin(room, kinds[0].turns)], coarse=False).lay(order, [0])
    return list(laid.places), room


def _overflow(kinds: Sequence[Bin], shapes: Sequence[Shape]) -> Container:
    """Rectangle that holds the shapes in a row."""
    across = [float(np.hypot(*np.ptp(s.outer, axis=0))) for s in shapes]
    width = max([max(across), *(float(np.ptp(k.container.outer[:, 1])) for k in kinds)])
    length = sum(across)
    return Container(np.array([[0.0, 0.0], [length, 0.0], [length, width], [0.0, width]]))


def clock_share(clock: Clock, share: float) -> Clock:
    """Clock of a share of what is left of another."""
    if clock.steps is not None:
        left = clock.steps - clock.evaluations // EVALUATIONS_A_STEP
        return Clock(steps=max(1, int(left * share)), stop=clock.stopped)
    return Clock(max(clock.seconds - clock.elapsed_s, 0.0) * share, stop=clock.stopped)
