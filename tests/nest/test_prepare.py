"""Grown outlines and shrunk sheets."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from shapely.geometry import Point, Polygon

from flatprep.nest.prepare import container_of, grow, tolerance_for
from tests.nest.parts import disc, hook, polygon, rectangle, remnant, ring, sheet


def region(grown):
    x, y = grown.centre
    moved = np.array([x, y])
    return Polygon(grown.outer + moved, [h + moved for h in grown.holes])


@given(st.floats(0.5, 10.0), st.floats(2.0, 200.0))
def test_grown_disc_holds_all_within_half_the_spacing(spacing, radius):
    shape = region(grow(disc("d", radius), spacing, windows=True))
    assert shape.exterior.distance(Point(0, 0)) >= radius + spacing / 2 - 1e-9
    # a curve may be simplified by half a thousandth of its size, 0.1 mm at the most
    curved = min(0.1, np.sqrt(8.0) * (radius + spacing) / 2000.0)
    most = radius + spacing / 2 * 1.01 + max(tolerance_for(spacing), curved) + 0.02
    assert np.hypot(*np.array(shape.exterior.coords).T).max() <= most


@given(st.integers(0, 10_000), st.sampled_from([0.5, 3.0, 10.0]))
def test_grown_outline_of_anything_holds_all_within_half_the_spacing(seed, spacing):
    """No point of the part may be nearer to the grown outline than half the spacing."""
    rng = np.random.default_rng(seed)
    angle = np.sort(rng.uniform(0, 2 * np.pi, 14))
    reach = rng.uniform(8, 60, 14)
    true = Polygon(np.column_stack([reach * np.cos(angle), reach * np.sin(angle)]))
    if not true.is_valid:
        return
    shape = region(grow(polygon("s", list(true.exterior.coords)[:-1]), spacing, windows=True))
    assert shape.contains(true)
    assert shape.boundary.distance(true) >= spacing / 2 - 1e-7


def test_box_of_a_grown_rectangle_is_its_own_and_half_the_spacing():
    grown = grow(rectangle("r", 100.0, 40.0, x=500.0, y=-30.0), 3.0, windows=True)
    assert np.ptp(grown.outer, axis=0) == pytest.approx([103.0, 43.0])
    assert grown.centre == pytest.approx((550.0, -10.0))


def test_without_spacing_a_straight_outline_is_exact():
    grown = grow(hook("h"), 0.0, windows=True)
    assert region(grown).equals(Polygon([(0, 0), (60, 0), (60, 10), (10, 10), (10, 40), (0, 40)]))


def test_window_shrinks_by_half_the_spacing_and_is_left_out_on_request():
    inside = grow(ring("r", 50.0, 30.0), 4.0, windows=True)
    reach = np.hypot(*(inside.holes[0] + np.array(inside.centre)).T)
    assert reach.max() <= 28.0 + 1e-9
    assert reach.min() >= 28.0 - 0.25
    assert grow(ring("r", 50.0, 30.0), 4.0, windows=False).holes == ()


def test_window_that_the_spacing_fills_is_gone():
    assert grow(ring("r", 50.0, 1.9), 4.0, windows=True).holes == ()


@pytest.mark.parametrize(
    ("spacing", "margin", "box"),
    [
        pytest.param(3.0, 8.0, (6.5, 6.5, 293.5, 193.5), id="margin-larger"),
        pytest.param(10.0, 2.0, (-3.0, -3.0, 303.0, 203.0), id="margin-less-than-half-the-spacing"),
        pytest.param(0.0, 0.0, (0.0, 0.0, 300.0, 200.0), id="none"),
    ],
)
def test_rectangle_is_moved_in_by_margin_less_half_the_spacing(spacing, margin, box):
    outer = container_of(sheet(), margin, spacing).outer
    assert (*outer.min(axis=0), *outer.max(axis=0)) == pytest.approx(box)


def test_notch_of_a_remnant_keeps_its_margin():
    notched = remnant([(0, 0), (200, 0), (200, 100), (120, 100), (100, 40), (80, 100), (0, 100)])
    shape = Polygon(container_of(notched, 5.0, 2.0).outer)
    assert shape.distance(Point(100, 40)) >= 4.0
    assert shape.distance(Point(100, 40)) <= 4.05
    assert shape.bounds == pytest.approx((4.0, 4.0, 196.0, 96.0), abs=0.02)


def test_notch_narrower_than_the_spacing_stays_a_notch():
    slit = [(0, 0), (100, 0), (100, 60), (50.5, 60), (50.5, 10), (49.5, 10), (49.5, 60), (0, 60)]
    shape = Polygon(container_of(remnant(slit), 0.0, 10.0).outer)
    assert not shape.contains(Point(50, 30))


def test_remnant_that_the_margin_cuts_in_two_keeps_both_pieces():
    waist = [(0, 0), (40, 0), (50, 28), (60, 0), (100, 0), (100, 60), (60, 60), (50, 32), (40, 60), (0, 60)]
    container = container_of(remnant(waist), 6.0, 0.0)
    room = Polygon(container.outer).area - sum(Polygon(h).area for h in container.holes)
    assert room > 1000.0
    free = Polygon(container.outer, [])
    for hole in container.holes:
        free = free.difference(Polygon(hole))
    assert len(free.geoms) == 2


def test_margin_that_leaves_nothing_is_told():
    with pytest.raises(ValueError, match="margin"):
        container_of(sheet(300.0, 200.0), 100.0, 0.0)


@pytest.mark.parametrize("corners", range(24, 73, 3))
def test_a_polygon_of_many_corners_is_grown_by_half_the_spacing(corners):
    """Also where corners turn by a little more than one chord of the round corners that an offset makes."""
    angle = np.arange(corners) * 2 * np.pi / corners
    part = polygon("disc", (np.column_stack([np.cos(angle), np.sin(angle)]) * 2.25).tolist())
    grown = grow(part, 3.0, windows=True)
    outside = Polygon(grown.outer + np.array(grown.centre)).exterior
    assert outside.distance(Polygon(part.outer.xyb[:, :2])) >= 1.5 - 1e-9
