"""The verb `nest`: from what is asked to a verified layout."""

import time
from collections import Counter
from collections.abc import Callable, Sequence
from functools import partial
from math import sqrt

from flatprep.base.progress import Progress, Silent
from flatprep.model.layout import Layout, Unplaced
from flatprep.nest.allowed import matches
from flatprep.nest.assemble import FilledSheet, Spot, layout_of
from flatprep.nest.clock import Clock
from flatprep.nest.downsize import downsized, may_downsize
from flatprep.nest.fill import NO_ROOM, fill
from flatprep.nest.firstfit import Answer, first_answers
from flatprep.nest.group import kept_spots, prepare_group, split
from flatprep.nest.improve import Effort, clock_share, improve
from flatprep.nest.keep import KeepError, left_to_lay
from flatprep.nest.problem import Budget, NestAsk
from flatprep.nest.refill import refill, worth_refilling
from flatprep.nest.verify import LayoutFault, verify

USUAL, QUIET = Budget(), Silent()
FIRST_SHARE = 0.2
"""Share of the time that constructive layouts may take after the first one."""
REFILL_SHARE = 0.6
"""Share of a group's budget for filling sheets anew, where there are several with few pieces each."""
SEARCH_SHARE = 0.95
"""Share of what is then left for the search, where cheaper sheets are looked at after it."""
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
    job = _Job(ask, stop, _Reporter(progress, on_better))
    job.lay_first(budget)
    job.improve(budget)
    job.fill()
    layout = job.layout()
    _refuse(verify(layout, ask))
    return layout


class _Reporter:
    """Tells of better layouts: a line for people, the layout for whoever asked for it."""

    def __init__(self, progress: Progress, on_better: Callable[[Layout], None] | None) -> None:
        self.progress, self._on_better = progress, on_better
        self._started = time.monotonic()

    def tell(self, layout: Layout) -> None:
        """Tell of a layout."""
        used = len(layout.sheets)
        last = f", the last used to {layout.sheets[-1].used_length_mm:.0f} mm" if used else ""
        elapsed = time.monotonic() - self._started
        self.progress.update(f"{used} sheet{'s' if used != 1 else ''}{last}", done=elapsed)
        if self._on_better is not None:
            self._on_better(layout)


class _Job:
    """The best answers so far of all groups of a job.

    Raises
    ------
    KeepError
        When what is to be kept does not go with the job, or is not sound in itself.
    """

    def __init__(self, ask: NestAsk, stop: Callable[[], bool], reporter: _Reporter) -> None:
        self._ask, self._stopped, self._reporter = ask, stop, reporter
        self._started = time.monotonic()
        items, supplies = left_to_lay(ask)
        stock = [s.stock for s in supplies]
        main, self._hopeless = split([i for i in items if not i.filler], stock)
        fillers, self._left = split([i for i in items if i.filler], stock)
        self._groups = [prepare_group(group, supplies, ask) for group in main]
        self._fillers = [prepare_group(group, supplies, ask) for group in fillers]
        self._left += [Unplaced(i.name, i.quantity + i.quantity_opposite, NO_ROOM) for group in fillers for i in group]
        used = [s for group in self._groups for s in group.stock]
        self._idle = [
            FilledSheet(s.stock, kept_spots(s, ask.items))
            for s in supplies
            if s.kept and not any(s.stock is other for other in used)
        ]
        self._answers: list[Answer] = []
        _refuse_unsound_keep(ask)

    def layout(self) -> Layout:
        """Layout of the whole job as it is."""
        sheets = [*self._idle, *(sheet for answer in self._answers for sheet in answer.sheets)]
        unplaced = [*self._hopeless, *(u for answer in self._answers for u in answer.unplaced), *self._left]
        return layout_of(self._ask, sheets, merged(unplaced))

    def fill(self) -> None:
        """Lay the fillers, at the very end."""
        for group in self._fillers:
            for number, answer in enumerate(self._answers):
                if answer.supply and any(matches(group.owner[0][0], s) for s in answer.group.stock):
                    names = {item.name for item, _ in group.owner}
                    filled, left = fill(answer, group, self._ask)
                    if _faults(self._ask, filled, left):
                        continue
                    self._answers[number] = filled
                    self._left = [u for u in self._left if u.part not in names] + list(left)
        if self._fillers:
            self._reporter.tell(self.layout())

    def lay_first(self, budget: Budget) -> None:
        """Lay every group by the constructive rule; tell of the job's first full layout, then of better ones."""
        until = self._started + budget.seconds * FIRST_SHARE
        groups = self._groups
        every = [first_answers(group, self._ask.margin_mm, self._stop(until, budget)) for group in groups]
        for number, answers in enumerate(every, start=1):
            self._reporter.progress.update("first layout", done=number, total=len(groups))
            first = next(answers)
            _refuse(_faults(self._ask, first, ()))
            self._answers.append(first)
        self._reporter.tell(self.layout())
        for number, answers in enumerate(every):
            for answer in answers:
                self._take(number, answer)

    def improve(self, budget: Budget) -> None:
        """Search group by group, each for its share of what is left."""
        weights = [difficulty(a) for a in self._answers]
        for number in range(len(self._answers)):
            if weights[number] == 0.0:
                continue
            share = weights[number] / sum(weights[number:])
            left = budget.seconds - ENDING_S - (time.monotonic() - self._started)
            steps = None if budget.steps is None else max(1, int(budget.steps * weights[number] / sum(weights)))
            if (left <= 0.0 and steps is None) or self._stopped():
                return
            self._improve_group(number, Clock(left * share, steps, stop=self._stopped), budget)

    def _improve_group(self, number: int, clock: Clock, budget: Budget) -> None:
        """Spend a clock on one group: refill sheets, search, look for cheaper sheets."""
        take, margin = partial(self._take, number), self._ask.margin_mm
        if worth_refilling(self._answers[number]):
            first = clock_share(clock, REFILL_SHARE)
            refill(self._answers[number], margin, first, budget.seed, take)
            clock.spend(first.evaluations)
        search = clock_share(clock, SEARCH_SHARE) if may_downsize(self._answers[number]) else clock
        improve(self._answers[number], margin, Effort(search, budget.seed, budget.jobs), take)
        for cheaper in downsized(self._answers[number], margin, clock.passed):
            take(cheaper)

    def _take(self, number: int, answer: Answer) -> None:
        """Note a better answer of a group if it is sound, and tell of the layout."""
        before = self._answers[number]
        if answer.value < before.value and not _faults(self._ask, answer, ()):
            self._answers[number] = answer
            self._reporter.tell(self.layout())

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


def merged(unplaced: Sequence[Unplaced]) -> list[Unplaced]:
    """One entry a part: both hands of a pair may be left out."""
    found: dict[str, Unplaced] = {}
    for u in unplaced:
        old = found.get(u.part)
        why = u.why if old is None or old.why == u.why else f"{old.why}; {u.why}"
        found[u.part] = Unplaced(u.part, u.count + (old.count if old else 0), why)
    return list(found.values())


def _faults(ask: NestAsk, answer: Answer, fillers_left: Sequence[Unplaced]) -> tuple[LayoutFault, ...]:
    """Verify one group's sheets; whether all pieces are there only the whole layout tells."""
    alone = layout_of(ask, answer.sheets, merged([*answer.unplaced, *fillers_left]))
    return tuple(f for f in verify(alone, ask) if f.kind != "count")


def _refuse(faults: Sequence[LayoutFault]) -> None:
    """Stop at a first layout that is not sound: a mistake of this program, never to be written out."""
    if faults:
        raise RuntimeError(f"a layout that is not sound: {faults[0].message}")


def _refuse_unsound_keep(ask: NestAsk) -> None:
    """Name what is wrong with kept sheets before anything is laid around them."""
    if not ask.keep:
        return
    items, stock = {i.name: i for i in ask.items}, {s.name: s for s in ask.stock}
    sheets = [FilledSheet(stock[k.stock], tuple(Spot(items[p.part], p.motion) for p in k.placements)) for k in ask.keep]
    faults = [f for f in verify(layout_of(ask, sheets, []), ask) if f.kind != "count"]
    if faults:
        more = f" and {len(faults) - 1} more" if len(faults) > 1 else ""
        raise KeepError(f"the kept layout is not sound: {faults[0].message}{more}", "mend the kept layout first")
