"""The planar graph's tools."""

import numpy as np
import pytest
from shapely.geometry import GeometryCollection, LineString, Polygon, box

from flatprep.drawing.planar import CHORD_MM, _Source, areal
from flatprep.geom.bulge import circle, points_along, signed_area
from flatprep.model.drawing import Curve


@pytest.mark.parametrize("extra", [[LineString([(0, 0), (0, 10)])], [LineString([(3, 3), (4, 9)]), box(20, 0, 25, 2)]])
def test_only_what_has_an_area_goes_on(extra):
    """The next overlay refuses a mixture of areas and lines."""
    mixed = GeometryCollection([box(0, 0, 10, 10), *extra])
    whole = areal(mixed)
    assert whole.area == pytest.approx(100 + 10 * (len(extra) - 1))
    assert whole.union(box(50, 0, 60, 10), grid_size=0.001).area == pytest.approx(whole.area + 100)


def test_an_area_is_left_as_it_is():
    shape = box(0, 0, 10, 10)
    assert areal(shape) is shape


SQUARE = np.array([[0, 0, 0], [100, 0, 0], [100, 80, 0], [0, 80, 0]], dtype=float)
SLIVER = [(50, 0), (60, 0), (55, 0.0004)]
"""What an overlay leaves between two drawings of one edge: on the edge itself there is nothing of it."""


def test_a_sliver_on_one_edge_is_no_contour():
    source = _Source([Curve(SQUARE, closed=True, layer="0", handle="A1")])
    assert source.rings_of(Polygon(SLIVER), ("0",)) == []


def test_a_sliver_is_no_hole_either():
    source = _Source([Curve(SQUARE, closed=True, layer="0", handle="A1")])
    sliver = [(x, y + 0.0001) for x, y in SLIVER]
    (outer,) = source.rings_of(Polygon(SQUARE[:, :2], [sliver]), ("0",))
    assert signed_area(outer.xyb) == pytest.approx(8000.0)


def test_a_sliver_on_one_arc_is_no_contour():
    source = _Source([Curve(circle(20.0, 30.0, 7.0), closed=True, layer="0", handle="A1")])
    on_it = [(20.0 + 7.0 * np.cos(a), 30.0 + 7.0 * np.sin(a)) for a in (0.5, 0.51, 0.52)]
    assert source.rings_of(Polygon(on_it), ("0",)) == []


def test_two_half_circles_stay_a_circle():
    source = _Source([Curve(circle(20.0, 30.0, 7.0), closed=True, layer="0", handle="A1")])
    points = points_along(circle(20.0, 30.0, 7.0), closed=True, chord_mm=CHORD_MM)
    (outer,) = source.rings_of(Polygon(points), ("0",))
    assert signed_area(outer.xyb) == pytest.approx(np.pi * 49.0)
