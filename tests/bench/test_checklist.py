"""The checklist: which steps, with which tools, in which order, and what is refused."""

import re
from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.base.errors import JobError
from flatprep.bench.checklist import checklist
from flatprep.bench.threads import runout_mm
from flatprep.job.values import BendAsk, Pilots
from flatprep.model.drawing import Text
from flatprep.model.work import StepKind
from flatprep.profile.hardware.rules import section
from flatprep.profile.hardware.threads import all_threads, find_thread
from tests.bench.parts import bench, line, plate, with_bends, work

K = StepKind


def steps_of(part, *works, **more):
    (found,) = checklist([bench(part, *works, **more)]).parts
    return found.steps


def one(steps, kind):
    (found,) = [step for step in steps if step.kind is kind]
    return found


def kinds(steps):
    return [str(step.kind) for step in steps]


# ---------------------------------------------------------------- threads


def test_a_thread_in_soft_sheet_is_cut_to_the_drill_and_tapped():
    """M5: drill 4.2 (ISO 2306), cut to it in 3 mm mild steel, tapped directly; 6H 4.134 to 4.334."""
    steps = steps_of(plate(100, 50, (10, 12, 4.2), (90, 12, 4.2)), work("tap", "M5", hole_mm=4.2, count=2))
    tap = one(steps, K.TAP)
    assert (tap.size, tap.tool_dia_mm, tap.cut_dia_mm, tap.count) == ("M5", 4.2, 4.2, 2)
    assert tap.at == ((10, 12), (90, 12))
    assert tap.limits_mm == (4.134, 4.334)
    assert "77 % thread (of the 0.6495 P height)" in tap.note
    assert kinds(steps) == ["deburr", "flatness", "tap", "deburr", "inspect"]
    assert [step.order for step in steps] == [1, 2, 3, 4, 5]


def test_a_thread_in_a_hard_rim_is_drilled_out_first():
    """S355, M8: drill 6.8, cut 1.25 mm under it: 5.55."""
    steps = steps_of(plate(100, 50, (10, 12, 5.5)), work("tap", "M8", hole_mm=5.5), material="s355", thickness=8.0)
    drill, tap = one(steps, K.DRILL), one(steps, K.TAP)
    assert (drill.tool_dia_mm, drill.cut_dia_mm, tap.cut_dia_mm) == (6.8, 5.5, 5.5)
    assert drill.order < tap.order


def test_a_pilot_too_small_to_cut_is_marked_and_drilled_solid():
    """M3 in 6 mm steel: drill 2.5, the laser cuts no hole under 3 mm there."""
    steps = steps_of(plate(100, 50, (10, 12, 2.5)), work("tap", "M3", hole_mm=2.5), thickness=6.0)
    assert [s.cut_dia_mm for s in steps if s.at] == [None, None, None, None]
    assert kinds(steps)[2:5] == ["centre-mark", "drill", "tap"]


def test_a_hole_too_large_to_be_tapped_stays_in_the_list_marked_as_impossible():
    tap = one(steps_of(plate(100, 50, (10, 12, 6)), work("tap", "M5", hole_mm=6)), K.TAP)
    assert "above the greatest minor diameter 4.334" in tap.problem
    assert tap.note.startswith("NOT POSSIBLE AS DRAWN")


def test_inch_threads_name_number_drills():
    drill = one(steps_of(plate(100, 50, (10, 12, 4)), work("tap", "1/4-20 UNC", hole_mm=4), thickness=6.5), K.DRILL)
    assert drill.size == "#7 (5.1 mm)"
    assert drill.tool_dia_mm == pytest.approx(0.201 * 25.4)


@pytest.mark.parametrize(
    ("thickness", "material", "words"),
    [
        (1.0, "mild-steel", "too thin for a thread"), (2.0, "mild-steel", "light loads only"),
        (6.0, "birch-ply", "threaded insert"),
        (8.0, "wear-plate-500", "carbide"), (8.0, "al-6061-t6", "forming tap: drill 4.65 mm"),
        (8.0, "s355", "rim is hard"),
    ],
)  # fmt: skip
def test_words_on_threads(thickness, material, words):
    process = "router" if material == "birch-ply" else "fibre-laser"
    steps = steps_of(
        plate(100, 50, (10, 12, 4)),
        work("tap", "M5", hole_mm=4),
        material=material,
        thickness=thickness,
        process=process,
    )
    assert words in one(steps, K.TAP).note


@pytest.mark.parametrize(
    ("depth", "thickness", "words"),
    [
        # DIN 76-2: run-out of pitch 0.8 is 4.2 mm, of 1.25 6.2 mm
        (6.0, 12.0, "drill 10.2 mm deep: the usable thread ends 4.2 mm before the bottom"),
        (8.0, 12.0, "drill through: a blind hole would be 12.2 mm deep"),
        (None, 12.0, "more than 10 mm of thread gains nothing"), (None, 10.0, "12.5 threads engaged; "),
    ],
)  # fmt: skip
def test_blind_and_long_threads(depth, thickness, words):
    asked = work("tap", "M5", hole_mm=4.2, depth_mm=depth)
    tap = one(steps_of(plate(100, 50, (30, 25, 4.2)), asked, thickness=thickness), K.TAP)
    assert words in tap.note
    assert tap.depth_mm == depth


@pytest.mark.parametrize(
    ("thread", "words"), [("M6", "under M8 better a through bolt"), ("M8", "no thread without carbide")]
)
def test_small_threads_in_wear_plate(thread, words):
    steps = steps_of(
        plate(100, 50, (30, 25, 4)), work("tap", thread, hole_mm=4), material="wear-plate-500", thickness=8.0
    )
    assert words in one(steps, K.TAP).note
    assert ("under M8" in one(steps, K.TAP).note) is (thread == "M6")


@pytest.mark.parametrize(
    ("pitch", "runout"),
    [(0.5, 2.8), (0.7, 3.8), (0.8, 4.2), (1, 5.1), (1.25, 6.2), (1.5, 7.3), (1.75, 8.3), (2, 9.3), (2.5, 11.2)],
)
def test_runouts(pitch, runout):
    """DIN 76-2, as quoted by a hole standards table and by the tables of an open CAD program."""
    thread = next(t for t in all_threads() if t.pitch_mm == pitch and not t.is_inch)
    assert runout_mm(thread) == runout
    assert pitch in section("runout").numbers("pitch")
    assert runout_mm(find_thread("1/4-28 UNF")) == 5.1  # pitch 0.907: the next larger in the table is 1


@pytest.mark.parametrize(
    ("thread", "drill"), [("M3", 3.1), ("M4", 4.2), ("M5", 5.2), ("M6", 6.3), ("M8", 8.4), ("M10", 10.5), ("M12", 12.5)]
)
def test_insert_drills(thread, drill):
    """DIN 8140, from memory."""
    steps = steps_of(plate(100, 50, (30, 25, 3)), work("thread_insert", thread, hole_mm=3), material="al-6061-t6")
    assert one(steps, K.THREAD_INSERT).tool_dia_mm == drill


def test_thread_inserts():
    """M5 wire insert: drill 5.2 (DIN 8140, from memory)."""
    steps = steps_of(plate(100, 50, (10, 12, 5.2)), work("thread_insert", "M5", hole_mm=5.2), material="al-6061-t6")
    assert one(steps, K.THREAD_INSERT).tool_dia_mm == 5.2


@pytest.mark.parametrize(
    ("asked", "inch", "tool"),
    [
        (("tap", "M5"), False, "drill 4.2 mm"),
        (("tap", "M5"), True, "drill #19"),  # 0.166 in, 4.216 mm, inside 4.134 to 4.334
        (("tap", "M1.6"), True, "drill 1.25 mm"),  # 3/64 is 1.191, under 1.221
        (("tap", "1/4-20"), False, "drill #7 (5.1 mm)"), (("tap", "1/4-20"), True, "drill #7"),
        (("clearance", "M5"), False, "drill 5.5 mm"), (("clearance", "M5"), True, "drill 7/32"),
        (("clearance", "1/4"), False, "drill 9/32 (7.1 mm)"), (("clearance", "1/4"), True, "drill 9/32"),
        (("ream", "8 H7"), False, "drill 7.7 mm"), (("ream", "8 H7"), True, "drill N"),  # 0.302 in, 7.671 mm
        (("drill", "6.5"), True, "drill F"), (("drill", "#7"), False, "drill #7"),
        (("drill", "6.5"), False, "drill 6.5 mm"),
    ],
)  # fmt: skip
def test_drills_are_named_as_the_shop_has_them(asked, inch, tool):
    steps = steps_of(plate(100, 50, (30, 25, 1.1)), work(*asked, hole_mm=1.1), inch=inch, thickness=1.5)
    assert one(steps, K.DRILL).tool == tool


# ---------------------------------------------------------------- fits


def test_a_reamed_hole_is_drilled_first():
    """8 H7: 8.000 to 8.015; laser pilot 7.5, drill 7.7 (8 - 0.25 - 0.05), reamer 8."""
    steps = steps_of(plate(100, 50, (10, 12, 7.5)), work("ream", "8 H7", hole_mm=7.5), thickness=6.0)
    drill, ream = one(steps, K.DRILL), one(steps, K.REAM)
    assert (drill.tool_dia_mm, ream.tool_dia_mm, ream.cut_dia_mm, ream.size) == (7.7, 8.0, 7.5, "8 H7")
    assert ream.limits_mm == pytest.approx((8.0, 8.015))
    assert "8 H7: passes 8.000, stops at 8.015" in steps[-1].note


def test_a_bearing_seat_is_bored():
    """608 N7: outside 22, N7 of 18 to 30 mm is -7 and -28 µm; laser stock 0.8 mm at the least."""
    steps = steps_of(plate(100, 50, (50, 25, 21)), work("bore", "608 N7", hole_mm=21), thickness=6.0)
    bore = one(steps, K.BORE)
    assert (bore.size, bore.tool_dia_mm, bore.cut_dia_mm) == ("22 N7", 22.0, 21.0)
    assert bore.limits_mm == pytest.approx((21.972, 21.993))
    assert "drill" not in kinds(steps)


def test_a_hole_wider_than_its_fit_cannot_be_reamed():
    ream = one(steps_of(plate(100, 50, (10, 12, 8.2)), work("ream", "8 H7", hole_mm=8.2)), K.REAM)
    assert "wider than the least finished size 8.000" in ream.problem


@pytest.mark.parametrize(("drawn", "kind"), [(12.1, K.INSPECT), (12.27, K.INSPECT), (11.5, K.REAM)])
def test_wide_limits_may_be_cut_as_they_are(drawn, kind):
    """12 H13: 12.00 to 12.27. The router's IT12 is 0.18 wide: it may be cut so. A laser in 2 mm sheet may miss by 0.2
    (class 1) and has 0.112 mm of taper, 0.312 together: the hole is cut under size and reamed."""
    steps = steps_of(
        plate(100, 50, (50, 25, drawn)), work("ream", "12 H13", hole_mm=drawn), process="router", material="hdpe"
    )
    assert any(step.kind is kind and step.size == "12 H13" for step in steps)
    by_laser = steps_of(plate(100, 50, (50, 25, drawn)), work("ream", "12 H13", hole_mm=drawn), thickness=2.0)
    assert not any(step.kind is K.INSPECT and step.size == "12 H13" for step in by_laser)


def test_a_pilot_with_too_little_left_gets_a_word():
    ream = one(steps_of(plate(100, 50, (10, 12, 7.8)), work("ream", "8 H7", hole_mm=7.8)), K.REAM)
    assert "only 0.20 mm left" in ream.note
    assert ream.cut_dia_mm == pytest.approx(7.5)


def test_a_plate_thin_for_its_bearing_gets_a_word():
    """0.6 of 7 mm: 4.2."""
    for thickness, said in ((4.1, True), (4.2, False)):
        steps = steps_of(plate(100, 50, (50, 25, 21)), work("bore", "608 N7", hole_mm=21), thickness=thickness)
        assert ("retaining plate" in one(steps, K.BORE).note) is said


# ---------------------------------------------------------------- screws


def test_a_clearance_hole_cut_to_size_is_measured_not_drilled():
    """M5: 5.5, ISO 273 medium."""
    steps = steps_of(plate(100, 50, (10, 12, 5.5)), work("clearance", "M5", hole_mm=5.5))
    found = next(s for s in steps if s.at)
    assert (found.kind, found.tool_dia_mm, found.cut_dia_mm, found.size) == (K.INSPECT, 5.5, 5.5, "M5 clearance")
    assert "drill" not in kinds(steps)


@pytest.mark.parametrize(
    ("size", "dia"),
    [("M5", 5.5), ("M5 fine", 5.3), ("M5 coarse", 5.8), ("M12", 13.5), ("1/4", 0.2812 * 25.4), ("#10", 0.221 * 25.4)],
)
def test_a_smaller_hole_is_drilled_to_the_clearance(size, dia):
    drill = one(steps_of(plate(100, 50, (10, 12, 4.5)), work("clearance", size, hole_mm=4.5)), K.DRILL)
    assert drill.tool_dia_mm == pytest.approx(dia)
    assert drill.cut_dia_mm == pytest.approx(dia)


def test_a_countersink_has_its_depth_over_the_hole_below():
    """M5 ISO 10642: sink 11.47 over 5.5: 2.985 deep."""
    steps = steps_of(
        plate(100, 50, (30, 25, 5.5)), work("countersink", "M5 ISO 10642", hole_mm=5.5, side="A"), thickness=5.0
    )
    sink = one(steps, K.COUNTERSINK)
    assert (sink.tool_dia_mm, sink.side, sink.cut_dia_mm) == (11.47, "A", 5.5)
    assert sink.depth_mm == pytest.approx(2.985)
    assert not sink.problem


def test_a_countersink_deeper_than_the_sheet_is_marked_as_impossible():
    sink = one(
        steps_of(plate(100, 50, (30, 25, 5.5)), work("countersink", "M5 ISO 10642", hole_mm=5.5), thickness=2.0),
        K.COUNTERSINK,
    )
    assert "2.99 mm deep in 2 mm sheet" in sink.problem


def test_a_sink_over_a_tapped_hole_takes_no_clearance_drill():
    works = (work("countersink", "8 x 90", hole_mm=4.2), work("tap", "M5", hole_mm=4.2))
    steps = steps_of(plate(100, 50, (30, 25, 4.2)), *works)
    assert kinds(steps)[2:4] == ["countersink", "tap"]
    assert one(steps, K.COUNTERSINK).depth_mm == pytest.approx((8 - 4.2) / 2)


def test_a_counterbore():
    """M6: 11 wide, 6.4 deep (DIN 974-1), over 6.6."""
    steps = steps_of(plate(100, 50, (30, 25, 6.6)), work("counterbore", "M6", hole_mm=6.6), thickness=10.0)
    bore = one(steps, K.COUNTERBORE)
    assert (bore.tool_dia_mm, bore.depth_mm, bore.cut_dia_mm) == (11.0, 6.4, 6.6)


def test_a_nut_pocket_is_measured_across_flats():
    """M8 nut: 13 across flats and 15.011 across corners; 0.1 to 0.3 mm of room."""
    steps = steps_of(
        plate(100, 50, (30, 25, 13.2)), work("nut_pocket", "M8", hole_mm=13.2), process="router", material="hdpe"
    )
    found = next(s for s in steps if s.at)
    assert found.limits_mm == pytest.approx((13.1, 13.3))
    assert "15.01 mm across corners" in found.note
    assert "corners of" in found.note


def test_a_plain_drill_and_a_press_fit():
    steps = steps_of(
        plate(100, 50, (30, 25, 4), (60, 25, 8)),
        work("drill", "6.6", hole_mm=4),
        work("press", "clinch nut M4", hole_mm=8),
    )
    assert one(steps, K.DRILL).tool_dia_mm == 6.6
    assert one(steps, K.PRESS).size == "clinch nut M4"


def test_a_place_without_a_hole_is_marked_and_drilled_solid():
    steps = steps_of(plate(100, 50), work("drill", "#7", at=((20.0, 25.0),)))
    assert kinds(steps)[2:4] == ["centre-mark", "drill"]
    assert one(steps, K.DRILL).tool_dia_mm == pytest.approx(0.201 * 25.4)


@pytest.mark.parametrize(
    ("pilots", "steps", "cut"),
    [
        # M8 in 8 mm mild steel: drill 6.8, pilot 6.12 advised; drawn at 6.8 it would be tapped through the cut skin
        (Pilots.AS_DRAWN, ["tap"], 6.12), (Pilots.CUT, ["drill", "tap"], 6.12),
        (Pilots.MARK, ["centre-mark", "drill", "tap"], None),
    ],
)  # fmt: skip
def test_pilots_change_the_steps(pilots, steps, cut):
    found = steps_of(plate(100, 50, (30, 25, 6.8)), work("tap", "M8", hole_mm=6.8), pilots=pilots, thickness=8.0)
    assert kinds(found)[2:-2] == steps
    assert one(found, K.TAP).cut_dia_mm == (None if cut is None else pytest.approx(cut))


@pytest.mark.parametrize("pilots", list(Pilots))
def test_a_hole_cut_to_its_size_stays_so_whatever_the_pilots(pilots):
    steps = steps_of(plate(100, 50, (30, 25, 5.5)), work("clearance", "M5", hole_mm=5.5), pilots=pilots)
    assert kinds(steps) == ["deburr", "inspect", "inspect"]
    sunk = steps_of(plate(100, 50, (30, 25, 5.5)), work("countersink", "11 x 90", hole_mm=5.5), pilots=pilots)
    assert kinds(sunk) == ["deburr", "flatness", "countersink", "deburr", "inspect"]


def test_nothing_is_cut_where_nothing_is_drawn():
    steps = steps_of(plate(100, 50), work("tap", "M5", at=((20.0, 25.0),)))
    assert [step.cut_dia_mm for step in steps if step.at] == [None] * 4


# ---------------------------------------------------------------- order


BENT = with_bends(plate(100, 60, (10, 12, 4.2), (10, 33, 4.2), (50, 12, 7.5), (80, 12, 5.5)), line(0, 30, 100, 30))
BEND = BendAsk(90.0, 3.0, layer="BEND", where="job.toml: part 1, bend 1")


def test_a_thread_near_a_bend_is_cut_after_bending():
    """t 3, r 3: allowance pi / 2 (3 + 0.65 x 1.5) = 6.24, half 3.12; 3 t + r = 12 mm; with the rim 2.1 (the drill's
    4.2): 17.2 mm."""
    steps = steps_of(BENT, work("tap", "M5", hole_mm=4.2), bends=(BEND,))
    taps = [s for s in steps if s.kind is K.TAP]
    bend = one(steps, K.BEND)
    assert [s.at for s in taps] == [((10, 12), (10, 33))]  # one operation: if any of its holes is near, all wait
    assert bend.order < taps[0].order


def test_a_thread_far_from_the_bend_is_cut_before():
    far = with_bends(plate(100, 60, (10, 12, 4.2)), line(0, 30, 100, 30))
    steps = steps_of(far, work("tap", "M5", hole_mm=4.2), bends=(BEND,))
    assert one(steps, K.TAP).order < one(steps, K.BEND).order


@pytest.mark.parametrize(("y", "waits"), [(12.7, False), (12.9, True)])
def test_how_near_is_near(y, waits):
    """17.22 mm from the bend line: half the allowance 3.12, 3 t + r 12, the drill's radius 2.1."""
    part = with_bends(plate(100, 60, (10, y, 4.2)), line(0, 30, 100, 30))
    steps = steps_of(part, work("tap", "M5", hole_mm=4.2), bends=(BEND,))
    assert (one(steps, K.BEND).order < one(steps, K.TAP).order) is waits


def test_a_bend_tells_its_figures():
    bend = one(steps_of(BENT, bends=(BEND,)), K.BEND)
    assert (bend.size, bend.count, bend.at) == ("90° r 3", 1, ((50.0, 30.0),))
    assert "allowance 6.24 mm, deduction 5.76 mm by DIN 6935" in bend.note
    assert "K 0.42 to 0.47" in bend.note
    assert "springs back 1 to 2° of 90" in bend.note


@pytest.mark.parametrize(
    ("material", "spring"), [("al-5052-h32", "1.5 to 3°"), ("stainless-304", "2 to 4°"), ("wear-plate-400", "6 to 15°")]
)
def test_springback(material, spring):
    """From memory of handbooks."""
    assert f"springs back {spring}" in one(steps_of(BENT, bends=(BEND,), material=material), K.BEND).note


@pytest.mark.parametrize(
    ("material", "radius", "problem", "note"),
    [
        # low-carbon steel: refused under half the thickness and 0.8 mm, one thickness is usual (sheet metal guidelines)
        ("mild-steel", 1.4, "under the least of 1.5 mm", ""), ("mild-steel", 1.5, "", "tight: 3 mm"),
        ("mild-steel", 3.0, "", ""),
        ("acrylic", 3.0, "does not bend cold", ""),
    ],
)  # fmt: skip
def test_radius_by_alloy(material, radius, problem, note):
    process = "co2-laser" if material == "acrylic" else "fibre-laser"
    bend = one(steps_of(BENT, bends=(replace(BEND, radius_mm=radius),), material=material, process=process), K.BEND)
    assert problem in bend.problem
    assert bool(bend.problem) is bool(problem)
    assert note in bend.note
    assert ("tight" in bend.note) is bool(note)


def test_a_bend_without_a_radius_asks_for_it():
    assert "inside radius not named" in one(steps_of(BENT, bends=(replace(BEND, radius_mm=None),)), K.BEND).note


def test_a_sink_near_a_bend_gets_a_word():
    """4 t + r = 15 mm from the tangent line, 3.12 mm from the bend line, and the sink's radius 5.735: 23.86 mm."""
    asked = work("countersink", "M5 ISO 10642", hole_mm=5.5, side="A")
    for y, said in ((6.2, True), (6.1, False)):
        part = with_bends(plate(100, 60, (50, y, 5.5)), line(0, 30, 100, 30))
        sink = one(steps_of(part, asked, bends=(BEND,)), K.COUNTERSINK)
        assert ("pulled out of shape" in sink.note) is said


NEEDS = (
    (K.FLATNESS, K.DRILL), (K.CENTRE_MARK, K.DRILL), (K.DRILL, K.REAM), (K.DRILL, K.TAP), (K.DRILL, K.COUNTERSINK),
    (K.REAM, K.COUNTERSINK), (K.COUNTERSINK, K.TAP), (K.DRILL, K.THREAD_INSERT), (K.BEND, K.PRESS),
)  # fmt: skip
WORKS = st.lists(
    st.sampled_from([
        ("tap", "M5", 4.2), ("tap", "M8", 5.0), ("ream", "8 H7", 7.5), ("bore", "22 N7", 21.0),
        ("clearance", "M5", 5.5),
        ("clearance", "M6", 5.0), ("countersink", "M5 ISO 10642", 5.5), ("countersink", "8 x 90", 4.2),
        ("counterbore", "M6", 6.6),
        ("drill", "6", 5.0), ("thread_insert", "M5", 5.2), ("press", "pin", 7.5),
    ]), max_size=6, unique=True,
)  # fmt: skip
SIZES = (4.2, 5.0, 5.2, 5.5, 6.6, 7.5, 21.0)


@given(WORKS, st.sampled_from([0.8, 3.0, 8.0]), st.sampled_from(list(Pilots)), st.booleans())
def test_nothing_comes_before_what_it_needs(works, thickness, pilots, bent):
    part = plate(400, 60, *((20 + 50 * k, 20, size) for k, size in enumerate(SIZES)))
    part = with_bends(part, line(0, 45, 400, 45)) if bent else part
    asked = [work(kind, size, hole_mm=hole) for kind, size, hole in works]
    steps = steps_of(part, *asked, thickness=thickness, pilots=pilots, bends=(BEND,) if bent else ())
    assert [s.order for s in steps] == list(range(1, len(steps) + 1))
    assert steps[0].kind is K.DEBURR
    assert steps[-1].kind is K.INSPECT
    for before, after in NEEDS:
        for late in (s for s in steps if s.kind is after):
            early = [
                s for s in steps if s.kind is before and (set(s.at) & set(late.at) or not s.at or before is K.BEND)
            ]
            assert all(s.order < late.order for s in early), (before, after)
    for kind, _, hole in works:  # nothing is dropped
        places = {c.circle[:2] for c in part.holes if abs(2 * c.circle[2] - hole) < 1e-6}
        wanted = {"thread_insert": "thread-insert", "clearance": None, "drill": None}.get(kind, kind)
        assert any(places <= set(s.at) for s in steps if wanted in (None, str(s.kind)))


@given(WORKS)
def test_every_step_has_its_reason(works):
    part = plate(400, 60, *((20 + 50 * k, 20, size) for k, size in enumerate(SIZES)))
    steps = steps_of(part, *(work(kind, size, hole_mm=hole) for kind, size, hole in works))
    assert all(step.why for step in steps)


# ---------------------------------------------------------------- what is refused


def refused(part, *works, **more):
    with pytest.raises(JobError) as caught:
        checklist([bench(part, *works, **more)])
    return f"{caught.value.message} / {caught.value.remedy}"


PLATE = plate(100, 50, (10, 12, 4.2), (90, 12, 4.2), (50, 25, 9))


@pytest.mark.parametrize(
    ("asked", "words"),
    [
        (work("tap", "M5", hole_mm=4.0), r"hole = 4: no hole is drawn .* / the drawing has 2 x 4.2 mm, 1 x 9 mm"),
        (work("tap", "M5", hole_mm=4.2, count=4), r"count = 4: holes of 4.2 mm drawn: 2"),
        (work("tap", "M9", hole_mm=4.2), r'tap = "M9": thread "M9" is not known / nearest known: M8, M10'),
        (work("ream", "8 Q7", hole_mm=4.2), r'ream = "8 Q7": tolerance class Q7 is not known'),
        (work("bore", "22", hole_mm=9), r'bore = "22": fit "22" is not known'),
        (work("clearance", "M9", hole_mm=9), r'clearance = "M9": clearance hole "M9" is not known'),
        (work("countersink", "M5", hole_mm=9), r'countersink = "M5": .* / .*name the standard'),
        (work("counterbore", "M9", hole_mm=9), r'counterbore = "M9"'),
        (work("thread_insert", "M20", hole_mm=9), r'thread_insert = "M20": .* / known: M3'),
        (work("nut_pocket", "M9", hole_mm=9), r'nut_pocket = "M9"'),
        (work("drill", "#99", hole_mm=9), r'drill = "#99"'),
        (work("tap", "M5", at=((10.3, 12.0),)), r"at = \(10.3, 12\): no hole .*nearest hole is at \(10.000, 12.000\)"),
        (work("tap", "M5", at=((200.0, 12.0),)), r"at = \(200, 12\)"),
    ],
    ids=lambda v: v if isinstance(v, str) else v.kind,
)  # fmt: skip
def test_wrong_asks_name_file_key_and_value(asked, words):
    said = refused(PLATE, asked)
    assert said.startswith("job.toml: part 1 (plate), work 1")
    assert re.search(words, said)


@pytest.mark.parametrize(
    ("ask", "words"),
    [
        (BendAsk(90.0, 3.0, layer="FOLD", where="job.toml: part 1, bend 1"), r'layer = "FOLD": holds no bend line'),
        (BendAsk(90.0, 3.0, line=((200.0, 0.0),
        (200.0, 50.0)), where="job.toml: part 1, bend 1"), "does not lie on the part"),
        (BendAsk(170.0, 3.0, layer="BEND", where="job.toml: part 1, bend 1"), "angle = 170"),
    ],
)  # fmt: skip
def test_wrong_bends(ask, words):
    assert re.search(words, refused(BENT, bends=(ask,)))


def test_parts_of_one_drawing_share_its_holes():
    """Four holes of 4.2 in two parts of one drawing: count = 4 is right for both together, and nothing for one."""
    first = plate(100, 50, (10, 12, 4.2), (90, 12, 4.2), name="stem#1")
    second = plate(100, 50, (10, 12, 4.2), (90, 12, 4.2), name="stem#2")
    asked = work("tap", "M5", hole_mm=4.2, count=4)
    found = checklist([bench(first, asked), bench(second, asked)])
    assert [one(p.steps, K.TAP).count for p in found.parts] == [2, 2]
    assert "count = 4" in refused(first, asked)


# ---------------------------------------------------------------- callouts, questions, sides, finish, kit, cautions


def _text(words, x, y):
    return Text(words, (x, y), "NOTE", "1A", 3.0)


def test_a_callout_is_work_where_the_job_is_silent():
    part = plate(100, 50, (10, 12, 4.2), (90, 12, 4.2))
    tap = one(steps_of(part, texts=(_text("2x M5", 12, 16),)), K.TAP)
    assert tap.count == 2
    assert "as the drawing's callout asks" in tap.note
    spoken = steps_of(part, work("clearance", "M4", hole_mm=4.2), texts=(_text("2x M5", 12, 16),))
    assert "tap" not in kinds(spoken)


def questions(part, *works, **more):
    (found,) = checklist([bench(part, *works, **more)]).parts
    return " | ".join(found.questions)


@pytest.mark.parametrize(
    ("hole", "words"),
    [
        (4.2, "the tap drill of M5"), (5.5, "the medium clearance hole of M5"), (22.0, "the outside of a bearing 608"),
        (6.0, "the bare size of M6"), (5.0, "the tap drill of M6"), (0.201 * 25.4, "the tap drill of 1/4-20 UNC"),
    ],
)  # fmt: skip
def test_telling_sizes_are_asked_about(hole, words):
    assert words in questions(plate(100, 50, (30, 25, hole)))
    assert questions(plate(100, 50, (30, 25, hole)), work("drill", f"{hole:.6g}", hole_mm=hole)) == ""


@pytest.mark.parametrize("hole", [7.3, 31.3, 13.7])
def test_other_sizes_are_not_asked_about(hole):
    assert questions(plate(100, 50, (30, 25, hole))) == ""


def test_side_bound_work_forbids_turning_over_and_asks_for_its_side():
    sunk = work("countersink", "M5 ISO 10642", hole_mm=5.5)
    part = plate(100, 50, (30, 25, 5.5))
    (found,) = checklist([bench(part, sunk, thickness=5.0)]).parts
    assert "countersink M5 ISO 10642 is done from one side" in found.flip
    assert "from which side, A or B?" in found.questions[0]
    (told,) = checklist([bench(part, replace(sunk, side="B"), thickness=5.0, quantity_opposite=3)]).parts
    assert not told.questions
    assert "on turned-over pieces (3) from side A as drawn" in one(told.steps, K.COUNTERSINK).note
    (plain,) = checklist([bench(part)]).parts
    assert plain.flip == ""


def test_a_coating_masks_threads_and_rounds_edges():
    """Powder adds 60 to 120 µm a side: an M5 clearance hole of 5.5 keeps 5.26."""
    part = plate(100, 50, (10, 12, 4.2), (50, 25, 5.5))
    steps = steps_of(part, work("tap", "M5", hole_mm=4.2), work("clearance", "M5", hole_mm=5.5), finish="powder, black")
    assert "mask before powder coating: it adds 60 to 120 µm a side" in one(steps, K.TAP).note
    assert "round edges 0.5 mm" in steps[0].note
    assert "leaves 5.26 mm" in next(s for s in steps if s.kind is K.INSPECT and s.at).note
    bare = steps_of(part, work("tap", "M5", hole_mm=4.2), finish="brushed")
    assert "mask" not in one(bare, K.TAP).note


@pytest.mark.parametrize(
    ("finish", "words"),
    [
        ("anodised, natural", "mask before anodise coating: it adds 5 to 15 µm a side"),
        ("zinc plated", "mask before zinc coating: it adds 5 to 12 µm a side"), ("paint RAL 6011", "60 to 120 µm"),
    ],
)  # fmt: skip
def test_what_coatings_add(finish, words):
    """From memory: powder 60 to 120 µm, anodising grows 5 to 15, zinc 5 to 12."""
    steps = steps_of(plate(100, 50, (10, 12, 4.2)), work("tap", "M5", hole_mm=4.2), finish=finish)
    assert words in one(steps, K.TAP).note


def test_the_kit_counts_every_piece():
    """Two holes in each of 2 + 3 pieces: ten times the tap."""
    part = plate(100, 50, (10, 12, 4.2), (90, 12, 4.2))
    found = checklist([bench(part, work("tap", "M5", hole_mm=4.2), quantity_opposite=3)])
    assert [(tool.name, tool.uses, tool.parts) for tool in found.tools] == [("tap M5", 10, ("plate",))]


def test_cautions_defer_to_local_codes_and_stand_at_the_step():
    found = checklist([bench(PLATE, work("tap", "M5", hole_mm=4.2), material="al-6061-t6", thickness=1.5)])
    assert found.cautions[0].startswith("Local codes, the machine's manual and licensed practice come before this list")
    assert any("aluminium can explode" in text for text in found.cautions)
    (part,) = found.parts
    assert "razor sharp" in part.steps[0].caution
    assert "torque limit" in one(part.steps, K.TAP).caution
    routed = checklist([bench(PLATE, process="router", material="hdpe")])
    assert routed.parts[0].steps[0].caution == ""


@pytest.mark.parametrize(
    ("process", "material", "left", "caution"),
    [
        ("fibre-laser", "mild-steel", "dross", "spatter"),
        ("co2-laser", "acrylic", "soot", "soot and fume"),
        ("co2-laser", "birch-ply", "soot", "soot and fume"),
        ("router", "hdpe", "burrs", ""),
        ("waterjet", "mild-steel", "burrs", ""),
    ],
)
def test_the_first_step_says_what_this_cut_leaves_on_its_edges(process, material, left, caution):
    first = steps_of(PLATE, process=process, material=material)[0]
    assert f"off with tabs and {left};" in first.note
    assert caution in first.caution
    assert bool(first.caution) is bool(caution)


@pytest.mark.parametrize(("material", "told"), [("mild-steel", False), ("wear-plate-400", True)])
def test_what_a_broken_tap_means_is_told_of_wear_plate_alone(material, told):
    steps = steps_of(plate(100, 50, (30, 25, 8.5)), work("tap", "M10", hole_mm=8.5), material=material, thickness=8.0)
    caution = one(steps, K.TAP).caution
    assert "eye protection" in caution
    assert ("cannot be drilled out" in caution) is told


def test_drilling_thin_sheet_and_bending_have_their_caution():
    steps = steps_of(plate(100, 50, (10, 12, 4)), work("drill", "6", hole_mm=4), thickness=1.5)
    assert "climbs the drill" in one(steps, K.DRILL).caution
    assert "bend order" in one(steps_of(BENT, bends=(BEND,)), K.BEND).caution


@given(WORKS, st.sampled_from(list(Pilots)))
def test_nothing_needs_a_material_or_a_thickness(works, pilots):
    part = with_bends(plate(400, 60, *((20 + 50 * k, 20, size) for k, size in enumerate(SIZES))), line(0, 45, 400, 45))
    asked = [work(kind, size, hole_mm=hole) for kind, size, hole in works]
    steps = steps_of(part, *asked, material=None, thickness=None, pilots=pilots, bends=(BEND,))
    assert steps[-1].kind is K.INSPECT
    assert "thickness not named" in one(steps, K.BEND).note
