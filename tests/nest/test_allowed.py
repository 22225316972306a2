"""What may lie where, and the words where it may not."""

import pytest

from flatprep.nest.allowed import hands, same_turn, turns_on, why_no_stock
from tests.nest.parts import hook, item, rectangle, sheet

PART = rectangle("plate", 50.0, 30.0)


@pytest.mark.parametrize(
    ("turns", "of_part", "of_stock", "allowed"),
    [
        (None, None, None, None),
        ((0.0, 45.0), None, "length", (0.0, 45.0)),
        (None, "x", "length", (0.0, 180.0)),
        (None, "y", "length", (90.0, 270.0)),
        (None, "x", "width", (90.0, 270.0)),
        (None, "y", "width", (0.0, 180.0)),
        ((0.0, 90.0, -180.0), "x", "length", (0.0, -180.0)),
        ((45.0,), "x", "length", ()),
        (None, "x", None, ()),
    ],
)
def test_turns_against_the_grain(turns, of_part, of_stock, allowed):
    assert turns_on(item(PART, turns_deg=turns, grain=of_part), sheet(grain=of_stock)) == allowed


def test_same_turn_counts_full_circles_for_nothing():
    assert same_turn(-90.0, 270.0)
    assert same_turn(720.0, 0.0)
    assert not same_turn(0.0, 180.0)
    assert not same_turn(0.0, 1e-6)


def test_hands_of_a_pair_and_of_a_part_that_may_flip():
    assert hands(item(hook("h"), 3, quantity_opposite=2)) == ((3, (False,)), (2, (True,)))
    assert hands(item(hook("h"), 0, quantity_opposite=2)) == ((2, (True,)),)
    assert hands(item(hook("h"), 3, quantity_opposite=2, may_flip=True)) == ((5, (False, True)),)


@pytest.mark.parametrize(
    ("part", "stock", "words"),
    [
        (item(PART), [sheet(material="brass")], "no stock of steel"),
        (item(PART), [sheet(thickness_mm=2.0), sheet(thickness_mm=5.0)], "only in 2 mm, 5 mm"),
        (item(PART), [sheet(count=0)], "no sheet left of sheet"),
        (item(PART, grain="x"), [sheet()], "states no grain"),
        (item(PART, grain="x", turns_deg=(45.0,)), [sheet(grain="width")], "none of its allowed turns"),
    ],
)
def test_reason_why_no_stock_will_do(part, stock, words):
    assert words in why_no_stock(part, stock)


def test_no_reason_where_some_stock_will_do():
    assert why_no_stock(item(PART, grain="x"), [sheet(), sheet(grain="length")]) is None
