"""Closed polylines measured together: the same as each by itself, and as closed forms say."""

from math import pi, tan

import numpy as np
import pytest
import shapely
from hypothesis import given
from hypothesis import strategies as st

from flatprep.geom import bulge
from flatprep.geom.moments import moments, region_moments
from flatprep.geom.rings import Rings
from tests.geom.test_bulge import SQUARE, fan, fans

STADIUM = np.array([[0.0, 0, 0], [20, 0, 1.0], [20, 10, 0], [0, 10, 1.0]])


@given(st.lists(fans, min_size=1, max_size=4))
def test_each_as_by_itself(parts):
    polylines = [fan(*p) for p in parts]
    rings = Rings.of(polylines)
    for k, xyb in enumerate(polylines):
        assert rings.signed_areas[k] == pytest.approx(bulge.signed_area(xyb), rel=1e-12, abs=1e-12)
        assert rings.lengths[k] == pytest.approx(bulge.length(xyb, closed=True), rel=1e-12)
        assert tuple(rings.bounds[k].tolist()) == bulge.bounds(xyb, closed=True)
        xy, owner = rings.points(0.01)
        assert np.array_equal(xy[owner == k], bulge.points_along(xyb, closed=True, chord_mm=0.01))


def test_closed_forms():
    rings = Rings.of([SQUARE, bulge.circle(50, -30, 5), bulge.reverse(STADIUM, closed=True)])
    assert rings.signed_areas.tolist() == pytest.approx([100.0, 25 * pi, -(200 + 25 * pi)], rel=1e-12)
    assert rings.lengths.tolist() == pytest.approx([40.0, 10 * pi, 40 + 10 * pi], rel=1e-12)
    assert rings.bounds.tolist() == [
        pytest.approx(box, abs=1e-12) for box in ([0, 0, 10, 10], [45, -35, 55, -25], [-5, 0, 25, 10])
    ]


def test_no_rings():
    rings = Rings.of([])
    assert (len(rings.signed_areas), len(rings.lengths), rings.bounds.shape) == (0, 0, (0, 4))


def test_moments_of_a_plate_with_a_hole():
    """Square 10 with a hole of radius 2 about (3, 4): subtract the hole's area and moments by hand."""
    got = region_moments(SQUARE, [bulge.reverse(bulge.circle(3, 4, 2), closed=True)])
    hole = 4 * pi
    assert (got.area, got.sx, got.sy) == pytest.approx((100 - hole, 500 - 3 * hole, 500 - 4 * hole), rel=1e-12)
    assert got.xx == pytest.approx(10**4 / 3 - (pi * 2**4 / 4 + 9 * hole), rel=1e-12)
    assert got.xy == pytest.approx(2500 - 12 * hole, rel=1e-12)


def test_moments_do_not_depend_on_the_direction():
    ways = [moments(xyb) for xyb in (STADIUM, bulge.reverse(STADIUM, closed=True))]
    assert ways[0].area == pytest.approx(ways[1].area, rel=1e-12)
    assert ways[0].centroid == pytest.approx((10, 5), rel=1e-12)
    assert ways[1].centroid == pytest.approx((10, 5), rel=1e-12)


@pytest.mark.parametrize("turn", [1e-12, 1e-9, 1e-6, 1e-3])
def test_box_of_a_nearly_straight_arc(turn):
    """It rises over its chord by chord x bulge / 2, whatever rounding does to its radius."""
    flat = np.array([[0.0, 0, -turn], [100, 0, 0], [100, -10, 0], [0, -10, 0]])
    assert bulge.bounds(flat, closed=True) == pytest.approx((0, -10, 100, 50 * turn), abs=1e-10)


def test_boxes_of_arcs_against_fine_chords():
    arcs = np.array([[0.0, 0, tan(pi / 8)], [10, 0, -tan(pi / 16)], [20, 5, 0.0]])
    seg = bulge.segments(arcs, closed=False)
    for k in range(2):
        fine = bulge.points_along(np.array([arcs[k], [*arcs[k + 1, :2], 0.0]]), closed=False, chord_mm=1e-6)
        assert seg.boxes[k].tolist() == pytest.approx(shapely.LineString(fine).bounds, abs=2e-6)
