"""The verb `nest`: from what is asked to a verified layout."""

import time
from collections.abc import Callable, Sequence

from flatprep.base.progress import Progress, Silent
from flatprep.model.layout import Layout, Unplaced
from flatprep.nest.assemble import layout_of
from flatprep.nest.firstfit import Answer, first_answers
from flatprep.nest.group import prepare_group, split
from flatprep.nest.problem import Budget, NestAsk
from flatprep.nest.verify import verify

USUAL, QUIET = Budget(), Silent()
FIRST_SHARE = 0.2
"""Share of the time that constructive layouts may take after the first one."""


def nest(
    ask: NestAsk,
    budget: Budget = USUAL,
    progress: Progress = QUIET,
    on_better: Callable[[Layout], None] | None = None,
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
    started = time.monotonic()
    answers: list[Answer] = []
    for number, group in enumerate(groups, start=1):
        progress.update("laying parts", done=number, total=len(groups))
        until = started + budget.seconds * FIRST_SHARE * number / len(groups)
        stop = _clock_stop(until) if budget.steps is None else (lambda: False)
        best = None
        for answer in first_answers(group, ask.margin_mm, stop):
            best = _sound(ask, answer, best)
        if best is not None:
            answers.append(best)
    layout = whole(ask, answers, hopeless)
    if on_better is not None:
        on_better(layout)
    return layout


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


def _clock_stop(until: float) -> Callable[[], bool]:
    return lambda: time.monotonic() >= until


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
