"""Bends and the grain: turns by hand."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.nest.across import off_grain_deg, turns_across
from flatprep.nest.allowed import hands, turns_of, turns_on, why_no_stock
from flatprep.nest.problem import Budget
from flatprep.nest.solve import nest
from flatprep.nest.verify import verify
from tests.nest.parts import ask, item, rectangle, sheet

PART = rectangle("brace", 90.0, 30.0)
QUICK = Budget(steps=20)


@pytest.mark.parametrize(
    ("bends", "turns", "grain", "mirrored", "found"),
    [
        pytest.param((0.0,), None, 0.0, False, (90.0, 270.0), id="a level bend turns square to the length"),
        pytest.param((90.0,), None, 0.0, False, (0.0, 180.0), id="an upright one stays"),
        pytest.param((90.0,), None, 90.0, False, (90.0, 270.0), id="grain along the width"),
        pytest.param((0.0, 90.0), None, 0.0, False, (45.0, 135.0, 225.0, 315.0), id="both ways: 45 degrees"),
        pytest.param((20.0,), None, 0.0, False, (70.0, 250.0), id="askew"),
        pytest.param((20.0,), None, 0.0, True, (110.0, 290.0), id="askew and turned over"),
        pytest.param((0.0, 60.0, 120.0), None, 0.0, False, (30.0, 90.0, 150.0, 210.0, 270.0, 330.0), id="hexagon"),
        pytest.param((0.0, 45.0, 90.0, 135.0), None, 0.0, False, (), id="an octagon lies along it at any turn"),
        pytest.param((0.0,), (0.0, 45.0, 90.0, 170.0), 0.0, False, (45.0, 90.0), id="listed turns"),
        pytest.param((0.0,), (0.0, 180.0), 0.0, False, (), id="none of the listed ones"),
        pytest.param((0.0,), (30.0, 29.9), 0.0, False, (30.0,), id="just off it"),
    ],
)
def test_turns_that_lay_bends_across(bends, turns, grain, mirrored, found):
    assert turns_across(bends, turns, grain, mirrored=mirrored) == pytest.approx(found)


@given(st.floats(0, 180), st.floats(0, 360), st.sampled_from([0.0, 90.0]), st.booleans())
def test_the_angle_is_that_of_the_moved_line(bend, turn, grain, mirrored):
    """The line's direction as a vector, moved as a placement moves it: mirrored x to -x, then turned."""
    from math import acos, cos, degrees, radians, sin

    x, y = cos(radians(bend)) * (-1 if mirrored else 1), sin(radians(bend))
    t = radians(turn)
    moved = (x * cos(t) - y * sin(t), x * sin(t) + y * cos(t))
    cosine = abs(moved[0] * cos(radians(grain)) + moved[1] * sin(radians(grain)))
    expected = degrees(acos(min(cosine, 1.0)))
    assert off_grain_deg((bend,), turn, grain, mirrored=mirrored) == pytest.approx(expected, abs=1e-4)


def test_only_where_it_must_and_the_sheet_has_a_grain_and_the_part_names_none():
    bent = item(PART, bends_deg=(0.0,), must_cross=True)
    assert turns_on(bent, sheet(grain="length")) == (90.0, 270.0)
    assert turns_on(bent, sheet()) is None
    assert turns_on(item(PART, bends_deg=(0.0,)), sheet(grain="length")) is None
    assert turns_on(item(PART, bends_deg=(0.0,), must_cross=True, grain="x"), sheet(grain="length")) == (0.0, 180.0)


def test_preference():
    bent, grained = item(PART, bends_deg=(0.0,)), sheet(grain="length")
    assert turns_of(bent, (False,), grained) is None
    assert turns_of(bent, (False,), grained, prefer=True) == (90.0, 270.0)
    listed = item(PART, bends_deg=(0.0,), turns_deg=(0.0, 180.0))
    assert turns_of(listed, (False,), grained, prefer=True) == (0.0, 180.0)  # no turn does: any will do
    assert turns_of(bent, (False,), sheet(), prefer=True) is None


def test_bends_askew_that_must_cross_the_grain_are_not_flipped():
    assert hands(item(PART, 3, bends_deg=(20.0,), must_cross=True, may_flip=True)) == ((3, (False,)),)
    assert hands(item(PART, 3, bends_deg=(90.0,), must_cross=True, may_flip=True)) == ((3, (False, True)),)


def test_why_no_sheet_will_do():
    octagon = item(PART, bends_deg=(0.0, 45.0, 90.0, 135.0), must_cross=True)
    assert "lays its bends across the grain, along which steel cracks" in why_no_stock(octagon, [sheet(grain="length")])
    assert why_no_stock(octagon, [sheet(grain="length"), sheet()]) is None


@pytest.mark.parametrize("opposite", [0, 3])
def test_a_nest_keeps_it_and_the_verifier_looks(opposite):
    bent = item(PART, 4, quantity_opposite=opposite, bends_deg=(20.0,), must_cross=True)
    asked = ask([bent, item(rectangle("plate", 50, 40), 4)], [sheet(400, 300, grain="length")], spacing=2.0, margin=5.0)
    layout = nest(asked, QUICK)
    assert layout.unplaced == ()
    assert verify(layout, asked) == ()
    laid = [p for s in layout.sheets for p in s.placements if p.part == "brace"]
    assert {(p.mirrored, round(p.turn_deg)) for p in laid} <= {(False, 70), (False, 250), (True, 110), (True, 290)}
    other = ask(asked.items, [sheet(400, 300, grain="width")], spacing=2.0, margin=5.0)
    assert {f.kind for f in verify(layout, other)} == {"grain"}


def test_they_cross_it_where_that_costs_nothing_though_they_need_not():
    """Six bars on a wide sheet: level or upright they take the same length."""
    bar = item(rectangle("bar", 60, 60), 6, bends_deg=(0.0,))
    layout = nest(ask([bar], [sheet(300, 200, grain="length")]), QUICK)
    assert {round(p.turn_deg) % 180 for s in layout.sheets for p in s.placements} == {90}


def test_they_lie_along_it_where_a_piece_would_be_left_out_else():
    """Bars as long as the sheet is wide: only level ones fit a sheet that is 40 high."""
    bar = item(rectangle("bar", 90, 30), 2, bends_deg=(0.0,))
    layout = nest(ask([bar], [sheet(200, 40, grain="length")]), QUICK)
    assert layout.unplaced == ()
    assert {round(p.turn_deg) % 180 for s in layout.sheets for p in s.placements} == {0}
