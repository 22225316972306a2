"""The constructive rule: sound, touching, filling holes."""

import numpy as np
import pytest
from hypothesis import example, given, settings
from hypothesis import strategies as st
from shapely import STRtree
from shapely.geometry import MultiPoint, Polygon

from flatprep.geom.bulge import Similarity
from flatprep.nest.construct import MOST_TURNS, Bin, Layer, few_turns, least_box_turn
from flatprep.nest.shapes import Container, Shape

QUARTERS = (0.0, 90.0, 180.0, 270.0)


def box(width, height):
    return np.array([[0.0, 0], [width, 0], [width, height], [0, height]])


def bin_of(shapes, width, height, holes=()):
    return Bin(Container(box(width, height), holes), tuple(s.turns_deg for s in shapes))


def polygons(laid, shapes):
    found = []
    for p in laid.places:
        move = Similarity(turn_deg=p.turn_deg, dx=p.x, dy=p.y, mirrored=p.mirrored)
        shape = shapes[p.shape]
        found.append(Polygon(move.points(shape.outer), [move.points(h) for h in shape.holes]))
    return found


def all_of(shapes):
    return [s for s, shape in enumerate(shapes) for _ in range(shape.count)]


def assert_sound(laid, shapes, width, height):
    found = polygons(laid, shapes)
    for p in found:
        x0, y0, x1, y1 = p.bounds
        assert x0 >= -1e-6
        assert y0 >= -1e-6
        assert x1 <= width + 1e-6
        assert y1 <= height + 1e-6
    for i, j in STRtree(found).query(found).T:
        if i < j:
            assert found[i].intersection(found[j]).area < 1e-4


def test_squares_fill_a_sheet_to_the_last():
    shapes = [Shape(box(50.0, 50.0), count=12)]
    laid = Layer(shapes, [bin_of(shapes, 200.0, 150.0)]).lay(all_of(shapes), [0])
    assert laid.left_out == (0,)
    assert {(round(p.x), round(p.y)) for p in laid.places} == {(x, y) for x in (0, 50, 100, 150) for y in (0, 50, 100)}


def test_thirteenth_square_is_left_out_or_goes_on_the_next_sheet():
    shapes = [Shape(box(50.0, 50.0), count=13)]
    layer = Layer(shapes, [bin_of(shapes, 200.0, 150.0)])
    assert layer.lay(all_of(shapes), [0]).left_out == (1,)
    assert [p.container for p in layer.lay(all_of(shapes), [0, 0]).places] == [0] * 12 + [1]


def test_small_piece_goes_into_a_window():
    frame = Shape(box(100.0, 100.0), (box(60.0, 60.0) + 20.0,))
    shapes = [frame, Shape(box(60.0, 60.0))]
    laid = Layer(shapes, [bin_of(shapes, 100.0, 100.0)]).lay([0, 1], [0])
    assert laid.left_out == (0, 0)
    assert laid.places[1].x == pytest.approx(20.0, abs=1e-6)


def test_two_wedges_make_a_square_when_they_may_turn():
    wedge = np.array([[0.0, 0], [100, 0], [0, 100]])
    shapes = [Shape(wedge, turns_deg=(0.0, 180.0), count=2)]
    laid = Layer(shapes, [bin_of(shapes, 100.0, 100.0)]).lay([0, 0], [0])
    assert laid.left_out == (0,)
    assert_sound(laid, shapes, 100.0, 100.0)


def test_piece_keeps_out_of_a_hole_of_the_container():
    shapes = [Shape(box(45.0, 45.0), count=8)]
    hole = box(20.0, 20.0) + 40.0
    laid = Layer(shapes, [bin_of(shapes, 100.0, 100.0, (hole,))]).lay(all_of(shapes), [0])
    for p in polygons(laid, shapes):
        assert p.intersection(Polygon(hole)).area < 1e-9
    assert len(laid.places) == 0 or all(p.container == 0 for p in laid.places)


def test_piece_that_fits_only_lying_is_laid_lying():
    shapes = [Shape(box(20.0, 90.0), turns_deg=QUARTERS)]
    laid = Layer(shapes, [bin_of(shapes, 100.0, 30.0)]).lay([0], [0])
    assert laid.places[0].turn_deg in (90.0, 270.0)


def test_empty_turns_keep_a_shape_off_a_sheet():
    shapes = [Shape(box(10.0, 10.0))]
    layer = Layer(shapes, [Bin(Container(box(50.0, 50.0)), ((),))])
    assert not layer.fits_alone(0, 0)


@settings(max_examples=25)
@given(st.integers(0, 10_000))
def test_random_stars_never_overlap(seed):
    rng = np.random.default_rng(seed)
    shapes = []
    for _ in range(6):
        angle = np.sort(rng.uniform(0, 2 * np.pi, 9))
        if np.diff(np.append(angle, angle[0] + 2 * np.pi)).max() > 3.0:
            continue
        reach = rng.uniform(10, 40, 9)
        outer = np.column_stack([reach * np.cos(angle), reach * np.sin(angle)])
        shapes.append(Shape(outer, turns_deg=None if rng.random() < 0.5 else QUARTERS, mirror=(False, True), count=3))
    laid = Layer(shapes, [bin_of(shapes, 900.0, 200.0)]).lay(all_of(shapes), [0])
    assert sum(laid.left_out) == 0
    assert_sound(laid, shapes, 900.0, 200.0)


def leaning(rng, lean_deg):
    """A convex piece with a long flat, drawn level, or leaning a little to either side."""
    corners = int(rng.integers(6, 40))
    size = rng.uniform(20.0, 60.0)
    angle, reach = rng.uniform(0.0, 2.0 * np.pi, corners), size * rng.uniform(0.85, 1.15, corners)
    points = np.column_stack([np.minimum(reach * np.cos(angle), 0.5 * size), reach * np.sin(angle)])
    ring = np.asarray(MultiPoint(points).convex_hull.exterior.coords)[:-1][::-1]
    return Similarity(turn_deg=lean_deg * rng.choice([0.0, 1.0, -1.0])).points(ring)


@given(st.integers(0, 100_000))
@example(50)  # these overlapped by up to some square millimetres
@example(84)
@example(153)
def test_pieces_that_lean_a_little_never_slide_through_each_other(seed):
    """Down a steep edge and then left: a contact good to a hair in height is deep along the level."""
    rng = np.random.default_rng(seed)
    lean_deg = rng.uniform(1e-4, 1.0)
    shapes = [Shape(leaning(rng, lean_deg), turns_deg=None, count=6) for _ in range(3)]
    laid = Layer(shapes, [bin_of(shapes, 400.0, 400.0)], coarse=False).lay(all_of(shapes), [0])
    assert_sound(laid, shapes, 400.0, 400.0)


def test_least_box_of_a_turned_rectangle_is_found():
    turned = Similarity(turn_deg=30.0).points(box(100.0, 20.0))
    assert least_box_turn(turned) % 90.0 == pytest.approx(60.0)


def test_turns_tried_are_the_listed_ones_when_they_are_few():
    shape = Shape(box(10.0, 20.0), turns_deg=(0.0, 33.0))
    assert few_turns(shape, shape.turns_deg) == (0.0, 33.0)
    many = tuple(float(t) for t in range(0, 360, 5))
    tried = few_turns(shape, many)
    assert len(tried) <= MOST_TURNS
    assert set(tried) <= set(many)
    assert {0.0, 90.0, 180.0, 270.0} <= set(tried)
