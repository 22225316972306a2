"""Fewer sheets: empty a few, and fill them anew one by one, each as full as chance allows.

Large neighbourhood search (Shaw 1998) on whole sheets: the pieces of two to four sheets, poorly filled ones first,
are laid again by the constructive rule in many random orders, some pieces at a turn of chance; of each sheet the
fullest try is kept. What costs less, or fills its sheets more unevenly (the sum of squared fills), is taken: a sheet
that runs empty is saved.
"""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from math import ceil

import numpy as np
import numpy.typing as npt
from shapely.geometry import Polygon

from flatprep.nest.clock import EVALUATIONS_A_STEP, Clock
from flatprep.nest.construct import Layer, Variants
from flatprep.nest.firstfit import Answer, answer_of
from flatprep.nest.group import Group
from flatprep.nest.objective import SheetUse, cost_of, is_open, price_per_area
from flatprep.nest.prepare import region_of
from flatprep.nest.shapes import Place

MOST_PIECES = 40
"""With more pieces to a sheet, which ones share it matters little: the search moves them better."""
FEWEST_SHEETS, MOST_SHEETS = 2, 4
FEWEST_TRIES, MOST_TRIES = 4, 25
LEAST_NOISE = 0.2
"""Sizes are multiplied by chance between this and 1 before they are ranked."""
HELD_SHARE = 0.6
"""Of the pieces in a try, laid at a turn of chance where it goes in so: the turn that reaches least far is often not
the one that lets the others in."""
FULL = 0.9999


@dataclass(frozen=True, slots=True)
class Load:
    """A sheet and what lies on it: kind of stock, places (their container counts for nothing), share of it filled."""

    kind: int
    places: tuple[Place, ...]
    fill: float


@dataclass(frozen=True, slots=True)
class State:
    """Sheets that may be refilled, and the shapes of pieces that wait."""

    loads: tuple[Load, ...]
    waiting: tuple[int, ...]


def worth_refilling(answer: Answer) -> bool:
    """Tell whether an answer has several sheets with few pieces each, and more of them than the area asks for."""
    group = answer.group
    if any(is_open(s) or kept for s, kept in zip(group.stock, group.kept, strict=True)):
        return False
    if len(answer.supply) < 2 or len(answer.places) > MOST_PIECES * len(answer.supply):
        return False
    room = max(_rooms(group))
    least = ceil(float(sum(s.count * _area(group, k) for k, s in enumerate(group.shapes))) / room - 1e-9)
    return len(answer.supply) > least or bool(answer.unplaced)


def refill(answer: Answer, margin_mm: float, clock: Clock, seed: int, found: Callable[[Answer], None]) -> None:
    """Search until the clock has passed, or as few sheets are used as the area asks for.

    Parameters
    ----------
    found
        Told of each better answer.
    """
    work = _Refill(answer.group, clock, np.random.default_rng(seed))
    state, best = work.state_of(answer), answer
    while not clock.passed() and worth_refilling(best):
        tried = work.next_state(state)
        if tried is None or work.rank(tried) > work.rank(state):
            continue
        fewer = work.rank(tried)[:2] < work.rank(state)[:2]
        state = tried
        if fewer:
            made = work.answer(state, margin_mm)
            if made.value < best.value:
                best = made
                found(best)
    last = work.answer(state, margin_mm)
    if last.value < best.value:
        found(last)


class _Refill:
    """The constructive rule, chance, and what is known of the group."""

    def __init__(self, group: Group, clock: Clock, rng: np.random.Generator) -> None:
        self._group, self._clock, self._rng = group, clock, rng
        self._layer = Layer(group.shapes, group.bins)
        self._area = np.array([_area(group, s) for s in range(len(group.shapes))])
        self._room = _rooms(group)
        rate = price_per_area(group.stock)
        self._cost = [cost_of(SheetUse(s, s.length_mm or 0.0), rate) for s in group.stock]

    def state_of(self, answer: Answer) -> State:
        """Sheets and waiting pieces of an answer."""
        loads = [
            self._load(kind, tuple(p for p in answer.places if p.container == n))
            for n, kind in enumerate(answer.supply)
        ]
        counts = np.array([s.count for s in self._group.shapes])
        np.subtract.at(counts, [p.shape for p in answer.places], 1)
        waiting = [s for s, n in enumerate(counts) for _ in range(n) if self._fits(s, answer)]
        return State(tuple(loads), tuple(waiting))

    def rank(self, state: State) -> tuple[int, float, float]:
        """Return what is minimised: pieces that wait, cost, evenness of the fills."""
        cost = sum(self._cost[load.kind] for load in state.loads) + 1e-9 * len(state.loads)
        return len(state.waiting), round(cost, 9), -float(sum(load.fill**2 for load in state.loads))

    def answer(self, state: State, margin_mm: float) -> Answer:
        """Answer of a state, the least filled sheet last."""
        ordered = sorted(state.loads, key=lambda load: -load.fill)
        places = [replace(p, container=n) for n, load in enumerate(ordered) for p in load.places]
        return answer_of(self._group, places, [load.kind for load in ordered], margin_mm)

    def next_state(self, state: State) -> State | None:
        """Empty some sheets and fill them anew; None where pieces are left over that had a place."""
        picked = self._pick(state.loads)
        rest = [p.shape for n in picked for p in state.loads[n].places] + list(state.waiting)
        tries = int(self._rng.integers(FEWEST_TRIES, MOST_TRIES))
        made = []
        for n in picked:
            if rest:
                made.append(self._fullest(state.loads[n].kind, rest, tries))
                for p in made[-1].places:
                    rest.remove(p.shape)
        if len(rest) > len(state.waiting):
            return None
        others = [load for n, load in enumerate(state.loads) if n not in picked]
        return State((*others, *(load for load in made if load.places)), tuple(rest))

    def _pick(self, loads: Sequence[Load]) -> list[int]:
        """Sheets to empty, poorly filled ones more often, the cheapest first in the order of filling."""
        count = min(len(loads), int(self._rng.integers(FEWEST_SHEETS, MOST_SHEETS + 1)))
        weight = np.array([1.02 - min(load.fill, 1.0) for load in loads])
        picked = self._rng.choice(len(loads), size=count, replace=False, p=weight / weight.sum())
        return sorted((int(n) for n in picked), key=lambda n: self._cost[loads[n].kind] / self._room[loads[n].kind])

    def _fullest(self, kind: int, rest: Sequence[int], tries: int) -> Load:
        """Fill one sheet in several orders of the pieces; return the fullest."""
        best: Load | None = None
        size = self._area[np.array(rest)]
        for n in range(tries):
            noise = self._rng.uniform(LEAST_NOISE, 1.0, len(rest)) if n else np.ones(len(rest))
            laid = self._layer.lay(_ranked(rest, size * noise), [kind], first=self._held if n else None)
            load = self._load(kind, laid.places)
            self._clock.spend(EVALUATIONS_A_STEP)
            if best is None or load.fill > best.fill + 1e-9:
                best = load
            if best.fill > FULL or len(best.places) == len(rest) or self._clock.passed():
                break
        assert best is not None  # tries is at least one
        return best

    def _held(self, variants: Variants) -> Variants:
        """Name one turn of a piece now and then, to be tried before it is laid as it reaches least far."""
        if len(variants) < 2 or self._rng.random() >= HELD_SHARE:
            return ()
        return (variants[int(self._rng.integers(len(variants)))],)

    def _load(self, kind: int, places: tuple[Place, ...]) -> Load:
        return Load(kind, places, float(sum(self._area[p.shape] for p in places)) / self._room[kind])

    def _fits(self, shape: int, answer: Answer) -> bool:
        return any(self._layer.fits_alone(shape, kind) for kind in dict.fromkeys(answer.supply))


def _ranked(rest: Sequence[int], size: npt.NDArray[np.float64]) -> list[int]:
    return [rest[i] for i in np.argsort(-size, kind="stable")]


def _area(group: Group, shape: int) -> float:
    one = group.shapes[shape]
    return float(Polygon(one.outer, one.holes).area)


def _rooms(group: Group) -> list[float]:
    """Area of each kind's container, mm²."""
    return [float(region_of(b.container).area) for b in group.bins]
