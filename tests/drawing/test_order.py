"""The order of cutting: windows first, small first, and no neighbours in a row where it can be helped."""

from dataclasses import replace
from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.drawing.order import SAME_SIZE, cutting_order, gaps_mm
from flatprep.geom.bulge import circle, reverse
from flatprep.model.drawing import Contour, Part
from flatprep.model.layout import Placement, SheetLayout

SPACING = 3.0
OUTLINE = np.array([[0.0, 0], [3000, 0], [3000, 1500], [0, 1500]])


def rectangle(name, width, height):
    return Part(name, Contour(np.array([[0.0, 0, 0], [width, 0, 0], [width, height, 0], [0, height, 0]])))


def disc(name, radius, *holes):
    windows = tuple(Contour(reverse(circle(0, 0, r), closed=True)) for r in holes)
    return Part(name, Contour(circle(0, 0, radius)), windows)


def sheet(*places):
    """A sheet of (part, x, y)."""
    laid = tuple(Placement(part.name, k, 0.0, False, float(x), float(y)) for k, (part, x, y) in enumerate(places, 1))
    return SheetLayout("al3", "al-5052-h32", 3.0, OUTLINE, (), 100.0, 0.1, laid), {p.name: p for p, _, _ in places}


def grid(columns, rows, width, height):
    part = rectangle("slat", width, height)
    step = width + SPACING, height + SPACING
    return sheet(*((part, c * step[0], r * step[1]) for c in range(columns) for r in range(rows)))


def boxes(layout, parts):
    moved = [Contour(p.motion.polyline(parts[p.part].outer.xyb)).bounds for p in layout.placements]
    return np.array(moved)


def least_gap(order, layout, parts):
    """Least distance of the boxes of two pieces that are cut one after the other."""
    every = boxes(layout, parts)
    return min(float(gaps_mm(every[[b]], every[a])[0]) for a, b in pairwise(order))


def as_laid(layout, parts):
    """By size and place alone."""
    size = [parts[p.part].area_mm2 for p in layout.placements]
    return sorted(range(len(size)), key=lambda k: (size[k], layout.placements[k].dx))


@pytest.mark.parametrize(
    ("columns", "rows", "width", "height"),
    [
        pytest.param(6, 5, 40, 40, id="squares"),
        pytest.param(20, 10, 30, 20, id="two hundred"),
        pytest.param(1, 12, 400, 20, id="a stack of slats"),
        pytest.param(30, 1, 20, 100, id="a row"),
    ],
)
def test_pieces_cut_in_a_row_have_another_between_them(columns, rows, width, height):
    """One piece's shorter side and a spacing on either side of it lie between: 46, 26, 26 and 26 mm in place of 3."""
    layout, parts = grid(columns, rows, width, height)
    order = cutting_order(layout, parts)
    assert sorted(order) == list(range(columns * rows))
    assert least_gap(as_laid(layout, parts), layout, parts) == pytest.approx(SPACING)
    assert least_gap(order, layout, parts) >= min(width, height) + 2 * SPACING - 1e-9


def test_the_last_but_one_is_cool_too_where_there_is_room():
    layout, parts = grid(12, 8, 40, 40)
    order, every = cutting_order(layout, parts), boxes(layout, parts)
    near = [float(gaps_mm(every[[c]], every[a])[0]) < 40.0 for a, c in zip(order, order[2:], strict=False)]
    assert sum(near) <= 2  # at the very end only


def test_where_all_are_neighbours_every_one_is_still_cut_once():
    layout, parts = grid(2, 2, 50, 50)
    assert sorted(cutting_order(layout, parts)) == [0, 1, 2, 3]
    assert cutting_order(SheetLayout("al3", "al", 3.0, OUTLINE, (), 0.0, 0.0, ()), {}) == []


def test_piece_in_a_window_is_cut_first_then_small_before_large():
    frame, coin, large, small = disc("frame", 50, 30), disc("coin", 20), disc("large", 60), disc("small", 5)
    layout, parts = sheet((frame, 60, 80), (large, 220, 80), (coin, 60, 80), (small, 130, 80))
    assert [layout.placements[k].part for k in cutting_order(layout, parts)] == ["coin", "small", "frame", "large"]


@pytest.mark.parametrize(("turn_deg", "mirrored"), [(0.0, True), (90.0, False), (90.0, True), (250.0, True)])
def test_a_window_is_where_its_piece_has_it_turned_and_mirrored(turn_deg, mirrored):
    """The window is off the middle; what lies in it goes before a smaller piece that lies outside."""
    window = Contour(reverse(circle(160.0, 20.0, 18.0), closed=True))
    frame = Part("frame", rectangle("frame", 200.0, 80.0).outer, (window,))
    coin, small = disc("coin", 10), disc("small", 4)
    layout, parts = sheet((frame, 900, 700), (coin, 0, 0), (small, 2000, 1000))
    turned = replace(layout.placements[0], turn_deg=turn_deg, mirrored=mirrored)
    ((x, y),) = turned.motion.points(np.array([[160.0, 20.0]]))
    inside = replace(layout.placements[1], dx=float(x), dy=float(y))
    layout = replace(layout, placements=(turned, inside, layout.placements[2]))
    assert [layout.placements[k].part for k in cutting_order(layout, parts)] == ["coin", "small", "frame"]


def test_windows_within_windows_from_the_inside_out():
    rings = [disc(f"ring{r}", r, r - 8) for r in (50, 40, 30, 20)]
    layout, parts = sheet(*((ring, 100, 100) for ring in rings))
    assert cutting_order(layout, parts) == [3, 2, 1, 0]


@given(st.lists(st.tuples(st.integers(0, 3), st.integers(0, 900), st.integers(0, 900)), min_size=1, max_size=40))
def test_small_ones_first_to_within_a_factor(places):
    kinds = [rectangle(f"p{k}", 10.0 * 3**k, 12.0) for k in range(4)]  # each three times the one before
    layout, parts = sheet(*((kinds[k], x, y) for k, x, y in places))
    order = cutting_order(layout, parts)
    assert sorted(order) == list(range(len(places)))
    size = [parts[layout.placements[k].part].area_mm2 for k in order]
    assert all(a <= SAME_SIZE * min(size[n:]) for n, a in enumerate(size))


def test_first_articles_go_first_with_what_lies_in_their_windows():
    """The large frame is a first article: the washer in it goes before it, the small slats after both."""
    frame, washer, slat = disc("frame", 200.0, 150.0), disc("washer", 20.0), rectangle("slat", 50.0, 10.0)
    layout, parts = sheet((slat, 700, 10), (frame, 300, 300), (slat, 900, 10), (washer, 300, 300), (washer, 1200, 300))
    assert cutting_order(layout, parts)[-1] == 1  # usually the largest goes last
    marked = replace(layout, placements=tuple(replace(p, first=p.part == "frame") for p in layout.placements))
    order = cutting_order(marked, parts)
    assert order[:2] == [3, 1]
    assert sorted(order) == [0, 1, 2, 3, 4]
