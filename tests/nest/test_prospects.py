"""Which tries are worth going on with."""

import pytest

from flatprep.nest.prospects import Prospects
from flatprep.nest.shelf import Shelf
from tests.nest.test_shelf import shelf_of

EARLIEST, LATER, LATEST = 20_000, 60_000, 200_000


def full_shelf() -> Shelf:
    """As many layouts as it takes for tries to be judged, all of more loss than those tries have."""
    return shelf_of(*(1000.0 + 10.0 * k for k in range(4)))


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
