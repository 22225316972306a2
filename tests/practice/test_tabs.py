"""Where holding tabs go."""

from math import hypot, pi

import numpy as np
import pytest

from flatprep.geom.bulge import circle
from flatprep.model.drawing import Contour, Part
from flatprep.practice.tabs import Keep, clear_mm, free_limit_mm, tabs_on
from flatprep.profile.process import Limit, TabRule

TWO = TabRule(count=2, width_mm=0.5, width_to_thickness=0.0)


def part(*points):
    return Part("leaf", Contour(np.array([(*p, 0.0) if len(p) == 2 else p for p in points], dtype=float)))


BOX = part((0, 0), (24, 0), (24, 12), (0, 12))


def places(*args, **more):
    return [tab.at for tab in tabs_on(*args, **more)]


def test_two_tabs_stand_in_the_middle_of_the_long_sides():
    tabs = tabs_on(BOX, TWO, 3.0, 0.2, Keep())
    assert [t.at for t in tabs] == [pytest.approx((12, 0)), pytest.approx((12, 12))]
    assert [t.normal for t in tabs] == [pytest.approx((0, -1)), pytest.approx((0, 1))]
    assert {t.width_mm for t in tabs} == {0.5}


def test_four_tabs_one_a_side():
    assert sorted(places(BOX, TabRule(4, 0.5), 3.0, 0.2, Keep())) == [
        pytest.approx(p, abs=0.5) for p in ((0, 6), (12, 0), (12, 12), (24, 6))
    ]


def test_they_stay_away_from_a_bend_and_a_fit():
    """The bend crosses both long sides in the middle; the fit hole of 6 mm sits left of it, 4 mm from the edge."""
    keep = Keep(lines=(((12, -1), (12, 13)),), rims=((6, 7, 3),), clear_mm=4.0)
    got = places(BOX, TWO, 3.0, 0.2, keep)
    assert len(got) == 2
    for x, y in got:
        assert abs(x - 12) >= 4.0 + 0.35 - 1e-9
        assert hypot(x - 6, y - 7) - 3 >= 4.0 + 0.35 - 1e-9


def test_straight_runs_go_before_arcs():
    stadium = part((0, 0), (10, 0, 1), (10, 30), (0, 30, 1))
    assert places(stadium, TWO, 3.0, 0.2, Keep()) == [pytest.approx((5, 0)), pytest.approx((5, 30))]


@pytest.mark.parametrize("corners", [0, 96])
def test_round_parts_take_them_too_half_a_turn_apart(corners):
    xyb = circle(0, 0, 8.0)
    if corners:
        angle = 2 * pi * np.arange(corners) / corners
        xyb = np.column_stack([8 * np.cos(angle), 8 * np.sin(angle), np.zeros(corners)])
    a, b = places(Part("disc", Contour(xyb)), TWO, 3.0, 0.2, Keep())
    assert hypot(a[0] - b[0], a[1] - b[1]) == pytest.approx(16, abs=0.1)


def test_where_there_is_room_for_one_only_there_is_one_and_none_where_there_is_none():
    """A tab of 5 mm with a cut of 3 mm needs 8 mm to the next corner at either side: a side of 16."""
    wide = TabRule(2, 5.0)
    assert places(part((0, 0), (18, 0), (13, 9), (5, 9)), wide, 3.0, 3.0, Keep()) == [pytest.approx((9, 0))]
    assert places(part((0, 0), (12, 0), (12, 6), (0, 6)), wide, 3.0, 3.0, Keep()) == []


@pytest.mark.parametrize(
    ("thickness", "outline", "width", "number"),
    [(2.0, 250.0, 0.3, 2), (6.0, 600.0, 0.6, 2), (3.0, 601.0, 0.3, 3), (None, 50.0, 0.3, 2)],
)
def test_the_rule(thickness, outline, width, number):
    rule = TabRule(2, 0.3, 0.1, 300.0)
    assert rule.width(thickness) == pytest.approx(width)
    assert rule.number(outline) == number


def test_limits_and_distances():
    assert free_limit_mm(None) is None
    assert free_limit_mm(Limit(10.0, None, "")) == 10.0
    assert free_limit_mm(Limit(10.0, 30.0, "")) == 30.0
    assert [clear_mm(t) for t in (None, 0.5, 3.0)] == [2.0, 2.0, 6.0]
