"""Polygons of contours, however small beside the chord error that is allowed."""

import numpy as np
import pytest

from flatprep.geom.bulge import circle, points_along
from flatprep.geom.polygons import polygon, ring

SEGMENT = np.array([[0.0, 0, 0], [0.1, 0, 0.2]])
"""A chord of 0.1 mm and a flat arc."""
LENS = np.array([[0.0, 0, 0.1], [0.1, 0, 0.1]])
SQUARE = np.array([[-5.0, -5, 0], [5, -5, 0], [5, 5, 0], [-5, 5, 0]])


@pytest.mark.parametrize("hole", [circle(0.0, 0.0, 0.3), SEGMENT, LENS], ids=["circle", "segment", "lens"])
def test_what_is_smaller_than_the_chord_error_is_a_ring_all_the_same(hole):
    points = ring(hole, 0.5)
    assert len(points) >= 3
    assert {tuple(v) for v in hole[:, :2].tolist()} <= {tuple(v) for v in points.tolist()}
    shape = polygon(SQUARE, [hole], chord_mm=0.5)
    assert shape.is_valid
    assert 99.5 < shape.area < 100.0


def test_an_arc_without_any_size_is_a_point():
    assert points_along(np.array([[3.0, 4, 0.5], [3, 4, 0]]), closed=False, chord_mm=0.05).tolist() == [[3, 4], [3, 4]]


def test_points_without_arcs_are_left_alone():
    assert ring(SQUARE, 0.5).tolist() == SQUARE[:, :2].tolist()
    assert len(ring(SQUARE[:2], 0.5)) == 2
