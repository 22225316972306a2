"""Parts of one outline, drawn here and there and turned, are one kind of piece."""

from dataclasses import replace

import numpy as np
import pytest
import shapely
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely.geometry import Polygon

from flatprep.geom.bulge import Similarity
from flatprep.nest.group import prepare_group
from flatprep.nest.keep import left_to_lay
from flatprep.nest.problem import Budget
from flatprep.nest.shapes import Place
from flatprep.nest.solve import nest
from flatprep.nest.twins import SAME_MM
from tests.nest.parts import ask, item, polygon, sheet

HOOK = [(0, 0), (60, 0), (60, 15), (20, 15), (20, 40), (0, 40)]
SHEET = sheet(500.0, 400.0)


def moved(points, turn_deg=0.0, dx=0.0, dy=0.0, mirrored=False):
    return Similarity(turn_deg=turn_deg, dx=dx, dy=dy, mirrored=mirrored).points(np.array(points, dtype=float))


def part(name, points, windows=()):
    """Part with windows, given anticlockwise."""
    holes = tuple(polygon("window", ring[::-1]).outer for ring in windows)
    return replace(polygon(name, points), holes=holes)


def group_of(*items, stock=SHEET):
    question = ask(items, (stock,), spacing=2.0)
    return prepare_group(*left_to_lay(question), question)


@given(
    st.floats(0, 360),
    st.floats(-500, 500),
    st.floats(-500, 500),
    st.floats(0, 360),
    st.booleans(),
)
@settings(max_examples=40, deadline=None)
def test_twin_lies_where_its_kind_lies(turn, dx, dy, laid_turn, mirrored):
    one = item(part("one", HOOK), 1, may_flip=True)
    two = item(part("two", moved(HOOK, turn, dx, dy)), 1, may_flip=True)
    group = group_of(one, two)
    assert [len(o) for o in group.owners] == [2]
    assert group.shapes[0].count == 2
    place = Place(0, 0, laid_turn, mirrored, 30.0, -7.0)
    lying = [Polygon(s.motion.points(s.item.part.outer.xyb[:, :2])) for s in group.spots([place, place])]
    assert lying[0].area == pytest.approx(60 * 15 + 20 * 25)
    assert shapely.hausdorff_distance(*lying) <= 2 * SAME_MM
    grown = Similarity(turn_deg=laid_turn, dx=30.0, dy=-7.0, mirrored=mirrored).points(group.shapes[0].outer)
    for piece in lying:  # half the spacing all around, whichever it is
        assert Polygon(grown).contains(piece)
        assert Polygon(grown).exterior.distance(piece) >= 1.0 - 1e-6


def test_pieces_go_to_their_owners_in_turn():
    group = group_of(item(part("one", HOOK), 2), item(part("two", moved(HOOK, 90.0)), 3))
    places = [Place(0, 0, 0.0, False, 100.0 * n, 0.0) for n in range(4)]
    assert [s.item.name for s in group.spots(places)] == ["one", "one", "two", "two"]
    assert [(i.name, n) for i, n in group.without_place(0, 1)] == [("two", 1)]
    assert [(i.name, n) for i, n in group.without_place(0, 4)] == [("one", 1), ("two", 3)]
    assert group.without_place(0, 0) == []


@pytest.mark.parametrize(
    ("other", "changes"),
    [
        pytest.param(moved(HOOK, mirrored=True), {}, id="turned-over"),
        pytest.param(moved(HOOK) * [1.0, 1.001], {}, id="0.04-mm-taller"),
        pytest.param(HOOK, {"turns_deg": (0.0, 90.0)}, id="listed-turns"),
        pytest.param(HOOK, {"grain": "x"}, id="grain"),
        pytest.param(HOOK, {"bends_deg": (0.0,)}, id="bends"),
        pytest.param(HOOK, {"may_flip": True}, id="other-states"),
    ],
)
def test_kinds_apart(other, changes):
    one = item(part("one", HOOK), 1)
    two = replace(item(part("two", other), 1), **changes)
    assert len(group_of(one, two, stock=sheet(500.0, 400.0, grain="length")).shapes) == 2


def test_window_tells_parts_apart():
    window = [(5, 20), (5, 35), (15, 35), (15, 20)]
    one, two = item(part("one", HOOK, [window]), 1), item(part("two", HOOK), 1)
    again = item(part("again", moved(HOOK, 12.0), [moved(window, 12.0)]), 1)
    assert sorted(len(o) for o in group_of(one, two, again).owners) == [1, 2]


def test_parts_that_just_fit_stay_apart():
    tight = sheet(66.0, 44.0)  # the hooks and half a spacing around them
    assert len(group_of(item(part("one", HOOK), 1), item(part("two", HOOK), 1), stock=tight).shapes) == 2


def test_all_owners_are_served():
    hooks = [item(part(f"hook {n}", moved(HOOK, 40.0 * n, 100.0 * n)), 2) for n in range(5)]
    layout = nest(ask(hooks, (SHEET,), spacing=2.0), Budget(steps=3))
    laid = [p.part for s in layout.sheets for p in s.placements]
    assert sorted(laid) == sorted(h.name for h in hooks for _ in range(2))
    assert not layout.unplaced
