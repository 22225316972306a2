"""A remnant's drawing as the border of stock."""

import numpy as np
import pytest
from shapely.geometry import Point, Polygon

from flatprep.base.errors import DrawingError
from flatprep.drawing.remnant import outline_of
from flatprep.geom.bulge import circle, reverse
from flatprep.model.drawing import Contour, Drawing, Fault, Part, UnitsFrom

PLATE = np.array([[0.0, 0, 0], [200, 0, 1], [200, 100, 0], [0, 100, -1]])


def drawing(*parts, faults=()):
    return Drawing("rest.dxf", "mm", UnitsFrom.HEADER, tuple(parts), tuple(faults))


def hole(x, y, radius):
    return Contour(reverse(circle(x, y, radius), closed=True))


def test_border_never_lies_outside_the_drawn_one():
    """Round end out at the right, round bay in at the left, a hole: the polygon has no more material."""
    outer, (inner,) = outline_of(drawing(Part("rest", Contour(PLATE), (hole(120.0, 50.0, 20.0),))))
    right = outer[outer[:, 0] > 200.1]
    assert np.hypot(*(right - [200, 50]).T).max() <= 50.0 + 1e-9
    bay = Polygon(outer)
    assert not bay.intersects(Point(0, 50).buffer(49.99, 256))
    assert Polygon(inner).contains(Point(120, 50).buffer(20.0, 256))
    assert Polygon(inner).area - np.pi * 400 < 2 * np.pi * 20 * 0.01


@pytest.mark.parametrize(
    ("what", "words"),
    [
        pytest.param(drawing(), "no closed outline", id="empty"),
        pytest.param(
            drawing(Part("a", Contour(PLATE)), Part("b", Contour(PLATE + [500, 0, 0]))), "2 outlines", id="two"
        ),
        pytest.param(
            drawing(Part("a", Contour(PLATE)), faults=[Fault("open-contour", (1.0, 2.0), 0.5)]),
            r"does not close at \(1.00, 2.00\)",
            id="open",
        ),
        pytest.param(
            drawing(Part("a", Contour(PLATE)), faults=[Fault("self-crossing")]), "crosses itself", id="crossing"
        ),
        pytest.param(
            drawing(Part("a", Contour(np.array([[0.0, 0, 0], [9, 9, 0], [9, 0, 0], [0, 9, 0]])))),
            "crosses itself",
            id="bow-tie",
        ),
    ],
)
def test_drawing_that_is_no_remnant_is_refused(what, words):
    with pytest.raises(DrawingError, match=words):
        outline_of(what)
