"""The verb `nest`: from what is asked to a verified layout."""

import time
from collections import Counter
from collections.abc import Callable, Sequence
from functools import partial
from math import sqrt

from flatprep.base.progress import Progress, Silent
from flatprep.model.layout import Layout, Unplaced
from flatprep.nest.assemble import layout_of
from flatprep.nest.clock import Clock
from flatprep.nest.firstfit import Answer, first_answers
from flatprep.nest.group import Group, prepare_group, split
from flatprep.nest.improve import Effort, improve
from flatprep.nest.problem import Budget, NestAsk
from flatprep.nest.verify import verify

USUAL, QUIET = Budget(), Silent()
FIRST_SHARE = 0.2
"""Share of the time that constructive layouts may take after the first one."""
ENDING_S = 0.3
"""Kept back for the end."""


def nest(
    ask: NestAsk,
    budget: Budget = USUAL,
    progress: Progress = QUIET,
    on_better: Callable[[Layout], None] | None = None,
    stop: Callable[[], bool] = lambda: False,
) -> Layout:
    """Lay the parts of a job on its stock.

    Parts of each material and thickness nest apart. What is better is stated in `flatprep.nest.objective`.

    Parameters
    ----------
    ask
    budget
        Wall time or steps, seed, processes. With steps the layout does not depend on the clock.
    progress
        Told what is being done.
    on_better
        Called with each better layout of the whole job, verified.
    stop
        Asked several times a second: True ends the search with the best so far.

    Returns
    -------
    Layout
        Verified. Pieces without a place are listed with the reason.

    Raises
    ------
    ValueError
        When spacing or margin is negative.
    """
    if ask.spacing_mm < 0.0 or ask.margin_mm < 0.0:
        raise ValueError("spacing and margin must not be negative")
    item_groups, hopeless = split(ask)
    groups = [prepare_group(items, ask) for items in item_groups]
    job = _Job(ask, hopeless, progress, on_better, stop)
    job.lay_first(groups, budget)
    job.improve(budget)
    return job.layout()


class _Job:
    """The best answers so far of all groups of a job."""

    def __init__(
        self,
        ask: NestAsk,
        hopeless: Sequence[Unplaced],
        progress: Progress,
        on_better: Callable[[Layout], None] | None,
        stop: Callable[[], bool],
    ) -> None:
        self._stopped = stop
        self._ask, self._hopeless, self._progress, self._on_better = ask, hopeless, progress, on_better
        self._started = time.monotonic()
        self._answers: list[Answer] = []

    def layout(self) -> Layout:
        """Layout of the whole job as it is."""
        return whole(self._ask, self._answers, self._hopeless)

    def lay_first(self, groups: Sequence[Group], budget: Budget) -> None:
        """Lay every group by the constructive rule; tell of the job's first full layout, then of better ones."""
        until = self._started + budget.seconds * FIRST_SHARE
        every = [first_answers(group, self._ask.margin_mm, self._stop(until, budget)) for group in groups]
        for number, answers in enumerate(every, start=1):
            self._progress.update("first layout", done=number, total=len(groups))
            self._answers.append(_sound(self._ask, next(answers), None))
        self._tell()
        for number, answers in enumerate(every):
            for answer in answers:
                self._take(number, answer)

    def improve(self, budget: Budget) -> None:
        """Search group by group, each for its share of what is left."""
        weights = [difficulty(a) for a in self._answers]
        for number, answer in enumerate(self._answers):
            if weights[number] == 0.0:
                continue
            share = weights[number] / sum(weights[number:])
            left = budget.seconds - ENDING_S - (time.monotonic() - self._started)
            steps = None if budget.steps is None else max(1, int(budget.steps * weights[number] / sum(weights)))
            if (left <= 0.0 and steps is None) or self._stopped():
                return
            effort = Effort(Clock(left * share, steps, stop=self._stopped), budget.seed, budget.jobs)
            improve(answer, self._ask.margin_mm, effort, partial(self._take, number))

    def _take(self, number: int, answer: Answer) -> None:
        """Note a better answer of a group if it is sound, and tell of the layout."""
        before = self._answers[number]
        if answer.value < before.value and _sound(self._ask, answer, before) is answer:
            self._answers[number] = answer
            self._tell()

    def _tell(self) -> None:
        layout = self.layout()
        used = len(layout.sheets)
        last = f", the last used to {layout.sheets[-1].used_length_mm:.0f} mm" if used else ""
        elapsed = time.monotonic() - self._started
        self._progress.update(f"{used} sheet{'s' if used != 1 else ''}{last}", done=elapsed)
        if self._on_better is not None:
            self._on_better(layout)

    def _stop(self, until: float, budget: Budget) -> Callable[[], bool]:
        """Whether the constructive rule has had its time; with a budget in steps the clock is not looked at."""
        if budget.steps is not None:
            return self._stopped
        return lambda: time.monotonic() >= until or self._stopped()


def difficulty(answer: Answer) -> float:
    """Weight by which groups share the time: pieces laid times the root of their corners; 0 for nothing to gain."""
    laid = Counter(p.shape for p in answer.places)
    if laid.total() < 2:
        return 0.0
    shapes = answer.group.shapes
    return sum(count * sqrt(len(shapes[s].outer) + sum(map(len, shapes[s].holes))) for s, count in laid.items())


def whole(ask: NestAsk, answers: Sequence[Answer], hopeless: Sequence[Unplaced]) -> Layout:
    """Put the answers of all groups together to the layout of the job."""
    sheets = [sheet for answer in answers for sheet in answer.sheets]
    unplaced = [*hopeless, *(u for answer in answers for u in answer.unplaced)]
    return layout_of(ask, sheets, merged(unplaced))


def merged(unplaced: Sequence[Unplaced]) -> list[Unplaced]:
    """One entry a part: both hands of a pair may be left out."""
    found: dict[str, Unplaced] = {}
    for u in unplaced:
        old = found.get(u.part)
        why = u.why if old is None or old.why == u.why else f"{old.why}; {u.why}"
        found[u.part] = Unplaced(u.part, u.count + (old.count if old else 0), why)
    return list(found.values())


def _sound(ask: NestAsk, answer: Answer, before: Answer | None) -> Answer:
    """Return the answer if it is sound, else the one before.

    Raises
    ------
    RuntimeError
        When the first answer of a group is not sound: a mistake of this program, never to be written out.
    """
    items = tuple(dict.fromkeys(item for item, _ in answer.group.owner))
    alone = NestAsk(items, answer.group.stock, ask.spacing_mm, ask.margin_mm, ask.windows)
    faults = verify(whole(alone, [answer], []), alone)
    if not faults:
        return answer
    if before is None:
        raise RuntimeError(f"a layout that is not sound: {faults[0].message}")
    return before
