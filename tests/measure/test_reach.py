"""What a tool does not enter, against the geometry of a circle in a corner."""

import numpy as np
import pytest

from flatprep.measure.part import MeasuredPart
from flatprep.measure.reach import unreached_regions
from tests.measure.shapes import chorded, circle, moved, obround, part, path, polygon, rectangle

PLATE = rectangle(0, 0, 100, 60)
R = 1.5


def regions(*holes, outer=PLATE, radius=R):
    return unreached_regions(MeasuredPart(part(outer, *holes)), radius)


@pytest.mark.parametrize("turn", [0.0, 23.0])
def test_a_square_window_has_four(turn):
    """In a square corner a circle leaves r² (1 - π / 4), r (√2 - 1) deep."""
    found = regions(moved(rectangle(40, 20, 20, 20), turn), outer=moved(PLATE, turn))
    assert len(found) == 4
    assert [one.area_mm2 for one in found] == pytest.approx([R * R * (1 - np.pi / 4)] * 4, rel=0.02)
    assert [one.depth_mm for one in found] == pytest.approx([R * (np.sqrt(2) - 1)] * 4, abs=0.003)
    assert {one.contour for one in found} == {1}


def test_a_corner_of_60_degrees():
    """r² (cot(θ/2) - (π - θ) / 2): 1.732 - 1.047 = 0.685 r²; r (1 / sin 30 - 1) = r deep."""
    triangle = path((30, 10), (70, 10), (50, 10 + 20 * np.sqrt(3)))
    found = regions(triangle)
    assert [one.area_mm2 for one in found] == pytest.approx([R * R * (np.sqrt(3) - np.pi / 3)] * 3, rel=0.02)
    assert [one.depth_mm for one in found] == pytest.approx([R] * 3, abs=0.003)


def test_a_fillet_drawn_with_chords_is_seen():
    """r 0.5 in the place of 1.5: (1.5² - 0.5²) (1 - π / 4), though no vertex turns sharply."""
    found = regions(chorded(rectangle(40, 20, 20, 20, 0.5), 0.002))
    assert [one.area_mm2 for one in found] == pytest.approx([2.0 * (1 - np.pi / 4)] * 4, rel=0.05)


def test_a_notch_in_the_edge():
    outer = path((0, 0), (40, 0), (40, 20), (60, 20), (60, 0), (100, 0), (100, 60), (0, 60))
    found = regions(outer=outer)
    at_corners = [[one.holds([at], 0.01) for one in found] for at in ((40, 20), (60, 20))]
    assert sorted(at_corners) == [[False, True], [True, False]]
    assert {one.contour for one in found} == {0}


def test_a_narrow_slot_is_lost_as_a_whole():
    (one,) = regions(rectangle(40, 20, 20, 2.9))
    assert one.area_mm2 == pytest.approx(58.0)
    assert one.depth_mm == np.inf
    assert one.holds([(50, 21)], 0.0)
    assert not one.holds([(50, 30)], 5.0)


@pytest.mark.parametrize(
    "hole",
    [
        pytest.param(circle(50, 30, 1.5), id="as wide as the tool"),
        pytest.param(obround(50, 30, 20, 3.0), id="slot as wide as the tool"),
        pytest.param(rectangle(40, 20, 20, 20, 1.5), id="fillets of the tool's radius"),
        pytest.param(polygon(50, 30, 8, 96), id="a circle of chords"),
        pytest.param(chorded(rectangle(40, 20, 20, 20, 2.0), 0.002), id="fine fillets"),
    ],
)
def test_what_the_tool_enters_leaves_nothing(hole):
    assert regions(hole) == ()
