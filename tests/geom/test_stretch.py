"""Stretches of closed polylines: lengths on a rectangle and a stadium are known by hand."""

from math import pi, tan

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.geom.bulge import circle, length
from flatprep.geom.stretch import nearest, point_at, stretch, without

BOX = np.array([[0.0, 0, 0], [20, 0, 0], [20, 10, 0], [0, 10, 0]])
STADIUM = np.array([[0.0, 0, 0], [40, 0, 1], [40, 20, 0], [0, 20, 1]])
"""Two straight sides of 40 and two half circles of radius 10, which end at x = 50 and x = -10."""


@pytest.mark.parametrize(
    ("xyb", "s", "point", "way"),
    [
        (BOX, 0.0, (0, 0), (1, 0)), (BOX, 25.0, (20, 5), (0, 1)), (BOX, 60.0 + 5.0, (5, 0), (1, 0)),
        (STADIUM, 40 + 5 * pi, (50, 10), (0, 1)), (STADIUM, 80 + 15 * pi, (-10, 10), (0, -1)),
        (circle(1, 2, 3), 1.5 * pi, (1, 5), (-1, 0)),
    ],
)  # fmt: skip
def test_point_at(xyb, s, point, way):
    at, along = point_at(xyb, s)
    assert tuple(at) == pytest.approx(point, abs=1e-9)
    assert tuple(along) == pytest.approx(way, abs=1e-9)


@pytest.mark.parametrize(
    ("point", "s"),
    [
        ((7, -3), 7.0),
        ((60, 10), 40 + 5 * pi),
        ((-30, 10), 80 + 15 * pi),
        ((20, 25), 40 + 10 * pi + 20),
        ((39, 1), 39.0),
    ],
)
def test_nearest(point, s):
    assert nearest(STADIUM, point) == pytest.approx(s, abs=1e-9)


def test_a_stretch_over_the_start_and_through_part_of_an_arc():
    """From 5 pi before the end (half of the left half circle) to 3 past the start."""
    whole = 80 + 20 * pi
    got = stretch(STADIUM, (whole - 5 * pi, whole + 3))
    assert got[:, :2].tolist() == pytest.approx(np.array([[-10, 10], [0, 0], [3, 0]]), abs=1e-9)
    assert got[0, 2] == pytest.approx(tan(pi / 2 / 4))
    assert got[1:, 2].tolist() == [0.0, 0.0]


def test_what_is_left_without_two_stretches():
    left = without(BOX, [(9, 11), (39, 41)])
    assert [piece[:, :2].tolist() for piece in left] == [
        pytest.approx(np.array(p)) for p in ([[11, 0], [20, 0], [20, 10], [11, 10]], [[9, 10], [0, 10], [0, 0], [9, 0]])
    ]


def test_stretches_that_overlap_or_run_over_the_start_count_once():
    left = without(BOX, [(-2, 3), (2, 5), (58, 59)])
    assert [length(piece, closed=False) for piece in left] == [pytest.approx(53.0)]
    assert without(BOX, [(0, 60)]) == []


@given(st.floats(0, 140), st.floats(0.01, 60))
def test_a_stretch_is_as_long_as_asked(start, long):
    got = stretch(STADIUM, (start, start + long))
    assert length(got, closed=False) == pytest.approx(long, abs=1e-6)
    assert nearest(STADIUM, tuple(got[0, :2])) % (80 + 20 * pi) == pytest.approx(start % (80 + 20 * pi), abs=1e-6)
