"""The verb `nest`: from what is asked to a verified layout."""

import time
from collections import Counter
from collections.abc import Callable, Sequence
from dataclasses import replace
from functools import partial
from math import inf, sqrt

from flatprep.base.progress import Progress, Silent
from flatprep.model.layout import Layout, Unplaced
from flatprep.nest.allowed import matches
from flatprep.nest.assemble import FilledSheet, Spot, layout_of
from flatprep.nest.clock import Clock
from flatprep.nest.downsize import downsized, may_downsize
from flatprep.nest.fill import NO_ROOM, fill
from flatprep.nest.firstfit import Answer, first_answers
from flatprep.nest.group import Group, kept_spots, prepare_group, split
from flatprep.nest.improve import Effort, clock_share, improve
from flatprep.nest.keep import KeepError, left_to_lay
from flatprep.nest.objective import Value
from flatprep.nest.problem import Budget, NestAsk
from flatprep.nest.refill import worth_refilling
from flatprep.nest.refill_jobs import refill_with
from flatprep.nest.shares import Means, share_out
from flatprep.nest.sound import UnsoundError, sound_answer, with_more_room, without_faults
from flatprep.nest.verify import LayoutFault, SheetKey, sheet_key, verify
from flatprep.nest.warm import ROWS, SEARCH, Compiler, compiling

USUAL, QUIET = Budget(), Silent()
FIRST_SHARE = 0.2
"""Share of the time that constructive layouts may take after the first one."""
REFILL_SHARE = 0.6
"""Share of a group's budget for filling sheets anew, where there are several with few pieces each."""
FEW_PIECES = 10
"""With more pieces a sheet than this, that share falls."""
SEARCH_SHARE = 0.95
"""Share of what is then left for the search, where cheaper sheets are looked at after it."""
ACROSS_SHARE = 0.05
"""So much more length, or cost, is taken into the bargain where all bends then lie across the grain."""
TICK_S = 0.5
"""The time that is left is told as often."""
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
    KeepError
        When what is to be kept does not go with the job, or is not sound in itself.
    UnsoundError
        When the layout does not verify in the end.
    """
    if ask.spacing_mm < 0.0 or ask.margin_mm < 0.0:
        raise ValueError("spacing and margin must not be negative")
    reporter = _Reporter(progress, on_better, None if budget.steps is not None else budget.seconds)
    job = _Job(ask, reporter.watched(stop), reporter)
    with compiling(progress) as compiler:
        job.lay_first(budget, compiler)
        job.improve(budget, compiler)
    job.fill()
    return job.verified()


class _Reporter:
    """Tells of better layouts: a line for people, the layout for whoever asked for it.

    Parameters
    ----------
    seconds
        Wall time that there is; None where it does not count.
    """

    def __init__(
        self, progress: Progress, on_better: Callable[[Layout], None] | None, seconds: float | None = None
    ) -> None:
        self.progress, self._on_better = progress, on_better
        self._started = self._said = time.monotonic()
        self._seconds, self._words = seconds, ""

    def tell(self, layout: Layout) -> None:
        """Tell of a layout."""
        used = len(layout.sheets)
        last = f", the last used to {layout.sheets[-1].used_length_mm:.0f} mm" if used else ""
        self._words = f"{used} sheet{'s' if used != 1 else ''}{last}"
        self._say()
        if self._on_better is not None:
            self._on_better(layout)

    def watched(self, stop: Callable[[], bool]) -> Callable[[], bool]:
        """Return a stop that, whenever it is asked, also keeps the time that is left on the screen."""

        def asked() -> bool:
            if self._words and time.monotonic() > self._said + TICK_S:
                self._say()
            return stop()

        return asked

    def _say(self) -> None:
        self._said = time.monotonic()
        elapsed = self._said - self._started
        left = "" if self._seconds is None else f", {max(self._seconds - elapsed, 0.0):.0f} s left"
        self.progress.update(self._words + left, done=elapsed)


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
        self._sound: list[frozenset[SheetKey]] = [frozenset() for _ in self._groups]
        _refuse_unsound_keep(ask)

    def verified(self) -> Layout:
        """Layout of the whole job, verified; sheets that were found sound as they came are not looked at again."""
        layout = self.layout()
        _refuse(verify(layout, self._ask, frozenset().union(*self._sound)))
        return layout

    def layout(self) -> Layout:
        """Layout of the whole job as it is."""
        sheets = [*self._idle, *(sheet for answer in self._answers for sheet in answer.sheets)]
        unplaced = [*self._hopeless, *(u for answer in self._answers for u in answer.unplaced), *self._left]
        return layout_of(self._ask, sheets, merged(unplaced))

    def fill(self) -> None:
        """Lay the fillers, at the very end."""
        for group in self._fillers:
            for number, answer in enumerate(self._answers):
                if answer.supply and any(matches(group.items[0], s) for s in answer.group.stock):
                    names = {item.name for item in group.items}
                    filled, left = fill(answer, group, self._ask)
                    if self._faults(number, filled, left):
                        continue
                    self._answers[number] = filled
                    self._left = [u for u in self._left if u.part not in names] + list(left)
        if self._fillers:
            self._reporter.tell(self.layout())

    def lay_first(self, budget: Budget, compiler: Compiler) -> None:
        """Lay every group by the constructive rule; tell of the job's first full layout, then of better ones."""
        compiler.wait(ROWS)
        until = self._started + budget.seconds * FIRST_SHARE
        groups = self._groups
        stop = self._stop(until, budget)
        every = [first_answers(group, self._ask.margin_mm, stop) for group in groups]
        for number, answers in enumerate(every):
            self._reporter.progress.update("first layout", done=number + 1, total=len(groups))
            faults, again = partial(self._faults, number), partial(self._again, number)
            first = sound_answer(next(answers), faults, again, self._ask.margin_mm)
            if prefers_across(groups[number]):
                kinder = first_answers(self._group(number, self._ask, prefer=True), self._ask.margin_mm, stop)
                better = without_faults(next(kinder), faults, self._ask.margin_mm)
                if is_about_as_good(better.value, first.value):
                    first, every[number] = better, kinder
            self._answers.append(first)
        self._reporter.tell(self.layout())
        for number, answers in enumerate(every):
            for answer in answers:
                self._take(number, answer)

    def _again(self, number: int, more_mm: float) -> Answer:
        """Lay a group by the constructive rule with so much more room between its pieces and at the border."""
        group = self._group(number, with_more_room(self._ask, more_mm))
        margins = {s.name: s.margins_mm for s in self._ask.stock}
        stock = tuple(replace(s, margins_mm=margins[s.name]) for s in group.stock)
        return next(first_answers(replace(group, stock=stock), self._ask.margin_mm, self._stopped))

    def _group(self, number: int, ask: NestAsk, *, prefer: bool = False) -> Group:
        """Prepare a group anew, with other room or turns."""
        items, supplies = left_to_lay(ask)
        main, _ = split([i for i in items if not i.filler], [s.stock for s in supplies])
        return prepare_group(main[number], supplies, ask, prefer=prefer)

    def improve(self, budget: Budget, compiler: Compiler) -> None:
        """Search group by group, the easy ones first (`share_out`)."""
        weights = [difficulty(a) for a in self._answers]
        if any(weights):
            compiler.wait(SEARCH, inf if budget.steps is not None else self._started + budget.seconds, self._stopped)
        means = Means(self._started + budget.seconds - ENDING_S, budget.steps, self._stopped)
        share_out(weights, means, partial(self._improve_group, budget))

    def _improve_group(self, budget: Budget, number: int, clock: Clock, turn: int) -> bool:
        """Spend a clock on one group: refill sheets, search, look for cheaper sheets; tell whether it ran out."""
        take, margin, seed = partial(self._take, number), self._ask.margin_mm, budget.seed + turn
        if worth_refilling(self._answers[number]):
            first = clock_share(clock, refill_share(self._answers[number]))
            refill_with(self._answers[number], margin, first, seed, take, budget.jobs)
            clock.spend(first.evaluations)
        search = clock_share(clock, SEARCH_SHARE if may_downsize(self._answers[number]) else 1.0)
        improve(self._answers[number], margin, Effort(search, seed, budget.jobs), take)
        clock.spend(search.evaluations)
        late = self._stopped if budget.steps is not None else clock.passed  # it is soon done, and counts no steps
        for cheaper in downsized(self._answers[number], margin, late):
            take(cheaper)
        return search.passed()

    def _take(self, number: int, answer: Answer) -> None:
        """Note a better answer of a group if it is sound, and tell of the layout."""
        before = self._answers[number]
        if answer.value < before.value and not self._faults(number, answer):
            self._answers[number] = answer
            self._reporter.tell(self.layout())

    def _faults(self, number: int, answer: Answer, fillers_left: Sequence[Unplaced] = ()) -> tuple[LayoutFault, ...]:
        """Verify one group's sheets; whether all pieces are there only the whole layout tells."""
        alone = layout_of(self._ask, answer.sheets, merged([*answer.unplaced, *fillers_left]))
        faults = tuple(f for f in verify(alone, self._ask, self._sound[number]) if f.kind != "count")
        if not faults:
            self._sound[number] = frozenset(map(sheet_key, alone.sheets))
        return faults

    def _stop(self, until: float, budget: Budget) -> Callable[[], bool]:
        """Whether the constructive rule has had its time; with a budget in steps the clock is not looked at."""
        if budget.steps is not None:
            return self._stopped
        return lambda: time.monotonic() >= until or self._stopped()


def refill_share(answer: Answer) -> float:
    """Share of the budget for filling sheets anew: which pieces share a sheet matters less where they are many."""
    return REFILL_SHARE * min(1.0, FEW_PIECES * len(answer.supply) / len(answer.places))


def difficulty(answer: Answer) -> float:
    """Weight by which groups share the time; 0 for a single piece, with which nothing is to be gained.

    Pieces laid, each times the root of its corners, times the root of the number of kinds.
    """
    laid = Counter(p.shape for p in answer.places)
    if laid.total() < 2:
        return 0.0
    shapes = answer.group.shapes
    pieces = sum(count * sqrt(len(shapes[s].outer) + sum(map(len, shapes[s].holes))) for s, count in laid.items())
    return pieces * sqrt(len(laid))


def prefers_across(group: Group) -> bool:
    """Tell whether bends of a group had better lie across the grain, and some sheet has one."""
    minds = any(item.minds_grain and not item.must_cross for item in group.items)
    return minds and any(s.grain is not None for s in group.stock)


def is_about_as_good(one: Value, other: Value) -> bool:
    """Tell whether a nest leaves out no more, begins no more sheets, and costs `ACROSS_SHARE` more at the most."""
    more = 1.0 + ACROSS_SHARE
    few = one.left_out <= other.left_out and one.sheets <= other.sheets and one.remnants <= other.remnants
    return few and one.cost <= more * other.cost and one.length_mm <= more * other.length_mm


def merged(unplaced: Sequence[Unplaced]) -> list[Unplaced]:
    """One entry a part: both hands of a pair may be left out."""
    found: dict[str, Unplaced] = {}
    for u in unplaced:
        old = found.get(u.part)
        why = u.why if old is None or old.why == u.why else f"{old.why}; {u.why}"
        found[u.part] = Unplaced(u.part, u.count + (old.count if old else 0), why)
    return list(found.values())


def _refuse(faults: Sequence[LayoutFault]) -> None:
    """Stop at a layout that is not sound in the end: a mistake of this program, never to be written out."""
    if faults:
        raise UnsoundError(
            f"the layout is not sound, and none is written: {faults[0].message}",
            "run it again with another --seed, and report it together with the job",
        )


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
