"""The pieces the search is made of: clock, circles, outlines, columns, the door to the compiler."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from shapely import unary_union
from shapely.geometry import Point, Polygon

from flatprep.nest import _jit
from flatprep.nest.clock import EVALUATIONS_A_STEP, Clock
from flatprep.nest.field import field_of
from flatprep.nest.outlines import HAIR_MM, drawn_in, edges_of, hull_area, pack, turned
from flatprep.nest.poles import inner_circles
from flatprep.nest.rows import lay_in_columns
from flatprep.nest.shapes import Best, Container, Shape
from flatprep.nest.turning import turn_into, with_own_variants
from tests.nest.outlines import ELBOW, FRAME, SQUARE, WEDGE, WINDOW, shapes


def test_clock_counts_time_or_steps():
    times = iter([0.0, 5.0, 10.0])
    assert Clock(seconds=10.0, now=lambda: next(times)).spent == 0.5
    stepped = Clock(steps=2, now=lambda: 0.0)
    stepped.spend(EVALUATIONS_A_STEP)
    assert stepped.spent == 0.5
    stepped.spend(EVALUATIONS_A_STEP)
    assert stepped.passed()


@pytest.mark.parametrize(("ring", "windows"), [(SQUARE, ()), (WEDGE, ()), (ELBOW, ()), (FRAME, (WINDOW,))])
def test_circles_lie_inside_and_fill_most(ring, windows):
    body = Polygon(ring, windows)
    circles = inner_circles(edges_of([ring, *windows]))
    discs = [Point(x, y).buffer(r) for x, y, r in circles]
    assert all(body.buffer(1e-9).covers(d) for d in discs)
    assert unary_union(discs).area > 0.6 * body.area
    assert list(circles[:, 2]) == sorted(circles[:, 2], reverse=True)


@pytest.mark.parametrize("ring", [SQUARE, WEDGE, ELBOW])
def test_outlines_are_drawn_in_by_a_hair(ring):
    # by a thousand times as much, so that shapely can see it
    inner = Polygon(drawn_in(ring, 1000.0 * HAIR_MM))
    assert Polygon(ring).covers(inner)
    assert inner.symmetric_difference(Polygon(ring).buffer(-1000.0 * HAIR_MM, join_style="mitre")).area < 1e-6


@given(st.floats(-720.0, 720.0))
def test_turning_there_and_back(angle):
    back = turned(turned(ELBOW, angle, mirrored=False), -angle, mirrored=False)
    assert np.allclose(back, ELBOW, atol=1e-12)


def test_quarter_turns_are_exact_and_mirroring_comes_first():
    assert turned(WEDGE, 90.0, mirrored=True).tolist() == [[0.0, 0.0], [0.0, -12.0], [-7.0, 0.0]]


def test_hull_area():
    assert hull_area(ELBOW) == pytest.approx(Polygon(ELBOW).convex_hull.area, rel=1e-12)


@given(st.floats(0.0, 360.0), st.integers(0, 1))
def test_a_free_turn_is_the_packed_one_turned(angle, state):
    kinds = shapes()
    packed = pack(kinds, [(0.0, 90.0)] * len(kinds))
    own = with_own_variants(packed, np.array([1, 0]), [True] * len(kinds))
    source = int(packed.first[1]) + state
    target = len(packed.shape)
    turn_into(own, source, target, angle)
    rows = own.rings.edge[slice(*own.rings.at[target])]
    base = packed.rings.edge[slice(*packed.rings.at[source])]
    assert np.allclose(rows[:, :2], turned(base[:, :2], angle, mirrored=False), atol=1e-9)
    assert own.mirrored[target] == state
    low, high = rows[:, :2].min(axis=0), rows[:, :2].max(axis=0)
    assert np.all(own.rings.box[target, :2] <= low - HAIR_MM)
    assert np.all(own.rings.box[target, 2:] >= high + HAIR_MM)


def test_boxes_in_columns():
    boxes = np.array([[0.0, 0.0, 4.0, 6.0]] * 3 + [[-1.0, -1.0, 1.0, 3.0]])
    home, at = lay_in_columns(boxes, [np.array([0.0, 0.0, 100.0, 12.0])])
    assert home.tolist() == [0, 0, 0, 0]
    assert at.tolist() == [[0.0, 0.0], [0.0, 6.0], [4.0, 0.0], [5.0, 7.0]]
    assert lay_in_columns(boxes, [np.array([0.0, 0.0, 3.0, 12.0])]) is None


def test_containers_stand_apart_and_irregular_ones_are_framed():
    notched = np.array([[0.0, 0.0], [30.0, 0.0], [30.0, 20.0], [10.0, 20.0], [10.0, 10.0], [0.0, 10.0]])
    field = field_of([Container(FRAME), Container(notched, (SQUARE + 12.0,))])
    assert field.rect[1, 0] - field.rect[0, 2] >= 20.0
    assert [len(s.holes) for s in field.fixed] == [0, 1]
    assert field.area.tolist() == [1600.0, 400.0]


def test_fewer_containers_are_better_than_a_shorter_last_one():
    assert Best((), 1, 90.0).better_than(Best((), 2, 10.0))
    assert Best((), 2, 9.0).better_than(Best((), 2, 10.0))


def test_compiled_code_is_dropped_when_a_kernel_changes(tmp_path):
    (tmp_path / "one.py").write_text("from flatprep.nest._jit import bare\n")
    (tmp_path / "other.py").write_text("x = 1\n")
    _jit.drop_stale(tmp_path)
    compiled = tmp_path / "__pycache__" / "one.f-1.nbi"
    compiled.touch()
    (tmp_path / "other.py").write_text("x = 2\n")
    _jit.drop_stale(tmp_path)
    assert compiled.exists()
    (tmp_path / "one.py").write_text("from flatprep.nest._jit import bare, kernel\n")
    _jit.drop_stale(tmp_path)
    assert not compiled.exists()


def test_shapes_default_to_one_as_drawn():
    assert Shape(SQUARE) != Shape(SQUARE)
    assert (Shape(SQUARE).count, Shape(SQUARE).turns_deg, Shape(SQUARE).mirror) == (1, (0.0,), (False,))
