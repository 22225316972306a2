"""Four cases for every limit: just below, exactly at it, within rounding, far away."""

from dataclasses import replace

import numpy as np
import pytest

from flatprep.job.values import BendAsk
from flatprep.model.finding import Severity
from tests.measure.shapes import circle, obround, part, path, polygon, rectangle
from tests.rules.setting import BENDS, PLATE, asked, bend_at, context, found, laser, router, steel

ERROR, WARNING, NOTE = Severity.ERROR, Severity.WARNING, Severity.NOTE


def four(limit, *, far, below=0.0015):
    """A size just below, one exactly at the limit, one within rounding of it, one far above."""
    return pytest.mark.parametrize(
        ("size", "loud"),
        [
            pytest.param(limit - below, True, id="just-below"),
            pytest.param(limit - 0.001, True, id="0.001-below"),
            pytest.param(limit + 0.001, False, id="0.001-above"),
            pytest.param(limit, False, id="exactly-at-limit"),
            pytest.param(limit - 1e-9, False, id="rounding-noise"),
            pytest.param(limit - 0.0009, False, id="0.001-is-within"),
            pytest.param(far, False, id="far-away"),
        ],
    )


def one(rule, ctx, size, limit, loud, severity=ERROR):
    told = found(rule, ctx)
    if not loud:
        assert told == []
        return
    (finding,) = told
    assert (finding.severity, finding.limit, finding.unit) == (severity, pytest.approx(limit, abs=1e-9), "mm")
    assert finding.measured == pytest.approx(size, abs=1e-5)


@four(3.0, far=20.0)
def test_small_hole(size, loud):
    one("small-hole", context(part(PLATE, circle(50, 30, size / 2))), size, 3.0, loud)


@four(5.0, far=20.0)
def test_hole_limit_grows_with_the_sheet(size, loud):
    one("small-hole", context(part(PLATE, circle(50, 30, size / 2)), thickness=5.0), size, 5.0, loud)


@pytest.mark.parametrize(("size", "loud"), [(2.989, True), (2.991, False), (3.0, False)])
def test_holes_of_chords_have_a_hundredth(size, loud):
    one("small-hole", context(part(PLATE, polygon(50, 30, size / 2, 48))), size, 3.0, loud)


@pytest.mark.parametrize(("size", "loud"), [(2.989, True), (2.991, False)])
def test_rounded_inches_have_a_hundredth(size, loud):
    one("small-hole", context(part(PLATE, circle(50, 30, size / 2)), units="in"), size, 3.0, loud)


def test_a_square_hole_is_as_wide_as_its_side_and_a_long_one_is_a_slot():
    square = context(part(PLATE, rectangle(40, 20, 2, 2)))
    assert [(f.rule, f.measured) for f in [*found("small-hole", square), *found("narrow-slot", square)]] == [
        ("small-hole", pytest.approx(2.0))
    ]
    long = context(part(PLATE, rectangle(40, 20, 4, 2)))
    assert found("small-hole", long) == found("narrow-slot", long) == []


def test_an_odd_hole_is_as_wide_as_the_circle_in_it():
    # right triangle with legs 6 and 8: the circle in it has radius 2
    triangle = path((40, 20), (48, 20), (40, 26))
    assert found("small-hole", context(part(PLATE, triangle))) == []
    (finding,) = found("small-hole", context(part(PLATE, triangle), thickness=4.5))
    assert finding.measured == pytest.approx(4.0, abs=0.01)


@four(3.0, far=20.0)
def test_thin_web_between_holes(size, loud):
    holes = circle(40, 30, 5), circle(50 + size, 30, 5)
    one("thin-web", context(part(PLATE, *holes)), size, 3.0, loud)


@four(3.0, far=20.0)
def test_thin_web_to_the_edge(size, loud):
    one("thin-web", context(part(PLATE, circle(50, 5 + size, 5))), size, 3.0, loud)


@four(2.0, far=20.0)
def test_edge_limit_goes_before_the_web_limit(size, loud):
    process = laser({"web_min": 3.0, "edge_min": 2.0})
    one("thin-web", context(part(PLATE, circle(50, 5 + size, 5)), process=process), size, 2.0, loud)


@four(3.0, far=20.0)
def test_warning_level(size, loud):
    process = laser({"web_min": 2.0}, {"web_min": 3.0})
    one("thin-web", context(part(PLATE, circle(50, 5 + size, 5)), process=process), size, 3.0, loud, WARNING)


@four(1.5, far=9.0)
def test_narrow_obround(size, loud):
    one("narrow-slot", context(part(PLATE, obround(50, 30, 25, size))), size, 1.5, loud)


@four(1.5, far=9.0)
def test_narrow_notch(size, loud):
    notch = path((0, 0), (50, 0), (50, 30), (50 + size, 30), (50 + size, 0), (100, 0), (100, 60), (0, 60))
    one("narrow-slot", context(part(notch)), size, 1.5, loud)


@four(1.5, far=9.0)
def test_tapered_slot(size, loud):
    notch = path((0, 0), (50, 0), (50.1, 20), (50.1 + size, 20), (50.2 + size, 0), (100, 0), (100, 60), (0, 60))
    one("narrow-slot", context(part(notch)), size, 1.5, loud)


@four(3.0, far=20.0)
def test_washer(size, loud):
    one("thin-web", context(part(circle(0, 0, 40), circle(0, 0, 40 - size))), size, 3.0, loud)


@pytest.mark.parametrize(("radius", "count"), [(0.0, 4), (1.0, 4), (1.3, 4), (1.4, 0), (1.5, 0), (4.0, 0)])
def test_inside_corners_by_what_is_left(radius, count):
    # (1.5 - r) 0.4142: 0.083 mm is left at 1.3, 0.041 at 1.4; a joint closes over 0.05
    told = found("inside-corner", context(part(PLATE, rectangle(40, 20, 20, 20, radius)), process=router(3.0)))
    assert len(told) == count
    assert all((f.severity, f.limit) == (WARNING, 1.5) and f.measured == pytest.approx(radius) for f in told)


def test_a_laser_has_no_inside_corners():
    assert found("inside-corner", context(part(PLATE, rectangle(40, 20, 20, 20)))) == []


@four(30.0, far=200.0)
def test_small_part(size, loud):
    one("small-part", context(part(rectangle(0, 0, 12, size))), size, 30.0, loud)


@four(30.0, far=35.0)
def test_loose_island(size, loud):
    around = part(rectangle(0, 0, 100, 60), rectangle(10, 10, 80, 40), name="plate#1")
    island = part(rectangle(30, 15, 20, size), name="plate#2", depth=2)
    ctx = context(around, island)
    one("loose-island", ctx, size, 30.0, loud, WARNING)
    assert found("small-part", ctx) == []


def test_loose_island_is_a_note_among_several_outlines():
    around = part(rectangle(0, 0, 100, 60), rectangle(10, 10, 80, 40))
    island = part(rectangle(30, 15, 10, 10), depth=2)
    (finding,) = found("loose-island", context(around, island, part(rectangle(200, 0, 100, 60))))
    assert finding.severity is NOTE


@pytest.mark.parametrize(
    ("length", "width", "told"),
    [
        pytest.param(500.0, 300.0, None, id="exactly-at-limit"),
        pytest.param(300.0, 500.0, None, id="turned"),
        pytest.param(500.01, 300.0, (500.01, 500.0), id="just-above"),
        pytest.param(500.0, 300.01, (300.01, 300.0), id="too-wide"),
        pytest.param(50.0, 20.0, None, id="far-away"),
    ],
)
def test_too_large(length, width, told):
    ctx = context(part(rectangle(0, 0, length, width)), process=laser(bed_mm=(500.0, 300.0)))
    assert [(f.measured, f.limit) for f in found("too-large", ctx)] == ([pytest.approx(told)] if told else [])


def test_a_part_that_lies_askew_is_turned_first():
    c, s = np.cos(0.5), np.sin(0.5)
    askew = path((0, 0), (480 * c, 480 * s), (480 * c - 100 * s, 480 * s + 100 * c), (-100 * s, 100 * c))
    assert found("too-large", context(part(askew), process=laser(bed_mm=(490.0, 110.0)))) == []


def bent(*bends, holes=(), grain=None, material=None, thickness=2.0):
    material = material or steel(bend=BENDS)
    process = laser({})
    plate = part(PLATE, *holes)
    return context(plate, process=process, material=material, thickness=thickness,
                   job_part=asked(process, material, *bends, grain=grain))  # fmt: skip


# r 2, t 2, 90 degrees: allowance 4.1626 (DIN 6935, worked check W072), so the tangent lies 2.0813 from the bend line
TANGENT = np.pi / 2 * (2 + 0.65 * 2 / 2) / 2


@four(7.0, far=25.0)
def test_hole_near_bend_warns_below_two_and_a_half_thicknesses(size, loud):
    hole = circle(50, 20 + TANGENT + size + 4, 4)
    one("hole-near-bend", bent(bend_at(20), holes=[hole]), size, 7.0, loud, WARNING)


@pytest.mark.parametrize(
    ("x0", "x1", "told"),
    [
        pytest.param(0.0, 40.0, 0, id="ends-at-its-edge"),
        pytest.param(0.0, 45.0, 0, id="ends-in-it"),
        pytest.param(0.0, 100.0, 1, id="runs-through"),
        pytest.param(0.0, 39.0, 1, id="ends-before-it"),
    ],
)
def test_a_bend_that_stops_at_a_window_is_relieved_by_it(x0, x1, told):
    bend = BendAsk(90.0, 2.0, line=((x0, 20.0), (x1, 20.0)))
    assert len(found("hole-near-bend", bent(bend, holes=[rectangle(40, 15, 30, 15)]))) == told


@pytest.mark.parametrize(
    ("width", "bends", "told"),
    [
        pytest.param(2.0, [(0.0, 40.0), (42.0, 100.0)], [], id="relief"),
        pytest.param(2.0, [], [WARNING], id="no-bend"),
        pytest.param(2.0, [(0.0, 30.0)], [WARNING], id="bend-elsewhere"),
        pytest.param(1.4, [(0.0, 40.0), (41.4, 100.0)], [ERROR], id="cannot-be-cut"),
    ],
)
def test_a_bend_relief_may_be_narrow_but_not_too_narrow_to_cut(width, bends, told):
    """A slit of 12 mm in the edge, 3 mm warned of, 1.5 mm the least; the bend line ends at its sides, 10 mm in."""
    outer = path((0, 0), (40, 0), (40, 12), (40 + width, 12), (40 + width, 0), (100, 0), (100, 60), (0, 60))
    process = laser({"slot_min": 1.5}, {"slot_min": 3.0})
    lines = [BendAsk(90.0, 2.0, line=((x0, 10.0), (x1, 10.0))) for x0, x1 in bends]
    ctx = context(part(outer), process=process, job_part=asked(process, steel(), *lines))
    assert [f.severity for f in found("narrow-slot", ctx)] == told


def test_hole_near_bend_is_an_error_below_two_thicknesses():
    (finding,) = found("hole-near-bend", bent(bend_at(20), holes=[circle(50, 20 + TANGENT + 5.9 + 4, 4)]))
    assert (finding.severity, finding.limit) == (ERROR, 6.0)


@four(8.4, far=25.0)
def test_short_flange_warns_below_the_die(size, loud):
    # deduction 8 - 4.1626 = 3.8374 (W072): half of it is added to the leg in the flat; 0.7 x 6 t = 8.4
    leg = size - (8 - 2 * TANGENT) / 2
    one("short-flange", bent(bend_at(60 - leg)), size, 8.4, loud, WARNING)


def test_short_flange_is_an_error_below_three_thicknesses_and_the_radius():
    (finding,) = found("short-flange", bent(bend_at(60 - (7.9 - (8 - 2 * TANGENT) / 2))))
    assert (finding.severity, finding.limit) == (ERROR, 8.0)


@four(3.0, far=9.0)
def test_tight_bend_warns_below_the_preferred_radius(size, loud):
    one("tight-bend", bent(bend_at(30, size)), size, 3.0, loud, WARNING)


@pytest.mark.parametrize(("radius", "severity"), [(1.998, ERROR), (2.0, WARNING), (2.0 - 1e-9, WARNING)])
def test_tight_bend_refuses_below_the_least(radius, severity):
    (finding,) = found("tight-bend", bent(bend_at(30, radius)))
    assert (finding.severity, finding.limit) == (severity, 2.0 if severity is ERROR else 3.0)


@pytest.mark.parametrize(
    ("grain", "radius", "loud"),
    [("x", 3, True), ("x", 4.5, False), ("x", 4.5 - 1e-9, False), ("x", 4.49, True), ("y", 2, False), (None, 2, False)],
)
def test_bend_along_the_grain(grain, radius, loud):
    # along the grain 1.5 times 3 mm
    told = found("bend-along-grain", bent(bend_at(30, radius), grain=grain))
    assert [f.limit for f in told] == ([4.5] if loud else [])


@pytest.mark.parametrize(
    ("thickness", "limit"),
    [
        pytest.param(0.998, 1.0, id="just-below"),
        pytest.param(1.0, None, id="at-least"),
        pytest.param(1.0 - 1e-9, None, id="rounding-noise"),
        pytest.param(8.0, None, id="at-most"),
        pytest.param(8.002, 8.0, id="just-above"),
        pytest.param(3.0, None, id="far-away"),
    ],
)
def test_thickness_out_of_range(thickness, limit):
    process = laser()
    process = replace(process, general=replace(process.general, thickness_mm=(1.0, 8.0)))
    told = found("thickness-out-of-range", context(part(PLATE), process=process, thickness=thickness))
    assert [f.limit for f in told] == ([limit] if limit else [])
    assert all(f.measured == thickness for f in told)


@pytest.mark.parametrize(
    ("width", "told"),
    [
        pytest.param(3.098, "jams", id="just-below"),
        pytest.param(3.1, None, id="exactly-as-measured"),
        pytest.param(3.1 - 1e-9, None, id="rounding-noise"),
        pytest.param(3.15, None, id="with-clearance"),
        pytest.param(2.7, None, id="not-drawn-for-the-sheet"),
    ],
)
@pytest.mark.parametrize("notch", [False, True], ids=["slot", "notch"])
def test_joint_fit(width, told, notch):
    open_slot = path((0, 0), (50, 0), (50, 20), (50 + width, 20), (50 + width, 0), (100, 0), (100, 60), (0, 60))
    plate = part(open_slot) if notch else part(PLATE, rectangle(40, 20, 20, width))
    ctx = replace(context(plate, process=laser({})), measured_thickness_mm=3.1)
    assert [(str(told) in f.message, f.limit) for f in found("joint-fit", ctx)] == ([(True, 3.1)] if told else [])
    assert [f.measured for f in found("joint-fit", ctx)] == ([pytest.approx(width)] if told else [])


def test_joint_rattles():
    ctx = context(part(PLATE, rectangle(40, 20, 20, 3.2)), process=laser({}))
    assert found("joint-fit", ctx) == [], "nobody measured the sheet"
    assert found("joint-fit", replace(ctx, measured_thickness_mm=2.9)) == []
    (finding,) = found("joint-fit", replace(ctx, measured_thickness_mm=2.89))
    assert "rattles" in finding.message
    assert finding.limit == pytest.approx(3.19)
