"""Chords turned back into arcs: against the circles they were made from, and left alone where they stand for none."""

from math import cos, pi, radians, sin, sqrt, tan

import numpy as np
import pytest

from flatprep.geom import bulge
from flatprep.model.drawing import Contour, Part
from flatprep.repair.rearc import round_contour, round_part
from flatprep.repair.runs import circle_through, runs
from flatprep.repair.values import RoundLimits

LIMITS = RoundLimits()


def contour(points):
    xyb = np.array([(*p, 0.0)[:3] for p in points], dtype=float)
    return Contour(xyb, tuple(f"{k:X}" for k in range(len(xyb))))


def on_circle(x, y, r, start_deg, sweep_deg, chords):
    angles = [radians(start_deg + sweep_deg * k / chords) for k in range(chords + 1)]
    return [(x + r * cos(a), y + r * sin(a)) for a in angles]


def ring(x, y, r, sides, turn_deg=0.0):
    return on_circle(x, y, r, turn_deg, 360.0, sides)[:-1]


def rounded_plate(chords):
    """80 x 50 with corners of radius 8 drawn in chords."""
    out = []
    for x, y, start in ((72, 8, -90), (72, 42, 0), (8, 42, 90), (8, 8, 180)):
        out += on_circle(x, y, 8, start, 90, chords)
    return contour(out)


TRUE_PLATE = 80 * 50 - (4 - pi) * 64


def test_fillets_get_their_radius_and_the_exact_area():
    done, told = round_contour(rounded_plate(10), LIMITS, equal_area=False)
    assert done.area_mm2 == pytest.approx(TRUE_PLATE, rel=1e-12)
    assert len(done.xyb) == 8
    assert [t.radius_mm for t in told] == pytest.approx([8.0] * 4)
    assert [t.sweep_deg for t in told] == pytest.approx([90.0] * 4)
    # the sagitta of a chord over 9 degrees
    assert [t.deviation_mm for t in told] == pytest.approx([8 * (1 - cos(radians(4.5)))] * 4)


@pytest.mark.parametrize("shift", [0, 3, 25])
def test_it_does_not_matter_where_the_contour_begins(shift):
    plate = rounded_plate(10)
    turned = Contour(np.roll(plate.xyb, shift, axis=0), plate.handles)
    done, _ = round_contour(turned, LIMITS, equal_area=False)
    assert (len(done.xyb), done.area_mm2) == (8, pytest.approx(TRUE_PLATE))


def test_a_hole_runs_the_other_way_and_bulges_inwards():
    plate = rounded_plate(10)
    hole = Contour(bulge.reverse(plate.xyb, closed=True), plate.handles)
    done, _ = round_contour(hole, LIMITS, equal_area=False)
    assert bulge.signed_area(done.xyb) == pytest.approx(-TRUE_PLATE)


@pytest.mark.parametrize("sides", [12, 24, 96])
def test_arcs_of_equal_area_keep_the_area_of_their_chords(sides):
    drawn = contour(ring(3, 4, 5, sides))
    done, (told,) = round_contour(drawn, LIMITS, equal_area=True)
    assert done.area_mm2 == pytest.approx(sides / 2 * 25 * sin(2 * pi / sides), rel=1e-12)
    assert (told.sweep_deg, told.chords, done.circle[:2]) == (360.0, sides, pytest.approx((3, 4)))
    plate = rounded_plate(10)
    assert round_contour(plate, LIMITS, equal_area=True)[0].area_mm2 == pytest.approx(plate.area_mm2, rel=1e-12)


def test_a_large_arc_is_split_and_goes_through_its_vertices():
    drawn = contour([*on_circle(0, 0, 20, 100, -340, 68), (60, 20), (60, -20)][::-1])
    done, (told,) = round_contour(drawn, LIMITS, equal_area=False)
    seg = bulge.segments(done.xyb, closed=True)
    assert seg.radius[seg.is_arc] == pytest.approx(20.0)
    assert np.abs(done.xyb[:, 2]).max() <= 1.0
    assert (told.chords, told.sweep_deg) == (68, pytest.approx(340.0))


@pytest.mark.parametrize(
    ("points", "why"),
    [
        (ring(0, 0, 5, 8), "an octagon is an octagon"),
        (ring(0, 0, 5, 11), "eleven sides"),
        (ring(0, 0, 100, 12), "a large twelve-sided plate: 2.3 % of 100 mm is no tolerance"),
        ([(0, 0), (10, 0), (20, 0), (30, 0), (40, 0), (50, 0), (50, 30), (0, 30)], "a straight edge in pieces"),
        ([(0, 0), (50, 0), (50, 30), (46, 34), (40, 37), (0, 37)], "two chamfers"),
        ([*on_circle(0, 0, 10, 0, 90, 3), (-20, 10), (-20, -20), (10, -20)], "three chords are too few"),
        ([*on_circle(0, 0, 200, 0, 90, 9), (0, 0)], "chords further from the arc than is allowed"),
    ],
)
def test_what_is_no_arc_stays_as_it_is(points, why):
    drawn = contour(points)
    done, told = round_contour(drawn, LIMITS, equal_area=False)
    assert done.xyb.tolist() == drawn.xyb.tolist(), why
    assert told == ()


def test_a_flat_on_a_round_hole_stays_flat():
    """A D-hole: all vertices lie on the circle, the flat's ends too."""
    drawn = contour(on_circle(0, 0, 4, 20, 320, 64))
    done, (told,) = round_contour(drawn, LIMITS, equal_area=False)
    seg = bulge.segments(done.xyb, closed=True)
    straight = np.hypot(*(seg.end - seg.start)[~seg.is_arc].T)
    assert straight == pytest.approx([2 * 4 * sin(radians(20))])
    assert told.sweep_deg == pytest.approx(320.0)


def test_chords_of_an_ellipse_are_not_taken_for_arcs_of_circles():
    t = np.linspace(0, 2 * pi, 40, endpoint=False)
    drawn = contour(np.column_stack([30 * np.cos(t), 12 * np.sin(t)]).tolist())
    found = list(runs(drawn.xyb, LIMITS))
    # a circle touches an ellipse to the fourth order at the ends of its axes, nowhere else
    middles = {(r.first + r.last) // 2 % 40 for r in found if r.last - r.first == 4}
    assert len(middles) == len(found)
    assert middles <= {0, 10, 20, 30}


@pytest.mark.parametrize(("off_mm", "found"), [(0.0009, 1), (0.02, 0)], ids=["rounded-coordinates", "off-the-circle"])
def test_vertices_must_lie_on_the_circle(off_mm, found):
    points = [*on_circle(0, 0, 10, 0, 90, 12), (-20, 10), (-20, -20), (10, -20)]
    points[6] = (points[6][0] * (1 + off_mm / 10), points[6][1] * (1 + off_mm / 10))
    spans = [(r.first, r.last) for r in runs(contour(points).xyb, LIMITS)]
    assert ((0, 12) in spans) == bool(found)


def test_nearly_equal_arcs_of_one_circle_become_the_circle():
    xyb = bulge.circle(5, 6, 3)
    xyb[1, 0] += 0.0003
    done, told = round_contour(Contour(xyb, ("A", "B")), LIMITS, equal_area=False)
    assert done.circle == pytest.approx((5, 6, 3), abs=1e-3)
    assert told == ()


def test_holes_keep_their_true_diameter_where_the_part_can_bear_it():
    outer = contour([(0, 0), (200, 0), (200, 200), (0, 200)])
    small, big = contour(ring(30, 30, 2.75, 36)[::-1]), contour(ring(120, 120, 40, 36)[::-1])
    part = Part("plate", outer, (small, big))
    done, _ = round_part(part, LIMITS)
    assert done.holes[0].circle[2] == pytest.approx(2.75)
    # the large one would take 0.6 % off the net area through its vertices
    assert done.holes[1].circle[2] == pytest.approx(40 * sqrt(36 * sin(2 * pi / 36) / (2 * pi)))
    assert done.area_mm2 == pytest.approx(part.area_mm2, rel=1e-4)


def test_circle_through_points():
    found = circle_through(np.array(on_circle(-3, 7, 12.5, 10, 40, 9)))
    assert (found.x, found.y, found.radius) == pytest.approx((-3, 7, 12.5))
    assert circle_through(np.array([(0.0, 0.0), (1.0, 1.0), (2.0, 2.0), (5.0, 5.0)])) is None


def test_a_slender_curve_in_fine_chords_is_mostly_left_alone():
    """Vertices of an ellipse lie near to circles, yet not nearer than the middles of its chords."""
    t = np.linspace(0, 2 * pi, 120, endpoint=False)
    drawn = contour(np.column_stack([30 * np.cos(t), 24 * np.sin(t)]).tolist())
    assert sum(r.last - r.first for r in runs(drawn.xyb, LIMITS)) < 60


def test_coordinates_of_three_decimals_are_no_evidence_against_an_arc():
    points = [*on_circle(0, 0, 10, 0, 90, 60), (-20, 10), (-20, -20), (10, -20)]
    rounded = contour([(round(x, 3), round(y, 3)) for x, y in points])
    (run,) = runs(rounded.xyb, LIMITS)
    assert (run.first, run.last) == (0, 60)


def test_four_nearly_equal_arcs_become_one_circle():
    quarter = tan(pi / 8)
    xyb = np.array([(13, 6, quarter), (5.0004, 14.0005, quarter), (-3, 6, quarter), (5, -2, quarter)])
    done, _ = round_contour(Contour(xyb, ("A", "B", "C", "D")), LIMITS, equal_area=False)
    assert len(done.xyb) == 2
    assert done.circle == pytest.approx((5, 6, 8), abs=2e-3)
