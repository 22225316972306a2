"""What is left of a sheet."""

import io

import ezdxf
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely import box
from shapely.geometry import Point, Polygon

from flatprep.drawing.write import border_drawing
from flatprep.model.layout import Placement, SheetLayout
from flatprep.nest.offcut import _largest_of_raster, offcut_of
from tests.nest.parts import disc, polygon, rectangle, ring

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


@pytest.mark.parametrize("corners", [7, 9, 11, 13, 16, 17, 24])
@pytest.mark.parametrize("spacing", [0.5, 6.0])
def test_corners_of_any_turn_keep_their_distance(corners, spacing):
    """A regular polygon's corners turn by 360 / n degrees, here by less and by more than chords of round corners do.

    One of them points at the rectangle, whose side comes as near as the rest lets it.
    """
    turn = 2.0 * np.pi * np.arange(corners) / corners
    part = polygon("p", 80.0 * np.column_stack([np.cos(turn), np.sin(turn)]))
    layout = sheet(Placement("p", 1, 0.0, False, 200.0, 200.0))
    rest = offcut_of(layout, {"p": part}, spacing)
    body = Polygon(layout.placements[0].motion.points(part.outer.xyb[:, :2]))
    assert rest.rectangle[0] == pytest.approx(280.0 + spacing, rel=0.01)
    assert box(*rest.rectangle).distance(body) >= spacing - 1e-9
    assert Polygon(rest.outline, rest.holes).distance(body) >= spacing - 1e-9


@pytest.mark.parametrize("radius", [3.0, 40.0, 150.0])
def test_round_parts_keep_their_distance(radius):
    layout = sheet(Placement("d", 1, 0.0, False, 200.0, 200.0))
    rest = offcut_of(layout, {"d": disc("d", radius)}, 4.0)
    assert Polygon(rest.outline, rest.holes).distance(Point(200.0, 200.0)) >= radius + 4.0 - 1e-9


def test_what_is_written_lies_within_what_is_free():
    """The drawing of a rest, read back as stock: nothing of it reaches into the parts and their spacing, nor out."""
    rng = np.random.default_rng(5)
    parts = {"d": disc("d", 31.0), "r": rectangle("r", 90.0, 40.0)}
    spots = [(90, 90), (200, 120), (300, 260), (120, 300)]
    placements = [
        Placement(name, 1, float(rng.uniform(0, 360)), False, x, y) for name, (x, y) in zip("drdr", spots, strict=True)
    ]
    layout = sheet(*placements)
    rest = offcut_of(layout, parts, 5.0)
    file = io.StringIO(border_drawing(rest.outline, rest.holes))
    rings = [np.array(e.get_points("xy")) for e in ezdxf.read(file).modelspace().query("LWPOLYLINE")]
    written = Polygon(rings[-1], rings[:-1])
    assert written.is_valid
    assert Polygon(OUTLINE).buffer(1e-9).covers(written)
    for p in placements:
        true = p.motion.points(parts[p.part].outer.xyb[:, :2])
        body = Polygon(true) if p.part == "r" else Point(p.dx, p.dy).buffer(31.0, 256)
        assert written.distance(body) >= 5.0 - 1e-6


def test_a_screw_leaves_a_hole_in_the_rest_a_clamp_does_not():
    screwed = offcut_of(sheet(), {}, 0.0, keep_out=((500.0, 200.0, 10.0), (0.0, 0.0, 40.0, 40.0)))
    assert screwed.rectangle == pytest.approx((0.0, 0.0, 490.0, 400.0), abs=0.2)
    assert Polygon(screwed.outline, screwed.holes).distance(Point(500.0, 200.0)) >= 10.0 - 1e-9


@settings(max_examples=200, deadline=None)
@given(st.lists(st.lists(st.booleans(), min_size=5, max_size=5), min_size=1, max_size=6))
def test_the_largest_rectangle_of_a_raster_is_the_largest_of_all(rows):
    free = np.array(rows)
    tall, wide = free.shape
    spans = [
        (r0, c0, r1, c1) for r0 in range(tall) for r1 in range(r0, tall) for c0 in range(wide) for c1 in range(c0, wide)
    ]
    all_free = [(r1 - r0 + 1) * (c1 - c0 + 1) for r0, c0, r1, c1 in spans if free[r0 : r1 + 1, c0 : c1 + 1].all()]
    found = _largest_of_raster(free)
    if not all_free:
        assert found is None
        return
    r0, c0, r1, c1 = found
    assert free[r0 : r1 + 1, c0 : c1 + 1].all()
    assert (r1 - r0 + 1) * (c1 - c0 + 1) == max(all_free)
