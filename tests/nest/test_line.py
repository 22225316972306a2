"""Where the search goes on from when a layout leads no further."""

import numpy as np

from flatprep.nest.engine import Spots
from flatprep.nest.line import Line

STUCK = 12_000_000


def layout(length_mm: float, rects: int = 1) -> Spots:
    none = np.zeros(0)
    return Spots(none.astype(np.int64), none.astype(np.int64), none, none.reshape(0, 2), rects, length_mm)


def test_a_line_is_stuck_so_many_positions_after_its_last_gain():
    line = Line(layout(1000.0), 5)
    assert not line.is_stuck(5 + STUCK)
    assert line.is_stuck(6 + STUCK)
    line.add(layout(999.0), 100)
    assert not line.is_stuck(100 + STUCK)
    line.add(layout(999.0), STUCK)  # no gain
    assert line.is_stuck(101 + STUCK)


def test_a_line_of_several_rectangles_is_never_stuck():
    assert not Line(layout(1000.0, rects=2), 0).is_stuck(10 * STUCK)


def test_a_line_goes_back_to_where_it_was_a_hundredth_longer():
    line = Line(layout(1200.0), 0)
    for n, length in enumerate([1020.0, 1012.0, 1009.0, 1000.0]):
        line.add(layout(length), n)
    line.go_back(50)
    assert line.last.length_mm == 1012.0
    assert not line.is_stuck(50 + STUCK)
    line.go_back(60)
    assert line.last.length_mm == 1200.0
    line.go_back(70)
    assert line.last.length_mm == 1200.0


def test_a_line_goes_back_over_a_change_of_rectangles_but_not_beyond():
    line = Line(layout(10.0, rects=2), 0)
    line.add(layout(1000.0), 1)
    line.go_back(2)
    assert line.last.rects == 2


def test_a_layout_that_is_no_better_takes_the_place_of_the_last():
    line = Line(layout(1000.0), 0)
    other = layout(1001.0)
    line.add(other, 1)
    assert line.last is other
    line.go_back(2)
    assert line.last is other
