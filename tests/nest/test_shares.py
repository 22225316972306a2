"""How groups share what may be spent."""

import time

import pytest

from flatprep.nest import solve
from flatprep.nest.clock import EVALUATIONS_A_STEP
from flatprep.nest.problem import Budget
from flatprep.nest.shares import Means, share_out
from tests.nest.parts import ask, hook, item, polygon, rectangle, sheet


def means(steps=None, seconds=0.0, stopped=lambda: False):
    return Means(time.monotonic() + seconds, steps, stopped)


def spending(log, needs):
    """Groups that need so many steps, or any number (None), until their bound is met."""
    left = dict(needs)

    def work(number, clock, turn):
        can = clock.steps if left[number] is None else min(clock.steps, left[number])
        clock.spend(can * EVALUATIONS_A_STEP)
        log.append((number, turn, can))
        if left[number] is not None:
            left[number] -= can
        return left[number] != 0

    return work


def test_shares_go_by_weight_the_easy_ones_first():
    log = []
    share_out([300.0, 0.0, 100.0], means(steps=1000), spending(log, {0: None, 2: None}))
    assert log == [(2, 0, 250), (0, 0, 750)]


def test_what_a_group_leaves_goes_to_the_harder_ones():
    log = []
    share_out([100.0, 100.0, 200.0], means(steps=1000), spending(log, {0: 10, 1: None, 2: None}))
    assert log == [(0, 0, 10), (1, 0, 330), (2, 0, 660)]  # a third and two thirds of 990


def test_what_the_last_one_leaves_goes_round_again_among_those_that_can_use_it():
    log = []
    share_out([100.0, 300.0], means(steps=1000), spending(log, {0: None, 1: 50}))
    assert log == [(0, 0, 250), (1, 0, 50), (0, 1, 700)]


def test_it_ends_when_no_group_can_gain_any_more():
    log = []
    share_out([1.0, 1.0], means(steps=1000), spending(log, {0: 1, 1: 1}))
    assert log == [(0, 0, 1), (1, 0, 1)]


@pytest.mark.parametrize("some", [means(steps=0), means(seconds=-1.0), means(steps=9, stopped=lambda: True)])
def test_nothing_left_or_stopped(some):
    share_out([1.0], some, lambda *_: pytest.fail("there is nothing to spend"))


def test_wall_time_is_shared_likewise():
    seconds = []

    def work(number, clock, turn):
        seconds.append(clock.seconds)
        return False

    share_out([3.0, 1.0], means(seconds=1000.0), work)
    assert seconds == [pytest.approx(250.0, abs=1.0), pytest.approx(1000.0, abs=1.0)]


def test_a_trivial_group_leaves_the_hard_one_nearly_everything(monkeypatch):
    """Two plates that fill their sheet's width have nothing to gain; five kinds of brackets have."""
    asked = {}

    def searched(answer, margin_mm, effort, found):
        asked[answer.group.items[0].material] = effort.clock.steps

    monkeypatch.setattr(solve, "improve", searched)
    hard = [item(hook(f"hook{k}", 60 + 7 * k, 40 + 5 * k), 8, material="steel") for k in range(5)]
    easy = [item(rectangle("plate", 100, 100), 2, material="acrylic")]
    stock = [sheet(1000, 500), sheet(300, 100, name="clear", material="acrylic")]
    layout = solve.nest(ask([*hard, *easy], stock, spacing=2.0), Budget(steps=1000))
    assert layout.unplaced == ()
    assert asked["steel"] >= 950


def test_difficulty_counts_pieces_corners_and_kinds(monkeypatch):
    """Four squares of one kind: 4 times the root of 4 corners; with four triangles more, twice the pieces and kinds."""
    weights = []
    monkeypatch.setattr(solve, "share_out", lambda found, *_: weights.append(found))
    square, triangle = rectangle("a", 10, 10), polygon("b", [(0, 0), (10, 0), (0, 10)])
    stock = [sheet(100, 100)]
    solve.nest(ask([item(square, 4)], stock), Budget(steps=1))
    solve.nest(ask([item(square, 4), item(triangle, 4)], stock), Budget(steps=1))
    solve.nest(ask([item(square, 1)], stock), Budget(steps=1))
    assert weights[0] == [pytest.approx(4 * 2)]
    assert weights[1] == [pytest.approx((4 * 2 + 4 * 3**0.5) * 2**0.5)]
    assert weights[2] == [0.0]
