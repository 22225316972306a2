"""Trapezoids and the offsets that two outlines forbid each other, against shapely."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from shapely.affinity import translate
from shapely.geometry import Polygon

from flatprep.nest.trapezoids import back, cut_up, past

SQUARE = np.array([[0.0, 0], [10, 0], [10, 10], [0, 10]])
FRAME = [np.array([[0.0, 0], [30, 0], [30, 30], [0, 30]]), np.array([[5.0, 5], [5, 25], [25, 25], [25, 5]])]


def star(seed, corners=9):
    rng = np.random.default_rng(seed)
    angle = np.sort(rng.uniform(0, 2 * np.pi, corners))
    reach = rng.uniform(5, 40, corners)
    return np.column_stack([reach * np.cos(angle), reach * np.sin(angle)])


def area(trap):
    return float(np.sum((trap[:, 1] - trap[:, 0]) * (trap[:, 4] - trap[:, 2] + trap[:, 5] - trap[:, 3]) / 2))


def span(at, v):
    return int(at[v]), int(at[v + 1])


@given(st.integers(0, 10_000), st.integers(3, 30))
def test_trapezoids_cover_the_outline_once_both_ways(seed, corners):
    ring = star(seed, corners)
    cuts = cut_up([[ring]])
    true = Polygon(ring)
    if not true.is_valid:
        return
    assert area(cuts.row) == pytest.approx(true.area, rel=1e-6, abs=1e-4)
    assert area(cuts.column) == pytest.approx(true.area, rel=1e-6, abs=1e-4)


def test_frame_is_four_trapezoids_and_its_window_is_none_of_them():
    cuts = cut_up([FRAME])
    assert area(cuts.row) == pytest.approx(900 - 400)
    assert len(cuts.row) == 4


def test_square_slides_past_a_square_until_they_touch():
    cuts = cut_up([[SQUARE]])
    one = span(cuts.row_at, 0)
    assert past(cuts.row, one, one, 5.0, 3.0) == pytest.approx(10.0)
    assert past(cuts.row, one, one, 5.0, -10.0) == -10.0  # touching is free
    assert past(cuts.row, one, one, 10.0, 3.0) == 3.0  # lies on top
    assert past(cuts.row, one, one, 5.0, -9.9) == pytest.approx(10.0)


@pytest.mark.parametrize("deep", [1e-7, 3e-5, 0.1])
def test_what_seems_to_be_inside_stays_where_it_is(deep):
    """After a slide down a steep edge a piece may seem so deep in it: it must not slide on, out on the other side."""
    cuts = cut_up([[SQUARE]])
    one = span(cuts.row_at, 0)
    assert back(cuts.row, one, one, 5.0, 10.0 - deep) == 10.0 - deep
    assert back(cuts.row, one, one, 5.0, -10.0) == -np.inf  # it touches on the left: nothing is in the way


def test_square_finds_the_window_of_a_frame():
    cuts = cut_up([FRAME, [SQUARE]])
    frame, square = span(cuts.row_at, 0), span(cuts.row_at, 1)
    assert past(cuts.row, frame, square, 10.0, -5.0) == pytest.approx(5.0)
    assert past(cuts.row, frame, square, 10.0, 15.5) == pytest.approx(30.0)
    assert past(cuts.row, frame, square, 16.0, -5.0) == pytest.approx(30.0)  # crosses the upper bar


def test_sliding_back_stops_at_the_first_thing_met():
    cuts = cut_up([FRAME, [SQUARE]])
    frame, square = span(cuts.row_at, 0), span(cuts.row_at, 1)
    assert back(cuts.row, frame, square, 10.0, 12.0) == pytest.approx(5.0)
    assert back(cuts.row, frame, square, 10.0, 40.0) == pytest.approx(30.0)
    assert back(cuts.row, frame, square, 40.0, 40.0) == -np.inf


@given(st.integers(0, 5000), st.floats(-60, 60), st.floats(-90, 0))
def test_first_free_offset_of_two_stars_agrees_with_shapely(seed, across, along):
    a, b = star(seed), star(seed + 7777)
    pa, pb = Polygon(a), Polygon(b)
    if not (pa.is_valid and pb.is_valid):
        return
    cuts = cut_up([[a], [b]])
    x = past(cuts.row, span(cuts.row_at, 0), span(cuts.row_at, 1), across, along)
    assert pa.intersection(translate(pb, x, across)).area <= 1e-5
    for step in np.linspace(along, x, 12)[1:-1] if x > along else ():  # nothing before it was free by more than a hair
        tried = translate(pb, step, across)
        assert pa.intersection(tried).area > 0.0 or pa.distance(tried) < 1e-6


@given(st.integers(0, 5000), st.floats(-60, 60))
def test_rows_and_columns_tell_the_same(seed, across):
    """A mirror in the diagonal turns rows to columns."""
    a, b = star(seed), star(seed + 1)
    cuts, flipped = cut_up([[a], [b]]), cut_up([[a[:, ::-1]], [b[:, ::-1]]])
    one = past(cuts.row, span(cuts.row_at, 0), span(cuts.row_at, 1), across, -80.0)
    other = past(flipped.column, span(flipped.column_at, 0), span(flipped.column_at, 1), across, -80.0)
    assert one == pytest.approx(other, abs=1e-9)
