"""Polygons that hold a contour wholly."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from shapely.geometry import Point, Polygon

from flatprep.geom.bulge import circle, reverse, signed_area
from flatprep.geom.outward import outside_points, simplify_outward


def test_straight_contour_stays_as_it_is():
    square = np.array([[0.0, 0, 0], [4, 0, 0], [4, 3, 0], [0, 3, 0]])
    assert np.array_equal(outside_points(square, 0.1), square[:, :2])


@given(st.floats(0.5, 500.0), st.sampled_from([0.1, 0.01, 1e-4]))
def test_disc_lies_in_its_polygon_and_no_point_is_farther_than_the_chord_error(radius, chord):
    points = outside_points(circle(3.0, -2.0, radius), chord)
    off = np.hypot(points[:, 0] - 3.0, points[:, 1] + 2.0) - radius
    assert off.max() <= chord * (1 + 1e-9)
    edges = Polygon(points).exterior.distance(Point(3.0, -2.0))
    assert edges >= radius * (1 - 1e-12)


@given(st.floats(0.5, 500.0), st.sampled_from([0.1, 0.01]))
def test_hole_lies_around_its_polygon(radius, chord):
    """A hole is void: its polygon must lie inside the true circle, chords no deeper than asked."""
    points = outside_points(reverse(circle(0.0, 0.0, radius), closed=True), chord)
    assert np.hypot(*points.T).max() <= radius * (1 + 1e-12)
    assert Polygon(points).exterior.distance(Point(0, 0)) >= radius - chord * (1 + 1e-9)


def test_half_circle_bowing_in_is_cut_by_chords_and_bowing_out_by_tangents():
    """A plate with one round side out (area + pi r^2 / 2) and the like side in (area - pi r^2 / 2)."""
    plate = np.array([[0.0, 0, 0], [30, 0, 1], [30, 10, 0], [0, 10, -1]])
    points = outside_points(plate, 0.01)
    true = signed_area(plate)
    assert true == pytest.approx(300.0)
    grown = Polygon(points).area - true
    assert 0.0 < grown < 2 * np.pi * 5 * 0.01


def comb(teeth):
    top = [(x, y) for k in range(teeth) for x, y in ((k + 0.55, 3.0), (k + 0.5, 1.0), (k + 0.05, 1.0), (k, 3.0))]
    return np.array([(0.0, 0.0), (teeth, 0.0), *sorted(top, key=lambda p: -p[0])])


def star(seed, corners):
    rng = np.random.default_rng(seed)
    angle = np.sort(rng.uniform(0, 2 * np.pi, corners))
    reach = rng.uniform(20, 40, corners)
    return np.column_stack([reach * np.cos(angle), reach * np.sin(angle)])


@given(st.integers(0, 10_000), st.integers(8, 60), st.sampled_from([0.5, 2.0]))
def test_simpler_ring_holds_the_old_one_and_stays_near(seed, corners, tolerance):
    ring = star(seed, corners)
    before = Polygon(ring)
    after = Polygon(simplify_outward(ring, tolerance))
    if not after.is_valid:  # a ring that crosses itself is for the caller to refuse
        return
    assert len(after.exterior.coords) <= len(before.exterior.coords)
    assert before.difference(after).area <= 1e-9 * before.area
    assert (
        after.hausdorff_distance(before) <= tolerance * 1.001 or after.difference(before.buffer(tolerance)).area < 1e-6
    )


def test_many_corners_on_a_circle_become_few():
    ring = outside_points(circle(0, 0, 50.0), 1e-4)
    fewer = simplify_outward(ring, 0.2)
    # tangents 0.2 mm off a circle of 50 mm: 2 acos(50 / 50.2) = 0.179 rad apart, 36 at the least
    assert 36 <= len(fewer) <= 72 < len(ring)


def test_points_on_a_straight_edge_go():
    ring = np.array([[0.0, 0], [1, 0], [2, 0], [5, 0], [5, 5], [0, 5], [0, 2]])
    assert len(simplify_outward(ring, 0.01)) == 4
