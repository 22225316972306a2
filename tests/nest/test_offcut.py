"""What is left of a sheet."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely import box
from shapely.geometry import Polygon

from flatprep.model.layout import Placement, SheetLayout
from flatprep.nest.offcut import offcut_of
from tests.nest.parts import rectangle, ring

OUTLINE = np.array([[0.0, 0], [600, 0], [600, 400], [0, 400]])


def sheet(*placements, outline=OUTLINE, holes=()):
    return SheetLayout("al3", "al", 3.0, outline, holes, 0.0, 0.0, placements)


def test_rest_beside_one_part_is_the_strip_right_of_it():
    """A part of 300 x 400 at the left leaves 600 - 300 - 4 by 400."""
    layout = sheet(Placement("p", 1, 0.0, False, 0.0, 0.0))
    rest = offcut_of(layout, {"p": rectangle("p", 300.0, 400.0)}, 4.0)
    assert rest.rectangle == pytest.approx((304.0, 0.0, 600.0, 400.0), abs=0.1)
    assert rest.area_mm2 == pytest.approx(296 * 400, rel=0.02)


def test_rectangle_avoids_holes_of_a_remnant():
    hole = np.array([[500.0, 150], [560, 150], [560, 250], [500, 250]])
    rest = offcut_of(sheet(holes=(hole,)), {}, 0.0)
    assert rest.rectangle == pytest.approx((0.0, 0.0, 500.0, 400.0), abs=0.1)
    assert len(rest.holes) == 1


def test_full_sheet_leaves_nothing():
    layout = sheet(Placement("p", 1, 0.0, False, 0.0, 0.0))
    assert offcut_of(layout, {"p": rectangle("p", 590.0, 390.0)}, 3.0) is None
    assert offcut_of(layout, {"p": rectangle("p", 548.0, 400.0)}, 3.0) is None  # 49 mm wide: not worth keeping
    assert offcut_of(layout, {"p": rectangle("p", 546.0, 400.0)}, 3.0) is not None


def test_slug_in_a_window_is_scrap():
    layout = sheet(Placement("ring", 1, 0.0, False, 200.0, 200.0))
    rest = offcut_of(layout, {"ring": ring("ring", 195.0, 185.0)}, 3.0)
    assert rest.rectangle[0] >= 395.0


@settings(max_examples=15)
@given(st.integers(0, 10_000))
def test_nothing_cut_reaches_into_the_rest(seed):
    rng = np.random.default_rng(seed)
    part = rectangle("p", 70.0, 40.0)
    placements = [
        Placement("p", k, float(rng.uniform(0, 360)), False, float(rng.uniform(80, 520)), float(rng.uniform(80, 320)))
        for k in range(5)
    ]
    rest = offcut_of(sheet(*placements), {"p": part}, 5.0)
    if rest is None:
        return
    left = Polygon(rest.outline, rest.holes)
    assert left.covers(box(*rest.rectangle).buffer(-0.01))
    assert Polygon(OUTLINE).buffer(1e-6).covers(left)
    for p in placements:
        assert left.distance(Polygon(p.motion.points(part.outer.xyb[:, :2]))) >= 5.0 - 1e-6
