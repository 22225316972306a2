"""What lies how near to a bend line in the flat, against the drawn dimensions."""

import numpy as np
import pytest

from flatprep.job.values import BendAsk
from flatprep.measure.bends import BendLine, bend_lines, legs_mm, rim_to_line
from flatprep.measure.holes import recognise
from flatprep.model.drawing import Curve
from tests.measure.shapes import circle, contour, moved, part, path, rectangle

LINE = BendLine((0, 20), (100, 20))


@pytest.mark.parametrize(
    ("hole", "apart", "place"),
    [
        pytest.param(circle(50, 30, 4), 6.0, (50, 23), id="circle"),
        pytest.param(rectangle(40, 25, 10, 10), 5.0, (40, 22.5), id="rectangle"),
        pytest.param(circle(50, 21, 4), -3.0, (50, 20), id="circle-over-the-line"),
        pytest.param(rectangle(40, 18, 10, 12), -2.0, (40, 20), id="rectangle-over-the-line"),
        pytest.param(circle(106, 20, 4), 2.0, (101, 20), id="beyond-the-end"),
    ],
)
def test_rim_to_line(hole, apart, place):
    found, at = rim_to_line(recognise(contour(hole, hole=True)), LINE)
    assert found == pytest.approx(apart, abs=1e-6)
    # the nearest place of a side that runs along the line is any of it
    assert at[1] == pytest.approx(place[1], abs=1e-6)
    assert at[0] == pytest.approx(place[0], abs=10.0 if len(hole) == 4 else 1e-6)


@pytest.mark.parametrize("noise", [0.0, 1e-12, -1e-12, 3e-3, -3e-3])
@pytest.mark.parametrize("hole", [rectangle(100, 14, 8, 10), circle(104, 20, 4)], ids=["window", "circle"])
def test_a_line_that_ends_on_a_relief_touches_it(hole, noise):
    """Whether the last digit puts the line's end inside or outside must not matter."""
    line = BendLine((0, 20), (100 + noise, 20))
    assert rim_to_line(recognise(contour(hole, hole=True)), line)[0] == 0.0


@pytest.mark.parametrize("turn", [0.0, 90.0, 33.0])
def test_legs(turn):
    plate = part(moved(rectangle(0, 0, 100, 60), turn, 5, 7))
    (a, b), (c, d) = (moved(path((0, y), (100, y)), turn, 5, 7)[:, :2].tolist() for y in (20, 45))
    first, second = BendLine(tuple(a), tuple(b)), BendLine(tuple(c), tuple(d))
    assert legs_mm(plate, [first])[0] == pytest.approx((40, 20), abs=1e-4)
    # up to the next bend only
    two = legs_mm(plate, [first, second])
    assert two[0] == pytest.approx((25, 20), abs=1e-4)
    assert two[1] == pytest.approx((15, 25), abs=1e-4)


def test_asked_lines_stand_for_drawn_ones():
    drawn = [Curve(np.array([[0, y, 0], [100, y, 0]], float), closed=False, layer="BEND") for y in (20, 45)]
    plate = part(rectangle(0, 0, 100, 60), bends=tuple(drawn))
    asks = (BendAsk(90.0, 2.0, line=((0, 20), (100, 20))),)
    asked, other = bend_lines(plate, asks)
    assert (asked.said, asked.radius_mm) == (True, 2.0)
    assert (other.said, other.radius_mm, other.middle) == (False, None, (50, 45))
    both = bend_lines(plate, (BendAsk(45.0, 3.0, layer="bend"),))
    assert [(line.said, line.angle_deg) for line in both] == [(True, 45.0), (True, 45.0)]


@pytest.mark.parametrize(("end", "off"), [((10, 0), 0.0), ((0, 10), 90.0), ((-10, 10), 45.0), ((10, -0.001), 0.0)])
def test_angle_from_the_grain(end, off):
    line = BendLine((0, 0), end)
    assert line.degrees_from("x") == pytest.approx(off, abs=0.01)
    assert line.degrees_from("y") == pytest.approx(90 - off, abs=0.01)
