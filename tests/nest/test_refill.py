"""Fewer sheets by filling some of them anew."""

from dataclasses import replace

import pytest

from flatprep.nest.clock import Clock
from flatprep.nest.construct import Layer
from flatprep.nest.firstfit import first_answers
from flatprep.nest.group import prepare_group
from flatprep.nest.improve import Effort, improve
from flatprep.nest.keep import left_to_lay
from flatprep.nest.problem import Budget
from flatprep.nest.refill import refill, worth_refilling
from flatprep.nest.solve import nest, refill_share
from flatprep.nest.verify import verify
from tests.nest.parts import ask, item, rectangle, sheet

WIDTHS = (90.0, 80.0, 70.0, 60.0, 50.0, 50.0)
"""Largest first they take three sheets of 200: 90 + 80, 70 + 60 + 50, 50; two would do: 90 + 60 + 50, 80 + 70 + 50."""


def bars(stock):
    items = [item(rectangle(f"bar{k}", w, 100.0), turns_deg=(0.0,)) for k, w in enumerate(WIDTHS)]
    return ask(items, stock)


def first(question):
    items, supplies = left_to_lay(question)
    group = prepare_group(items, supplies, question)
    return next(first_answers(group, question.margin_mm, lambda: False))


@pytest.mark.parametrize("seed", [1, 2, 3])
def test_two_sheets_where_largest_first_needs_three(seed):
    start = first(bars([sheet(200.0, 100.0, count=None)]))
    assert len(start.supply) == 3
    found = []
    refill(start, 0.0, Clock(steps=400), seed, found.append)
    assert len(found[-1].supply) == 2
    assert not worth_refilling(found[-1])
    assert len(found[-1].places) == len(WIDTHS)


def test_piece_that_waits_is_laid_when_sheets_are_filled_better():
    start = first(bars([sheet(200.0, 100.0, count=2)]))
    assert sum(u.count for u in start.unplaced) == 1
    found = []
    refill(start, 0.0, Clock(steps=400), 1, found.append)
    assert found[-1].unplaced == ()


def test_an_answer_that_the_search_takes_for_overlapping_is_kept():
    """Its outlines are a little larger than the parts: what is sound on these must not be lost."""
    start = first(bars([sheet(200.0, 100.0, count=None)]))
    second = max((p for p in start.places if p.container == 0), key=lambda p: p.x)
    places = tuple(replace(p, x=p.x - 1e-5) if p is second else p for p in start.places)
    found = []
    improve(replace(start, places=places), 0.0, Effort(Clock(steps=5), 1, 1), found.append)
    assert found == []


def test_nest_as_a_whole_finds_the_two_sheets():
    question = bars([sheet(200.0, 100.0, count=None)])
    layout = nest(question, Budget(steps=300, seed=1))
    assert len(layout.sheets) == 2
    assert verify(layout, question) == ()


@pytest.mark.parametrize(("pieces", "share"), [(5, 0.6), (10, 0.6), (20, 0.3), (40, 0.15)])
def test_the_more_pieces_share_a_sheet_the_less_is_spent_on_who_shares_it(pieces, share):
    tiles = item(rectangle("tile", 10.0, 10.0), quantity=2 * pieces, turns_deg=(0.0,))
    start = first(ask([tiles], [sheet(10.0 * pieces, 10.0, count=None)]))
    assert len(start.supply) == 2
    assert refill_share(start) == pytest.approx(share)


def test_open_length_and_single_sheets_are_left_to_the_search():
    assert not worth_refilling(first(bars([sheet(None, 100.0)])))
    assert not worth_refilling(first(bars([sheet(900.0, 100.0)])))


def test_dearer_sheets_are_not_taken():
    """The third sheet may only be saved, not changed for a dearer one."""
    cheap, dear = sheet(200.0, 100.0, price=10.0, count=3), sheet(400.0, 100.0, name="dear", price=90.0)
    start = first(bars([cheap, dear]))
    found = []
    refill(start, 0.0, Clock(steps=400), 1, found.append)
    costs = [start.value.cost, *(a.value.cost for a in found)]
    assert costs == sorted(costs, reverse=True)
    assert costs[-1] == pytest.approx(20.0)


def test_a_pinwheel_closes_only_at_turns_that_reach_further():
    """Four of 30 x 20 round one of 10 x 10 fill 50 x 50: whichever comes first, least reach lays the third upright."""
    question = ask(
        [
            item(rectangle("blade", 30.0, 20.0), quantity=4, turns_deg=(0.0, 90.0)),
            item(rectangle("hub", 10.0, 10.0), turns_deg=(0.0,)),
        ],
        [sheet(50.0, 50.0, count=None)],
    )
    group = prepare_group(*left_to_lay(question), question)
    layer = Layer(group.shapes, group.bins)
    blade, hub = sorted(range(2), key=lambda s: -group.shapes[s].count)
    for before in range(5):
        order = [blade] * before + [hub] + [blade] * (4 - before)
        assert sum(layer.lay(order, [0]).left_out) > 0
    for seed in (1, 2, 3):
        found = []
        refill(first(question), 0.0, Clock(steps=400), seed, found.append)
        assert len(found[-1].supply) == 1


def test_the_same_steps_give_the_same_answer():
    start = first(bars([sheet(200.0, 100.0, count=None)]))
    ends = []
    for _ in range(2):
        found = []
        refill(replace(start), 0.0, Clock(steps=60), 5, found.append)
        ends.append([(p.shape, p.container, p.x) for a in found for p in a.places])
    assert ends[0] == ends[1]
