"""Kerf allowed for: contours move into the waste by half of it."""

import numpy as np
import pytest

from flatprep.base.errors import OutputError
from flatprep.drawing.forms import with_kerf
from flatprep.geom.bulge import circle, reverse
from flatprep.model.drawing import Contour, Part

SQUARE = np.array([[0.0, 0, 0], [40, 0, 0], [40, 40, 0], [0, 40, 0]])


def part(*holes):
    return Part("leaf", Contour(SQUARE), tuple(Contour(h) for h in holes))


def test_outside_grows_and_hole_shrinks():
    moved = with_kerf(part(reverse(circle(20, 20, 5), closed=True)), 0.4)
    assert moved.outer.bounds == pytest.approx((-0.2, -0.2, 40.2, 40.2), abs=1e-9)
    # a square grown by r with round corners: a^2 + 4 a r + pi r^2
    assert moved.outer.area_mm2 == pytest.approx(1600 + 4 * 40 * 0.2 + np.pi * 0.04, abs=1e-3)
    assert moved.holes[0].circle == pytest.approx((20, 20, 4.8))


def test_directions_stay():
    from flatprep.geom.bulge import signed_area

    window = reverse(SQUARE * np.array([0.5, 0.5, 1.0]) + np.array([10, 10, 0]), closed=True)
    moved = with_kerf(part(window), 0.4)
    assert signed_area(moved.outer.xyb) > 0 > signed_area(moved.holes[0].xyb)
    assert moved.holes[0].area_mm2 == pytest.approx((20 - 0.4) ** 2, abs=1e-6)


@pytest.mark.parametrize(
    "hole",
    [
        pytest.param(reverse(circle(20, 20, 0.2), closed=True), id="hole as wide as the kerf"),
        pytest.param(np.array([[10.0, 10, 0], [10, 10.3, 0], [30, 10.3, 0], [30, 10, 0]]), id="slot narrower than it"),
    ],
)
def test_contour_that_does_not_survive(hole):
    with pytest.raises(OutputError, match="leaf"):
        with_kerf(part(hole), 0.4)
