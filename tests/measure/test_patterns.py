"""Hole patterns compared between parts, however these lie."""

import pytest

from flatprep.measure.part import MeasuredPart
from flatprep.measure.patterns import MOST_HOLES, patterns_of, shared_patterns
from tests.measure.shapes import circle, moved, part, rectangle


def plate(name, pitch, *, turn=0.0, diameter=5.0, extra=()):
    holes = (circle(20 + pitch * i, 20 + 30 * j, diameter / 2) for i in (0, 1) for j in (0, 1))
    shapes = [rectangle(0, 0, 120, 80), *holes, *extra]
    return MeasuredPart(part(*(moved(s, turn, 300 * turn, 7) for s in shapes), name=name))


def test_congruent_however_they_lie():
    (shared,) = shared_patterns([plate("leaf", 40), plate("stem", 40, turn=33.0, diameter=6.0)])
    assert shared.congruent
    assert (shared.first.diameter_mm, shared.second.diameter_mm) == (pytest.approx(5), pytest.approx(6))
    # sides 30 and 40, diagonals 50
    assert shared.first.distances_mm == pytest.approx((30, 30, 40, 40, 50, 50))


def test_near_miss_is_named():
    (shared,) = shared_patterns([plate("leaf", 40), plate("stem", 40.5, turn=90.0)])
    assert not shared.congruent
    assert shared.differs_mm == pytest.approx(0.5)
    assert shared.distances_mm == pytest.approx((40.0, 40.5))


@pytest.mark.parametrize(
    ("pitch", "count", "congruent"), [(40.049, 1, True), (40.06, 1, False), (40.99, 1, False), (41.01, 0, None)]
)
def test_limits(pitch, count, congruent):
    found = shared_patterns([plate("leaf", 40), plate("stem", pitch)])
    assert [s.congruent for s in found] == [congruent] * count


def test_other_holes_are_other_patterns():
    odd = plate("leaf", 40, extra=[circle(90, 60, 4), circle(100, 60, 4), circle(60, 70, 1)])
    assert [(len(p.at), p.diameter_mm) for p in patterns_of(odd)] == [(4, pytest.approx(5)), (2, pytest.approx(8))]


def test_near_misses_come_first_and_own_holes_do_not_count():
    found = shared_patterns([plate("leaf", 40), plate("stem", 40), plate("hub", 40.4)])
    assert [s.congruent for s in found] == [False, False, True]
    assert shared_patterns([plate("leaf", 40, extra=[circle(90, 10, 4), circle(90, 50, 4)])]) == ()


def test_rows_of_many_holes_are_no_pattern():
    row = [circle(5 + 9 * k, 70, 1) for k in range(MOST_HOLES + 1)]
    assert len(patterns_of(plate("leaf", 40, extra=row))) == 1
