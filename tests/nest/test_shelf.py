"""Failed layouts that are kept, and which tries from them are worth going on with."""

import numpy as np
import pytest

from flatprep.nest.engine import Spots
from flatprep.nest.shelf import Prospects, Shelf

NOWHERE = np.zeros(0)
EARLIEST, LATER, LATEST = 20_000, 60_000, 200_000


def failed(loss: float) -> Spots:
    none = NOWHERE.astype(np.int64)
    return Spots(none, none, NOWHERE, NOWHERE.reshape(0, 2), 1, 100.0, loss)


def shelf_of(*losses: float) -> Shelf:
    shelf = Shelf()
    for loss in losses:
        shelf.add(failed(loss))
    return shelf


def full_shelf() -> Shelf:
    """As many layouts as it takes for tries to be judged, all of more loss than those tries have."""
    return shelf_of(*(1000.0 + 10.0 * k for k in range(4)))


def test_the_least_losses_are_kept_in_order():
    rng = np.random.default_rng(3)
    losses = rng.permutation(60) + 1.0
    assert [s.loss for s in shelf_of(*losses)] == [float(k) for k in range(1, 41)]


def test_a_layout_that_is_there_is_not_kept_twice():
    shelf = shelf_of(100.0, 100.05, 99.95, 50.0)
    assert [s.loss for s in shelf] == [50.0, 100.0]
    assert shelf.holds(100.09)
    assert not shelf.holds(100.2)
    assert len(shelf_of(100.0, 100.2)) == 2


def test_picks_come_mostly_from_the_top():
    """|z| of a standard normal deviate is below 2/3 in 49.5, below 4/3 in 81.8, below 2 in 95.4 of 100 (tables)."""
    shelf, rng = shelf_of(*range(1, 41)), np.random.default_rng(5)
    picks = np.array([shelf.pick(rng).loss for _ in range(4000)])
    for rank, share in ((1, 0.495), (2, 0.818), (3, 0.954)):
        assert np.mean(picks <= rank) == pytest.approx(share, abs=0.03)
    assert shelf_of(1.0).pick(rng).loss == 1.0
    assert {shelf_of(1.0, 2.0).pick(rng).loss for _ in range(50)} == {1.0, 2.0}


def judge(prospects: Prospects, shelf: Shelf, *reached: tuple[int, float]) -> bool:
    prospects.begin(shelf)
    return all(prospects.go_on(tried, loss) for tried, loss in reached)


def test_tries_from_few_layouts_run_to_their_end():
    prospects = Prospects()
    few = shelf_of(*(1000.0 + 10.0 * k for k in range(3)))
    assert all(judge(prospects, few, (EARLIEST, float(k)), (LATEST, float(k))) for k in range(1, 20))
    assert not prospects.given_up


@pytest.mark.parametrize("check", [EARLIEST, LATER, LATEST])
def test_a_try_goes_on_where_its_loss_is_among_the_least_two_fifths(check):
    prospects, shelf = Prospects(), full_shelf()
    for k in range(10):
        assert judge(prospects, shelf, (check, 109.0 - k))  # each the best so far
    assert judge(prospects, shelf, (check, 103.5))  # four of ten are better
    assert not prospects.given_up
    assert not judge(prospects, shelf, (check, 104.5))  # six of eleven are
    assert prospects.given_up


def test_a_try_is_judged_at_each_check_once_and_not_between():
    prospects, shelf = Prospects(), full_shelf()
    assert judge(prospects, shelf, (EARLIEST, 100.0))
    assert judge(prospects, shelf, (EARLIEST - 1, 500.0))
    assert judge(prospects, shelf, (EARLIEST, 90.0), (LATER - 1, 500.0))
    assert not judge(prospects, shelf, (EARLIEST, 500.0))
    assert judge(prospects, shelf, (EARLIEST, 80.0), (LATER, 400.0), (LATEST - 1, 500.0))
    assert not judge(prospects, shelf, (EARLIEST, 70.0), (LATER, 450.0))


def test_what_was_long_ago_no_longer_counts():
    prospects, shelf = Prospects(), full_shelf()
    for loss in [*[1.0] * 40, *[100.0] * 40]:
        judge(prospects, shelf, (EARLIEST, loss))
    assert judge(prospects, shelf, (EARLIEST, 50.0))
    for loss in [*[1.0] * 17, *[100.0] * 22]:
        judge(prospects, shelf, (EARLIEST, loss))
    assert not judge(prospects, shelf, (EARLIEST, 50.0))


def test_a_try_that_fell_back_to_a_kept_layout_is_given_up():
    prospects = Prospects()
    shelf = shelf_of(*(10.0 + k for k in range(4)))
    assert judge(prospects, shelf, (EARLIEST, 9.0))
    assert not judge(prospects, shelf, (EARLIEST, 8.0), (LATER, 10.0))
    assert prospects.given_up
