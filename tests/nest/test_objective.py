"""What counts as better."""

import pytest

from flatprep.nest.objective import SheetUse, area_mm2, price_per_area, value
from flatprep.nest.supply import cheaper, sequences
from tests.nest.parts import remnant, sheet

DEAR = sheet(name="dear", price=100.0, count=None)
CHEAP = sheet(name="cheap", price=40.0, count=2)
REST = remnant([(0, 0), (100, 0), (100, 80), (50, 90), (0, 80)])
OPEN = sheet(None, 200.0, name="roll", price_per_metre=50.0)


def test_piece_left_out_is_worse_than_any_cost():
    assert value([SheetUse(DEAR, 300.0)] * 5, 0, [DEAR]) < value([], 1, [DEAR])


def test_cheapest_stock_goes_before_fewest_sheets_and_these_before_length():
    kinds = [DEAR, CHEAP]
    two_cheap = value([SheetUse(CHEAP, 300.0)] * 2, 0, kinds)
    one_dear = value([SheetUse(DEAR, 50.0)], 0, kinds)
    assert two_cheap < one_dear
    assert value([SheetUse(DEAR, 50.0)], 0, kinds) < value([SheetUse(DEAR, 51.0)], 0, kinds)


def test_open_stock_costs_the_length_used():
    assert value([SheetUse(OPEN, 500.0)], 0, [OPEN]).cost == pytest.approx(25.0)


def test_unpriced_remnant_costs_nothing_and_is_no_full_sheet():
    kinds = [DEAR, REST]
    with_rest = value([SheetUse(REST, 100.0), SheetUse(DEAR, 120.0)], 0, kinds)
    assert with_rest.cost == pytest.approx(100.0)
    assert (with_rest.sheets, with_rest.remnants, with_rest.length_mm) == (1, 1, 120.0)
    assert with_rest < value([SheetUse(DEAR, 200.0)], 0, kinds)


def test_unpriced_sheet_is_reckoned_at_the_mean_price_of_the_others():
    bare = sheet(600.0, 200.0, name="bare")
    kinds = [DEAR, bare]
    assert price_per_area(kinds) == pytest.approx(100.0 / 60000.0)
    assert value([SheetUse(bare, 600.0)], 0, kinds).cost == pytest.approx(200.0)
    assert price_per_area([bare]) == pytest.approx(1e-6)


def test_area_of_a_remnant_is_net():
    square = [(10, 10), (20, 10), (20, 20), (10, 20)]
    assert area_mm2(remnant([(0, 0), (100, 0), (100, 50), (0, 50)], [square])) == pytest.approx(4900.0)


def test_remnants_come_first_then_the_cheapest_area_and_no_more_than_there_are():
    first = sequences([DEAR, CHEAP, REST], 3)[0]
    assert first == (2, 1, 1, 0, 0, 0)


def test_every_kind_comes_first_once():
    assert {s[0] for s in sequences([DEAR, CHEAP, REST], 3)} == {0, 1, 2}


def test_cheaper_sequences_drop_a_sheet_or_put_a_cheaper_one_in_its_place():
    found = cheaper((0, 0), [DEAR, CHEAP])
    assert found[0] == (0,)
    assert (0, 1) in found
    assert (1, 1, 1) not in cheaper((1, 1, 0), [DEAR, CHEAP])  # there are only two cheap ones
