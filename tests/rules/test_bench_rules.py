"""Rules about bench work: just below, exactly at, and above each limit; unknown names are findings, never crashes."""

from pathlib import Path

import pytest

from flatprep.job.values import JobPart, Work
from flatprep.model.drawing import Text
from flatprep.model.finding import Severity
from flatprep.profile.material_load import load_material
from flatprep.profile.process_load import load_process
from tests.bench.parts import plate
from tests.rules.setting import context, found

LASER = load_process("fibre-laser")


def findings(rule, holes, *works, material="mild-steel", thickness=3.0, texts=(), size=(200, 100)):
    part = plate(*size, *holes)
    made_of = load_material(material)
    asked = tuple(Work(kind, name, hole_mm=hole, where="job.toml: part 1, work 1") for kind, name, hole in works)
    job = JobPart(Path("plate.dxf"), "plate", made_of, thickness, LASER, work=asked)
    ctx = context(part, process=LASER, material=made_of, thickness=thickness, job_part=job, texts=texts)
    return found(rule, ctx)


def only(listed):
    (one,) = listed
    return one


# ---------------------------------------------------------------- tap-hole-size


@pytest.mark.parametrize(
    ("drawn", "loud"),
    [(4.2, False), (4.334, False), (4.3345, False), (4.336, True), (6.0, True), (3.0, False)],
    ids=["drill", "at-limit", "rounding", "just-above", "far", "pilot"],
)
def test_a_hole_to_be_tapped(drawn, loud):
    """M5, 6H: greatest minor diameter 4.334 (ISO 965-1)."""
    listed = findings("tap-hole-size", [(50, 50, drawn)], ("tap", "M5", drawn))
    assert bool(listed) is loud
    if loud:
        one = only(listed)
        assert (one.severity, one.at, one.unit) == (Severity.ERROR, (50, 50), "mm")
        assert (one.measured, one.limit) == (pytest.approx(drawn), 4.334)
        assert one.remedy


def test_a_hole_cut_to_the_drill_in_steel_that_hardens():
    assert (
        only(findings("tap-hole-size", [(50, 50, 6.8)], ("tap", "M8", 6.8), material="s355")).severity
        is Severity.WARNING
    )
    assert not findings("tap-hole-size", [(50, 50, 5.5)], ("tap", "M8", 5.5), material="s355")
    assert not findings("tap-hole-size", [(50, 50, 6.8)], ("tap", "M8", 6.8), material="stainless-304")


def test_an_unknown_thread_is_a_finding_with_the_nearest_names():
    one = only(findings("tap-hole-size", [(50, 50, 6)], ("tap", "M7.5", 6)))
    assert one.message == 'thread "M7.5" is not known'
    assert "M7" in one.remedy


@pytest.mark.parametrize(("x", "loud"), [(7.5, False), (7.4995, False), (7.49, True), (5.0, True)])
def test_a_thread_near_an_edge(x, loud):
    """M5: 1.5 d, 7.5 mm, from the centre to the edge (common practice)."""
    listed = findings("tap-hole-size", [(x, 50, 4.2)], ("tap", "M5", 4.2))
    assert [one.severity for one in listed] == ([Severity.WARNING] if loud else [])


# ---------------------------------------------------------------- thread-engagement


@pytest.mark.parametrize(
    ("thread", "thickness", "material", "severity", "measured", "limit", "unit"),
    [
        ("M8", 1.0, "mild-steel", Severity.ERROR, 0.8, 2.0, "threads"),
        ("M8", 2.5, "mild-steel", Severity.WARNING, 2.0, 3.0, "threads"),
        ("M8", 4.0, "mild-steel", Severity.WARNING, 4.0, 8.0, "mm"),
        ("M5", 4.999, "mild-steel", None, 0, 0, ""),  # within rounding of one diameter
        ("M5", 4.99, "mild-steel", Severity.WARNING, 4.99, 5.0, "mm"),
        ("M5", 5.0, "mild-steel", None, 0, 0, ""),
        ("M5", 6.0, "al-6061-t6", Severity.WARNING, 6.0, 7.5, "mm"),
        ("M5", 8.0, "al-6061-t6", None, 0, 0, ""),
    ],
)  # fmt: skip
def test_engagement_in_a_sheet(thread, thickness, material, severity, measured, limit, unit):
    listed = findings("thread-engagement", [(50, 50, 4)], ("tap", thread, 4), thickness=thickness, material=material)
    if severity is None:
        assert not listed
    else:
        one = only(listed)
        assert (one.severity, one.unit) == (severity, unit)
        assert (one.measured, one.limit) == pytest.approx((measured, limit))


def test_wood_takes_no_machine_thread():
    one = only(findings("thread-engagement", [(50, 50, 5)], ("tap", "M6", 5), material="birch-ply", thickness=18.0))
    assert (one.severity, one.remedy[:22]) == (Severity.ERROR, "Use a threaded insert,")


def test_many_holes_of_one_work_are_told_once():
    holes = [(20 + 20 * k, 50, 4) for k in range(5)]
    assert len(findings("thread-engagement", holes, ("tap", "M8", 4), thickness=1.0)) == 1


# ---------------------------------------------------------------- bore-size


@pytest.mark.parametrize(
    ("drawn", "severity", "limit"),
    [(7.5, None, 0), (7.5005, None, 0), (7.51, Severity.WARNING, 7.5), (8.0, Severity.WARNING, 7.5),
    (8.01, Severity.ERROR, 8.0)],
    ids=["at-limit", "rounding", "little-left", "at-size", "too-wide"],
)  # fmt: skip
def test_a_hole_to_be_reamed(drawn, severity, limit):
    """8 H7 in 3 mm steel by laser: at least 0.5 mm is left for the reamer."""
    listed = findings("bore-size", [(50, 50, drawn)], ("ream", "8 H7", drawn))
    if severity is None:
        assert not listed
    else:
        assert (only(listed).severity, only(listed).limit) == (severity, pytest.approx(limit))


@pytest.mark.parametrize(
    ("x", "severity", "limit"),
    [(50.0, None, 0), (17.6, None, 0), (17.5, Severity.WARNING, 6.6), (12.5, Severity.WARNING, 6.6),
    (12.4, Severity.ERROR, 1.5)],
    ids=["far", "at-limit", "thin", "at-web", "under-the-web"],
)  # fmt: skip
def test_a_bearing_seat_near_an_edge(x, severity, limit):
    """608 N7 in 3 mm steel: 22 wide, 0.3 of it as wall is 6.6 mm; the laser's least web there is 1.5 mm."""
    listed = findings("bore-size", [(x, 50, 21)], ("bore", "608 N7", 21))
    if severity is None:
        assert not listed
    else:
        one = only(listed)
        assert (one.severity, one.limit) == (severity, pytest.approx(limit))
        assert one.measured == pytest.approx(x - 11.0)


def test_a_seat_near_another_hole():
    one = only(findings("bore-size", [(50, 50, 21), (68, 50, 10)], ("bore", "608 N7", 21)))
    assert one.measured == pytest.approx(18 - 5 - 11)


def test_an_unknown_fit_is_a_finding():
    assert only(findings("bore-size", [(50, 50, 21)], ("bore", "22 Q7", 21))).severity is Severity.ERROR


# ---------------------------------------------------------------- countersink-too-deep


@pytest.mark.parametrize(
    ("thickness", "severity"), [(4.0, None), (3.5, Severity.WARNING), (2.985, Severity.ERROR), (2.0, Severity.ERROR)]
)
def test_a_countersink_in_a_sheet(thickness, severity):
    """M5 ISO 10642 over 5.5: 2.985 deep; a fifth of the sheet and at least 0.5 mm stays straight below."""
    listed = findings(
        "countersink-too-deep", [(50, 50, 5.5)], ("countersink", "M5 ISO 10642", 5.5), thickness=thickness
    )
    assert [one.severity for one in listed] == ([] if severity is None else [severity])
    assert all(one.measured == pytest.approx(2.985, abs=1e-6) for one in listed)


@pytest.mark.parametrize(("x", "loud"), [(6.0, False), (5.735, False), (5.7, True)])
def test_a_sink_over_an_edge(x, loud):
    """The sink is 11.47 wide."""
    listed = findings("countersink-too-deep", [(x, 50, 5.5)], ("countersink", "M5 ISO 10642", 5.5), thickness=6.0)
    assert bool(listed) is loud


@pytest.mark.parametrize(("apart", "loud"), [(11.47, False), (11.46, True)])
def test_sinks_that_run_into_each_other(apart, loud):
    holes = [(50, 50, 5.5), (50 + apart, 50, 5.5)]
    listed = findings("countersink-too-deep", holes, ("countersink", "M5 ISO 10642", 5.5), thickness=6.0)
    assert bool(listed) is loud


def test_a_counterbore_through_the_sheet():
    one = only(findings("countersink-too-deep", [(50, 50, 6.6)], ("counterbore", "M6", 6.6), thickness=6.0))
    assert (one.severity, one.measured, one.limit) == (Severity.ERROR, pytest.approx(6.4), 6.0)


def test_a_head_that_is_not_named_is_a_finding():
    one = only(findings("countersink-too-deep", [(50, 50, 5.5)], ("countersink", "M5", 5.5)))
    assert "name the standard" in one.remedy


# ---------------------------------------------------------------- unclear-hole


@pytest.mark.parametrize(
    ("drawn", "name"),
    [(6.0, "M6"), (8.0, "M8"), (6.35, "1/4"), (9.525, "3/8"), (4.0, "M4"), (16.0, "M16"), (6.004, "M6")],
)  # fmt: skip
def test_a_bare_nominal_size(drawn, name):
    one = only(findings("unclear-hole", [(50, 50, drawn)]))
    assert one.severity is Severity.NOTE
    assert f"bare size of {name}" in one.message


@pytest.mark.parametrize("drawn", [5.0, 6.6, 4.2, 5.5, 10.2, 7.3, 22.0, 25.0, 7.9375, 6.02, 10.0])
def test_sizes_with_a_meaning_are_clear(drawn):
    """5.0 taps M6, 10.0 is the coarse clearance of M8, 5/16 in taps 3/8-16; large holes are no screw holes."""
    assert not findings("unclear-hole", [(50, 50, drawn)])


def test_alike_holes_are_told_once_and_worked_ones_not_at_all():
    holes = [(20, 50, 6), (50, 50, 6), (80, 50, 8)]
    assert [f.measured for f in findings("unclear-hole", holes)] == pytest.approx([6, 8])
    assert [f.measured for f in findings("unclear-hole", holes, ("drill", "6", 6.0))] == pytest.approx([8])


# ---------------------------------------------------------------- work-without-hole


def test_work_that_matches_nothing_is_told():
    one = only(findings("work-without-hole", [(50, 50, 6)], ("tap", "M5", 4.2)))
    assert (one.severity, one.limit) == (Severity.ERROR, 4.2)
    assert not findings("work-without-hole", [(50, 50, 4.2)], ("tap", "M5", 4.2))


def test_work_on_another_number_of_holes_is_told():
    part = plate(200, 100, (50, 50, 4.2), (80, 50, 4.2))
    asked = Work("tap", "M5", hole_mm=4.2, count=4)
    job = JobPart(Path("plate.dxf"), "plate", load_material("mild-steel"), 3.0, LASER, work=(asked,))
    one = only(found("work-without-hole", context(part, process=LASER, job_part=job)))
    assert (one.measured, one.limit, one.unit) == (2, 4, None)


# ---------------------------------------------------------------- callouts of the drawing


def test_callouts_are_judged_like_the_jobs_work():
    """M5 beside a hole of 4.4 mm, over the greatest minor diameter 4.334; and in 1 mm sheet."""
    note = Text("M5", (54, 52), "NOTE", "1", 3.0)
    assert only(findings("tap-hole-size", [(50, 50, 4.4)], texts=(note,))).measured == pytest.approx(4.4)
    assert only(findings("thread-engagement", [(50, 50, 4.2)], texts=(note,), thickness=1.0)).severity is Severity.ERROR
    assert not findings("unclear-hole", [(50, 50, 4.0)], texts=(note,))


def test_without_a_job_and_without_callouts_nothing_is_said():
    part = plate(200, 100, (50, 50, 7.3))
    ctx = context(part, process=LASER, material=load_material("mild-steel"), thickness=3.0)
    for rule in ("tap-hole-size", "thread-engagement", "bore-size", "countersink-too-deep", "unclear-hole"):
        assert not found(rule, ctx)


@pytest.mark.parametrize(
    ("text", "severity"),
    [
        (Text("4x M5", (54, 52), "0", "1", 3.0), Severity.NOTE),
        (Text("NO 7", (54, 52), "0", "1", 3.0), Severity.WARNING),
        (Text("polish", (54, 52), "0", "1", 3.0, ((60, 60),)), Severity.NOTE),
    ],
    ids=["callout", "lettering", "leader"],
)  # fmt: skip
def test_a_callout_on_the_part_is_not_lettering_that_was_forgotten(text, severity):
    assert only(findings("text-not-outlined", [], texts=(text,))).severity is severity
