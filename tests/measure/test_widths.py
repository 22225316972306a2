"""Webs and slots against closed forms: what is one, how wide, where, and told once."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from flatprep.geom.bulge import Similarity
from flatprep.measure import widths as widths_module
from flatprep.measure.facing import TooFineError
from flatprep.measure.part import MeasuredPart
from tests.measure.shapes import chorded, circle, moved, obround, part, path, polygon, rectangle

PLATE = rectangle(0, 0, 100, 60)


def webs(outer, *holes, most=3.0):
    return MeasuredPart(part(outer, *holes)).webs(most)


def slots(outer, *holes, most=1.5):
    return MeasuredPart(part(outer, *holes)).slots(most)


def notch(width_bottom, width_mouth, depth, x=50.0):
    """A plate with a notch in its lower edge."""
    b, m = width_bottom / 2, width_mouth / 2
    return path((0, 0), (x - m, 0), (x - b, depth), (x + b, depth), (x + m, 0), (100, 0), (100, 60), (0, 60))


def ellipse(a, b, chords):
    angles = 0.05 + 2 * np.pi * np.arange(chords) / chords
    return path(*np.column_stack([a * np.cos(angles), b * np.sin(angles)]))


def finger(width_root, width_tip, height, x=50.0):
    """A plate with a finger on its upper edge."""
    r, t, top = width_root / 2, width_tip / 2, 40 + height
    return path((0, 0), (100, 0), (100, 40), (x + r, 40), (x + t, top), (x - t, top), (x - r, 40), (0, 40))


OPEN_TOP = (0, 0), (100, 0), (100, 40)
NECK = path((0, 0), (40, 0), (50, 29), (60, 0), (100, 0), (100, 60), (60, 60), (50, 31), (40, 60), (0, 60))
SQUARES = [rectangle(20, 20, 20, 20), rectangle(43, 39, 17, 11)]
L_HOLE = path((40, 30), (50, 30), (50, 31), (41, 31), (41, 40), (40, 40))
KEYHOLE = path((49.5, 20), (50.5, 20), (50.5, 30), (53.5, 34, 1), (46.5, 34), (49.5, 30))
BULB = path((40, 20), (60, 20), (60, 40, -0.9), (60.6, 40.6), (40, 40.6))

WEBS = [
    # outer, holes, width, middle (None: anywhere)
    pytest.param(PLATE, [circle(40, 30, 6), circle(53, 30, 5)], 2.0, (47, 30), id="two-holes"),
    pytest.param(PLATE, [circle(40, 6, 5)], 1.0, (40, 0.5), id="hole-and-edge"),
    pytest.param(PLATE, [obround(40, 20, 30, 8), obround(45, 30, 30, 8)], 2.0, (42.5, 25), id="parallel-slots"),
    pytest.param(circle(0, 0, 30), [circle(0, 0, 28)], 2.0, None, id="washer"),
    pytest.param(circle(0, 0, 30), [circle(0.3, 0, 28)], 1.7, (29.15, 0), id="eccentric-washer"),
    pytest.param(polygon(0, 0, 30, 60), [circle(0, 0, 28)], 2.0, None, id="washer-of-chords"),
    pytest.param(NECK, [], 2.0, (50, 30), id="neck-of-corners"),
    pytest.param(rectangle(0, 0, 80, 2), [], 2.0, (40, 1), id="strip"),
    pytest.param(PLATE, SQUARES, 3.0, (41.5, 39.5), id="short-common-run"),
    pytest.param(finger(2, 2, 8), [], 2.0, (50, 44), id="finger"),
    pytest.param(finger(2, 2, 2), [], 2.0, (50, 41), id="finger-as-high-as-wide"),
    pytest.param(finger(3, 2.4, 12), [], 2.4, (50, 51.6), id="finger-narrowing-to-its-tip"),
    pytest.param(finger(2, 3, 10), [], 2.0, (50, 40.4), id="finger-narrowing-to-its-root"),
]


@pytest.mark.parametrize(("outer", "holes", "width", "middle"), WEBS)
def test_web(outer, holes, width, middle):
    found = webs(outer, *holes)
    assert [w.width_mm for w in found] == pytest.approx([width], abs=2e-3)
    if middle is not None:
        assert found[0].at == pytest.approx(middle, abs=0.6)


def test_corner_that_points_at_a_side():
    # a square on its tip, the tip 2 mm right of another hole's side
    tip = moved(rectangle(0, 0, 10, 10), 45, 42 + 10 / np.sqrt(2), 30 - 10 / np.sqrt(2))
    found = webs(PLATE, rectangle(20, 20, 20, 20), tip)
    assert [w.width_mm for w in found] == pytest.approx([2.0], abs=1e-9)
    assert found[0].at == pytest.approx((41, 30), abs=1e-9)


# sides within 8 degrees that run out in a point; a stub on a flare, its sides nearly parallel for 0.8 mm only
POINTED = path(*OPEN_TOP, (53, 40), (51, 70), (50.4, 78.6), (50, 80), (49.6, 78.6), (49, 70), (47, 40), (0, 40))
FLARED = path(*OPEN_TOP, (51.28, 40), (50.55, 42), (50.5, 42.8), (49.5, 42.8), (49.45, 42), (48.72, 40), (0, 40))

NO_WEBS = [
    pytest.param(POINTED, [], id="finger-that-runs-out-in-a-point"),
    pytest.param(FLARED, [], id="low-stub-on-a-flare"),
    pytest.param(path((0, 0), (150, 0), (20, 90)), [], id="acute-corners"),
    pytest.param(path((0, 0), (120, 0), (0, 8)), [], id="needle-of-4-degrees"),
    pytest.param(path(*[(r * np.cos(a), r * np.sin(a)) for k in range(24) for r, a in
                        ((50, 2 * np.pi * k / 24), (70, 2 * np.pi * (k + 0.5) / 24))]), [], id="saw"),
    pytest.param(finger(2, 2, 1.9), [], id="stub-lower-than-wide"),
    pytest.param(rectangle(0, 0, 2, 2), [], id="small-square"),
    pytest.param(circle(0, 0, 1), [], id="small-disc"),
    pytest.param(rectangle(0, 0, 100, 60, 1.2), [], id="fillets"),
    pytest.param(PLATE, [circle(50, 30, 1)], id="small-hole-alone"),
    pytest.param(PLATE, [circle(50, 30, 5), circle(63.1, 30, 5)], id="wide-enough"),
]  # fmt: skip


@pytest.mark.parametrize(("outer", "holes"), NO_WEBS)
def test_no_web(outer, holes):
    assert webs(outer, *holes) == ()


SLOTS = [
    pytest.param(notch(1, 1, 20), [], 1.0, (50, 10), id="notch"),
    pytest.param(notch(1, 1.4, 20), [], 1.0, (50, 19.5), id="notch-narrowing-to-its-bottom"),
    pytest.param(notch(1.4, 1, 20), [], 1.0, (50, 0.5), id="notch-narrowing-to-its-mouth"),
    pytest.param(PLATE, [path((40, 30), (60, 29.9), (60, 31.4), (40, 31.1))], 1.1, (40.5, 30.55), id="tapered-hole"),
    pytest.param(PLATE, [L_HOLE], 1.0, None, id="L-hole"),
    pytest.param(PLATE, [KEYHOLE], 1.0, (50, 25), id="keyhole"),
]


@pytest.mark.parametrize(("outer", "holes", "width", "middle"), SLOTS)
def test_slot(outer, holes, width, middle):
    found = slots(outer, *holes)
    assert found[0].width_mm == pytest.approx(width, abs=2e-3)
    assert all(w.width_mm < 1.5 for w in found)
    if middle is not None:
        assert len(found) == 1
        assert found[0].at == pytest.approx(middle, abs=0.6)


NO_SLOTS = [
    pytest.param(path((0, 0), (45, 0), (50, 30), (55, 0), (100, 0), (100, 60), (0, 60)), [], id="V-notch"),
    pytest.param(notch(1, 1, 0.9), [], id="notch-shallower-than-wide"),
    pytest.param(PLATE, [circle(50, 30, 0.5)], id="round-hole"),
    pytest.param(PLATE, [obround(50, 30, 12, 1)], id="obround-is-a-hole"),
    pytest.param(PLATE, [BULB], id="bulb-in-a-corner"),
]


@pytest.mark.parametrize(("outer", "holes"), NO_SLOTS)
def test_no_slot(outer, holes):
    assert slots(outer, *holes) == ()


def test_small_hole_between_two_large_ones_makes_two_webs():
    found = webs(PLATE, circle(35, 30, 10), circle(50, 30, 3), circle(65, 30, 10), most=8)
    assert [w.width_mm for w in found] == pytest.approx([2.0, 2.0])
    assert sorted(w.at[0] for w in found) == pytest.approx([46, 54])


def test_hole_in_a_strip_parts_its_width_but_not_its_finding():
    found = webs(rectangle(0, 0, 80, 2.5), circle(40, 1.25, 0.4))
    assert [w.width_mm for w in found] == pytest.approx([0.85, 0.85, 2.5])


def test_two_necks_of_one_edge_are_two():
    wavy = path((0, 0), (100, 0), (100, 40), (80, 40), (70, 2), (60, 40), (40, 40), (30, 1), (20, 40), (0, 40))
    found = webs(wavy)
    assert [w.width_mm for w in found] == pytest.approx([1.0, 2.0])
    assert [w.at[0] for w in found] == pytest.approx([30, 70])


def test_stretch_of_parallel_sides_is_told_at_its_middle_with_its_length():
    (web,) = webs(PLATE, obround(40, 20, 30, 8), obround(45, 30, 30, 8))
    # the straight sides share 22 - 5 mm; the arcs add what is within 0.02 mm
    assert web.extent_mm == pytest.approx(17.0, abs=1.2)
    assert web.contours == (1, 2)


@pytest.mark.parametrize("chord_mm", [0.001, 0.01, 0.05])
def test_curves_drawn_with_chords_measure_alike(chord_mm):
    # an S-shaped gap between two obrounds of chords that are not recognised: they are turned and cut open
    one = chorded(rectangle(20, 20, 30, 10, 4), chord_mm)
    two = chorded(rectangle(20, 32, 30, 10, 4), chord_mm)
    (web,) = webs(PLATE, one, two)
    assert web.width_mm == pytest.approx(2.0, abs=1e-6)
    assert web.at == pytest.approx((35, 31), abs=0.2)


def test_room_between_two_necks_parts_them():
    # 12 mm of material between necks of 1 and 2 mm: nowhere wider than a few limits, yet two webs
    wavy = path((0, 0), (100, 0), (100, 40), (66, 40), (60, 2), (50, 12), (40, 1), (34, 40), (0, 40))
    assert [w.width_mm for w in webs(wavy)] == pytest.approx([1.0, 2.0])


def test_a_hole_partly_in_the_way_leaves_no_third_web():
    # two holes 8 mm apart, a third one reaches a quarter of the way into the disc between them
    large = circle(30, 30, 10), circle(58, 30, 10)
    found = webs(PLATE, *large, circle(44, 35, 2), most=9)
    small = np.hypot(14, 5) - 12
    assert [w.width_mm for w in found] == pytest.approx([small, small])
    assert all(3 in w.contours for w in found)


@pytest.mark.parametrize(("gap", "width"), [(0.3, 0.3), (2e-4, 2e-4), (5e-5, 0.0), (0.0, 0.0), (-5e-5, 0.0)])
def test_nearly_touching(gap, width):
    (web,) = webs(PLATE, path((gap, 20), (10, 15), (10, 25)))
    assert web.width_mm == pytest.approx(width, abs=1e-9)


def test_curves_of_coarse_chords_none_of_which_face():
    # 25 chords: the drawn outline lies up to 1 - cos(π / 25) = 0.008 inside the ellipse on either side
    (web,) = webs(ellipse(4, 1, 25))
    assert web.width_mm == pytest.approx(2.0, abs=0.02)
    assert web.at == pytest.approx((0, 0), abs=0.3)


def test_contours_that_touch_have_a_web_of_no_width():
    found = webs(PLATE, path((0, 20), (10, 15), (10, 25)))
    assert [w.width_mm for w in found] == [0.0]
    assert found[0].at == pytest.approx((0, 20))


@settings(max_examples=25, deadline=None)
@given(turn=st.floats(0, 360), dx=st.floats(-3000, 3000), dy=st.floats(-3000, 3000), mirrored=st.booleans())
def test_widths_move_with_the_part(turn, dx, dy, mirrored):
    shapes = [notch(1, 1, 20, x=30), circle(60, 20, 6), circle(73.5, 20, 5), obround(60, 55, 30, 6)]
    there = [moved(s, turn, dx, dy, mirrored=mirrored) for s in shapes]
    for look in (webs, slots):
        here, found = look(*shapes), look(*there)
        assert [w.width_mm for w in found] == pytest.approx([w.width_mm for w in here], abs=1e-6)
        spots = Similarity(turn, dx, dy, mirrored=mirrored).points(np.array([w.at for w in here]))
        assert np.array([w.at for w in found]) == pytest.approx(spots, abs=1e-3)


def test_a_curve_of_needlessly_many_chords_is_measured_all_the_same():
    # an ellipse of 30,000 chords, 0.008 mm each, with a hole 2 mm from its flat side
    angles = 2 * np.pi * np.arange(30_000) / 30_000
    outline = path(*np.column_stack([50 * np.cos(angles), 20 * np.sin(angles)]).tolist())
    (web,) = webs(outline, circle(0, 12, 6))
    assert web.width_mm == pytest.approx(2.0, abs=0.002)


def test_too_many_pairs_are_not_measured(monkeypatch):
    monkeypatch.setattr(widths_module, "MOST_PAIRS", 50)
    with pytest.raises(TooFineError):
        webs(polygon(0, 0, 40, 200, turn=0), rectangle(-5, -5, 10, 10), most=10)


def test_plate_of_many_holes_finds_only_what_is_there():
    holes = [circle(10 + 20 * i, 10 + 20 * j, 4) for i in range(20) for j in range(20)]
    assert webs(rectangle(0, 0, 400, 400), *holes) == ()
    found = webs(rectangle(0, 0, 400, 400), *holes, circle(200, 210, 4.5))
    assert [w.width_mm for w in found] == pytest.approx([1.5, 1.5])


def test_handles_name_both_sides():
    plate = part(PLATE, rectangle(20, 20, 20, 20), rectangle(42, 20, 20, 20))
    named = [
        type(c)(c.xyb, tuple(f"{k}{n}" for n in range(len(c.xyb)))) for k, c in zip("ABC", plate.contours, strict=True)
    ]
    measured = MeasuredPart(type(plate)("plate", named[0], tuple(named[1:])))
    (web,) = measured.webs(3.0)
    sides = {h[0] for h in measured.handles(web.rows)}
    assert sides == {"B", "C"}
    found = zip(named[1:], measured.handles(web.rows), strict=True)
    xs = [set(c.xyb[[int(h[1]), (int(h[1]) + 1) % 4], 0]) for c, h in found]
    assert xs == [{40.0}, {42.0}]
