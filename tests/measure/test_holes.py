"""Holes recognised however they are drawn, against their own dimensions."""

import numpy as np
import pytest

from flatprep.geom import bulge
from flatprep.measure.holes import HoleShape, inscribed_diameter, recognise, recognise_all
from tests.measure.shapes import chorded, circle, contour, moved, obround, path, polygon, rectangle

ARCS_OF_4 = path(*((x, y, np.tan(np.pi / 8)) for x, y in ((25, 0), (20, 5), (15, 0), (20, -5))))
KEYHOLE = path((-1, 0), (1, 0), (1, 10), (-1, 10))


@pytest.mark.parametrize(
    ("xyb", "diameter", "chords"),
    [
        pytest.param(circle(20, 0, 5), 10.0, False, id="two-halves"),
        pytest.param(ARCS_OF_4, 10.0, False, id="four-arcs"),
        pytest.param(polygon(20, 0, 5, 96), 10.0, True, id="96-chords"),
        pytest.param(polygon(20, 0, 5, 12), 10.0, True, id="regular-12"),
        pytest.param(chorded(circle(20, 0, 40), 0.019), 80.0, True, id="chords-within-0.02"),
    ],
)
def test_circles(xyb, diameter, chords):
    hole = recognise(contour(xyb, hole=True))
    assert hole.shape is HoleShape.CIRCLE
    assert hole.diameter_mm == pytest.approx(diameter, abs=1e-9)
    assert hole.at == pytest.approx((20, 0), abs=1e-9)
    assert hole.chords is chords


@pytest.mark.parametrize("sides", [8, 11])
def test_coarse_polygons_are_no_circles(sides):
    # the sagitta of 11 chords on a circle of radius 5 is 0.2 mm: it was meant as it is drawn
    assert recognise(contour(polygon(0, 0, 5, sides), hole=True)).shape is HoleShape.OTHER


@pytest.mark.parametrize(("sagitta", "shape"), [(0.019, HoleShape.CIRCLE), (0.03, HoleShape.OTHER)])
def test_uneven_chords_stand_for_a_circle_within_two_hundredths(sagitta, shape):
    # chords of two lengths, the longer ones with this sagitta: r (1 - cos half)
    half = np.arccos(1 - sagitta / 20)
    steps = np.tile([2 * half, half], int(2 * np.pi / (3 * half)))
    angles = np.append(0, np.cumsum(steps))
    points = angles[angles < 2 * np.pi - half / 2]
    hole = recognise(contour(path(*np.column_stack([20 * np.cos(points), 20 * np.sin(points)])), hole=True))
    assert hole.shape is shape


def test_fine_chords_keep_their_shape():
    # 20,000 chords of 0.04 mm: each joint turns by a three-hundredth of a degree, all together once round
    angles = 2 * np.pi * np.arange(20_000) / 20_000
    unit = np.column_stack([np.cos(angles), np.sin(angles)])
    round_hole = recognise(contour(path(*(unit * 120).tolist()), hole=True))
    assert round_hole.diameter_mm == pytest.approx(240, abs=1e-6)
    oval = recognise(contour(path(*(unit * (120, 50)).tolist()), hole=True))
    assert (oval.width_mm, oval.length_mm) == (pytest.approx(100, abs=1e-2), pytest.approx(240, abs=1e-2))
    assert len(oval.exact) < 2000
    assert -bulge.signed_area(oval.exact) == pytest.approx(np.pi * 120 * 50, rel=1e-5)


@pytest.mark.parametrize("off", [0.0, 1e-4])
def test_split_sides_are_one(off):
    # coordinates in files are rounded: a vertex on a side lies a tenth of a micrometre beside it
    split = path((-6, -2), (0, -2 - off), (1, -2), (6, -2), (6, 2), (-1, 2 + off), (-6, 2))
    hole = recognise(contour(moved(split, 20), hole=True))
    assert (hole.shape, hole.width_mm) == (HoleShape.RECTANGLE, pytest.approx(4, abs=1e-3))


def test_circle_with_one_chord_too_long_is_a_flat():
    points = chorded(circle(0, 0, 5), 0.001)
    flat = np.vstack([points[:20], points[40:]])
    assert recognise(contour(flat, hole=True)).shape is HoleShape.OTHER


TURNS = pytest.mark.parametrize("turn", [0.0, 30.0, 147.0])


@TURNS
@pytest.mark.parametrize(
    ("xyb", "shape", "width", "length"),
    [
        pytest.param(rectangle(-6, -2, 12, 4), HoleShape.RECTANGLE, 4, 12, id="rectangle"),
        pytest.param(rectangle(-6, -5, 12, 10, 2), HoleShape.RECTANGLE, 10, 12, id="rounded"),
        pytest.param(obround(0, 0, 20, 6), HoleShape.OBROUND, 6, 20, id="obround"),
        pytest.param(chorded(obround(0, 0, 20, 6), 0.005), HoleShape.OBROUND, 6, 20, id="obround-chords"),
        # across flats is across corners times cos 30°
        pytest.param(polygon(0, 0, 10 / np.sqrt(3), 6), HoleShape.HEXAGON, 10, 20 / np.sqrt(3), id="hexagon"),
        pytest.param(path((-6, -2), (0, -2), (6, -2), (6, 2), (-6, 2)), HoleShape.RECTANGLE, 4, 12, id="split-side"),
    ],
)
def test_other_shapes(xyb, shape, width, length, turn):
    hole = recognise(contour(moved(xyb, turn, 300, -40), hole=True))
    assert hole.shape is shape
    assert hole.width_mm == pytest.approx(width, abs=2e-3)
    assert hole.length_mm == pytest.approx(length, abs=2e-3)
    assert hole.at == pytest.approx((300, -40), abs=2e-3)


@TURNS
def test_direction_of_an_obround(turn):
    hole = recognise(contour(moved(obround(0, 0, 20, 6), turn), hole=True))
    assert np.degrees(hole.angle_rad) % 180 == pytest.approx(turn % 180, abs=1e-6)


@pytest.mark.parametrize(
    "xyb",
    [
        pytest.param(path((0, 0), (12, 0), (12, 4), (6, 4), (6, 8), (0, 8)), id="L"),
        pytest.param(path((0, 0), (10, 0), (12, 5), (0, 5)), id="trapezoid"),
        pytest.param(path((0, 0), (10, 0, -1.0), (10, 4), (0, 4, 1.0)), id="one-end-hollow"),
        pytest.param(path((0, 0), (10, 0, 0.5), (10, 4), (0, 4, 0.5)), id="flat-round-ends"),
    ],
)
def test_anything_else_stays_what_it_is(xyb):
    assert recognise(contour(xyb, hole=True)).shape is HoleShape.OTHER


@pytest.mark.parametrize(
    ("length", "is_long"), [(7.99, False), (8.0, True), (8.0 - 1e-12, True), (30.0, True)], ids=str
)
def test_long_from_twice_the_width(length, is_long):
    assert recognise(contour(obround(0, 0, length, 4), hole=True)).is_long is is_long


def test_measured_contour_of_chords_is_the_true_one():
    hole = recognise(contour(moved(chorded(obround(0, 0, 20, 6), 0.005), 40, 7, 7), hole=True))
    # stadium: width² π / 4 + width (length - width); clockwise like the drawn hole
    assert bulge.signed_area(hole.exact) == pytest.approx(-(np.pi * 9 + 6 * 14), rel=1e-3)
    assert len(hole.exact) == 4


def test_inscribed_circle():
    # the largest circle in a right triangle with legs 6 and 8 has radius (6 + 8 - 10) / 2 = 2
    assert inscribed_diameter(contour(path((0, 0), (8, 0), (0, 6)), hole=True)) == pytest.approx(4.0, abs=0.01)
    assert inscribed_diameter(contour(KEYHOLE, hole=True)) == pytest.approx(2.0, abs=0.01)


def test_many_contours_at_once_as_each_by_itself():
    shapes = [circle(20, 0, 5), polygon(20, 0, 5, 96), KEYHOLE, ARCS_OF_4, obround(3, 2, 30, 4), rectangle(1, 2, 9, 5)]
    shapes += [polygon(3, 4, 8, 6), chorded(obround(0, 0, 30, 4), 0.01), polygon(0, 0, 5, 9)]
    # a vertex drawn twice, and straight sides in many pieces
    shapes.append(path((0, 0), (5, 0), (5, 0), (9, 0), (9, 7)))
    sides = np.linspace(0.0, 1.0, 17)[:-1]
    square = np.array([[0.0, 0], [40, 0], [40, 10], [0, 10]])
    run = [tuple(a + (z - a) * s) for a, z in zip(square, np.roll(square, -1, axis=0), strict=True) for s in sides]
    shapes.append(path(*run))
    contours = [contour(xyb, hole=True) for xyb in shapes]
    together = recognise_all(contours)
    assert together[-1].shape is HoleShape.RECTANGLE
    assert (together[-1].width_mm, together[-1].length_mm) == pytest.approx((10, 40))
    for hole, one in zip(together, contours, strict=True):
        alone = recognise(one)
        assert hole.contour is one
        assert (hole.shape, hole.chords) == (alone.shape, alone.chords)
        figures = [(*h.at, h.width_mm, h.length_mm, h.angle_rad) for h in (hole, alone)]
        assert figures[0] == pytest.approx(figures[1], abs=1e-12)


def test_no_contours():
    assert recognise_all([]) == ()
