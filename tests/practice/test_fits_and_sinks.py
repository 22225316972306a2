"""Finishing plans, what processes hold, seats, and the room a sink needs."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.practice.fits import allowance, cut_spread_mm, finish_plan, half_it_mm, holds
from flatprep.practice.seats import find_seat, seat_wall_mm
from flatprep.practice.sinks import find_sink, sink_depth_mm, sink_room
from flatprep.profile.hardware.fits import limits
from flatprep.profile.hardware.names import UnknownHardwareError
from flatprep.profile.material_load import load_material
from flatprep.profile.process_load import load_process
from tests.profile.hardware.rows import named, rows

STEEL, ALUMINIUM = load_material("mild-steel"), load_material("al-6061-t6")
LASER, ROUTER, PLASMA = (load_process(name) for name in ("fibre-laser", "router", "plasma"))


@pytest.mark.parametrize("row", rows("reaming_allowance"), ids=named)
def test_every_allowance_is_as_published(row):
    for size in (row["over"] + 0.01, min(row["incl"], 100.0)):
        found = allowance(size, row["pilot"], STEEL)
        assert (found.least_mm, found.most_mm) == (row["least"], row["most"])


def test_light_metals_take_half_as_much_again():
    """Trade-school table: light metals about 1.5 times; not for the skin of a thermal cut."""
    assert allowance(12.0, "drilled", ALUMINIUM).least_mm == pytest.approx(0.3)
    assert allowance(12.0, "thermal", ALUMINIUM).least_mm == pytest.approx(0.5)


def test_a_laser_cut_pilot_for_8_h7_in_6_mm_steel():
    """By hand: ISO 9013 class 1, over 3.15 to 6.3 mm thick, 3 to 10 mm: ± 0.2; u of range 1 is 0.05 + 0.018 = 0.068 a
    side, 0.136 on the diameter; with 0.1 kept: 0.436, under the allowance of 0.5 to 1.0. So cut 7.5 (7.0 to 7.5 will
    do),
    drill 8 - 0.25 - 0.05 = 7.7, at the most 8 - 0.2 - 0.05 = 7.75: 7.7, ream."""
    plan = finish_plan(limits(8.0, "H7"), LASER, STEEL, 6.0)
    assert plan.cut_mm == pytest.approx(7.5)
    assert plan.cut_range_mm == pytest.approx((7.0, 7.5))
    assert (plan.drill_mm, plan.largest_drill_mm, plan.thermal) == (7.7, 7.7, True)


def test_a_routed_pilot_for_12_h7_in_8_mm_aluminium():
    """By hand: 0.2 to 0.4 mm, half as much again in aluminium: 0.3 to 0.6; IT12 of 10 to 18 mm is 0.18, half of it
    0.09,
    with 0.1 kept 0.19: less. So cut 11.7, 11.4 to 11.7 will do; drill 12 - 0.375 - 0.05 = 11.575: 11.5."""
    plan = finish_plan(limits(12.0, "H7"), ROUTER, ALUMINIUM, 8.0)
    assert plan.cut_mm == pytest.approx(11.7)
    assert plan.cut_range_mm == pytest.approx((11.4, 11.7))
    assert (plan.drill_mm, plan.thermal) == (11.5, False)


def test_the_cut_of_a_thick_plate_keeps_its_spread_away():
    """40 H7 in 20 mm by laser: class 1, over 15 to 20, 35 to 125 mm: ± 0.45; u 0.11 a side: 0.67 + 0.1 = 0.77; the last
    row of the allowance, 0.8 to 1.5, is more."""
    plan = finish_plan(limits(40.0, "H7"), LASER, STEEL, 20.0)
    assert cut_spread_mm(40.0, LASER, 20.0) == pytest.approx(0.67)
    assert plan.cut_range_mm == pytest.approx((38.5, 39.2))


def test_a_thick_plate_keeps_more_under_the_reamer():
    """8 H7 in 12 mm by laser: class 1, over 10 to 15, 3 to 10 mm: ± 0.3; u 0.086 a side: 0.472 + 0.1 = 0.572 left at
    least."""
    assert finish_plan(limits(8.0, "H7"), LASER, STEEL, 12.0).cut_range_mm[1] == pytest.approx(7.428)


def test_a_hole_below_the_least_is_not_cut():
    assert finish_plan(limits(4.0, "H7"), LASER, STEEL, 8.0).cut_mm is None


@given(st.floats(2.0, 60.0), st.floats(0.8, 12.0))
def test_the_cut_stays_under_the_finished_hole(size, thickness):
    plan = finish_plan(limits(size, "H7"), LASER, STEEL, thickness)
    low, high = plan.cut_range_mm
    assert low <= high <= plan.limits.least_mm - 0.1
    assert plan.drill_mm <= plan.largest_drill_mm < plan.limits.least_mm
    assert cut_spread_mm(size, LASER, thickness) + high <= plan.limits.least_mm


@pytest.mark.parametrize(
    ("made_by", "width"),
    [("laser", 0.21), ("plasma", 0.52), ("waterjet", 0.13), ("router", 0.21), ("drill", 0.13), ("ream", 0.021),
    ("bore", 0.013)],
)  # fmt: skip
def test_best_grades_at_25_mm(made_by, width):
    """IT12, IT14, IT11, IT12, IT11, IT7, IT6 of 18 to 30 mm."""
    assert half_it_mm(25.0, made_by) == pytest.approx(width / 2)


@pytest.mark.parametrize(("zone", "kept"), [("H7", False), ("H9", False), ("H11", False), ("H13", True)])
def test_a_cut_hole_is_never_a_fit_hole(zone, kept):
    assert holds(LASER, limits(25.0, zone), 3.0) is kept


@pytest.mark.parametrize(
    ("text", "name", "pressed"),
    [
        ("22 N7", "22 N7", True), ("6 H7", "6 H7", False), ("608", "22 H7", False), ("608 N7", "22 N7", True),
        ("6205-2RS P7", "52 P7", True), ("10 bush", "12 H7", True), ("10 mm bushing H8", "12 H8", True),
        ("6 dowel", "6 H7", True),
        ("6 dowel slip", "6 F7", False), ("8 ISO 8734", "8 H7", True), ("100 H7", "100 H7", False),
    ],
)  # fmt: skip
def test_seats(text, name, pressed):
    found = find_seat(text, STEEL)
    assert (found.limits.name, found.pressed) == (name, pressed)


def test_a_bearing_without_a_class_says_so():
    assert "class not named" in find_seat("608").what
    assert "class not named" not in find_seat("608 N7").what
    assert find_seat("608").width_mm == 7


@pytest.mark.parametrize("text", ["", "N7", "x", "22 Q7", "9999"])
def test_no_seat(text):
    with pytest.raises(UnknownHardwareError):
        find_seat(text)


def test_the_wall_of_a_press_fit():
    """0.3 of the outside in steel: 6.6 mm round a 608; in soft plate 3 t where that is less."""
    seat = find_seat("608 N7")
    assert seat_wall_mm(seat, STEEL, 6.0) == pytest.approx(6.6)
    assert seat_wall_mm(seat, ALUMINIUM, 2.0) == pytest.approx(6.0)
    assert seat_wall_mm(find_seat("22 H7"), STEEL, 6.0) is None


@pytest.mark.parametrize(
    ("sink", "hole", "angle", "depth"),
    [(11.47, 5.5, 90, 2.985), (9.4, 4.5, 90, 2.45), (13.4874, 6.7564, 82, 3.8715), (10.0, 5.0, 60, 4.3301),
    (10.0, 5.0, 120, 1.4434)],
)  # fmt: skip
def test_depth_of_a_sink(sink, hole, angle, depth):
    """(D - d) / 2 / tan(angle / 2), exact arithmetic."""
    assert sink_depth_mm(sink, hole, angle) == pytest.approx(depth, abs=1e-4)


def test_a_sink_over_a_wider_hole_is_shallower():
    assert find_sink("countersink", "M5 ISO 10642", 5.5).depth_mm == pytest.approx(2.985)
    assert find_sink("countersink", "M5 ISO 10642", 6.0).depth_mm == pytest.approx(2.735)
    assert find_sink("countersink", "M5 ISO 10642", 4.2).hole_mm == 5.5  # the screw's own clearance hole
    assert find_sink("countersink", "11 x 90", 5.5).depth_mm == pytest.approx(2.75)
    assert find_sink("counterbore", "M6", 6.6).depth_mm == 6.4
    assert find_sink("counterbore", "11 x 5.5", 6.6).depth_mm == 5.5


@pytest.mark.parametrize(
    ("depth", "thickness", "through", "thin"),
    [
        (2.985, 4.0, False, False), (2.985, 3.4, False, True), (2.0, 2.5, False, False), (2.0, 2.49, False, True),
        (2.985, 2.985, True, True),
        (2.985, 2.0, True, True), (4.0, 5.0, False, False), (4.001, 4.99, False, True),
    ],
)  # fmt: skip
def test_room_under_a_sink(depth, thickness, through, thin):
    """At least 0.5 mm, or a fifth of the sheet, of straight hole below (common practice)."""
    room = sink_room(depth, thickness)
    assert (room.through, room.thin) == (through, thin)
