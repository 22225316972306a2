"""Values between tabulated thicknesses."""

import pytest

from flatprep.profile.points import between, clamped

POINTS = ((1.0, 10.0), (3.0, 20.0), (4.0, 16.0))


@pytest.mark.parametrize(("at", "value"), [(1.0, 10.0), (2.0, 15.0), (3.0, 20.0), (3.5, 18.0), (4.0, 16.0)])
def test_inside(at, value):
    assert between(POINTS, at) == pytest.approx(value)
    assert clamped(POINTS, at) == pytest.approx(value)


@pytest.mark.parametrize(("at", "end"), [(0.5, 10.0), (9.0, 16.0)])
def test_outside_is_unknown_or_the_nearest_end(at, end):
    assert between(POINTS, at) is None
    assert clamped(POINTS, at) == end


def test_empty_is_unknown():
    assert between((), 1.0) is None
