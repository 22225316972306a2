"""Joints, each worked by hand."""

import pytest

from flatprep.base.errors import JobError
from flatprep.bench.joints import check_joints
from flatprep.job.values import JointAsk, JointLayer
from flatprep.model.work import Outcome
from flatprep.practice.fasteners import find_fastener, lengths_mm
from flatprep.profile.hardware.names import UnknownHardwareError
from tests.bench.parts import bench, plate, work

SIDE = bench(
    plate(100, 60, (30, 30, 5.5), name="side"), work("countersink", "M5 ISO 10642", hole_mm=5.5), thickness=4.0
)
QUADRANT = bench(plate(100, 60, (30, 30, 4.2), name="quadrant"), work("tap", "M5", hole_mm=4.2), thickness=6.0)
COVER = bench(plate(100, 60, (30, 30, 9), name="cover"), thickness=3.0)
ARM = bench(plate(100, 60, (30, 30, 11.5), name="arm"), work("ream", "12 H7", hole_mm=11.5), thickness=6.0)


def joint(fastener, *through, **more):
    return JointAsk("joint", fastener, tuple(through), where="job.toml: joint 1 (joint)", **more)


def layer(part, hole=None, **more):
    return JointLayer(part, hole_mm=hole, where="job.toml: joint 1 (joint), through 1", **more)


def spacer(thickness, hole=None, **more):
    return JointLayer(None, "spacer", thickness, hole, **more)


def report(ask, *parts):
    (found,) = check_joints([ask], parts or (SIDE, QUADRANT, COVER, ARM))
    return found


def outcome(found, what):
    return next(check.outcome for check in found.checks if what in check.what)


def text(found, what):
    return next(check.text for check in found.checks if what in check.what)


def test_the_side_plate_on_the_quadrant():
    """Countersunk M5 through the side plate (4 mm) into the depth quadrant (6 mm, tapped M5).

    By hand: the sunk head lies flush, so the grip is the plate's 4 mm. Steel wants 1 d = 5 mm of thread; the quadrant
    offers 6. At least 4 + 5 = 9 mm, the next standard length is 10 mm: 6 mm engaged, 7.5 threads of 0.8 mm, nothing
    stands
    out behind. The hole of 5.5 leaves 0.5 mm of play. The sink is 11.47 wide: 30 - 5.735 = 24.265 mm to the edge.
    """
    found = report(joint("M5 ISO 10642", layer("side", 5.5), layer("quadrant", 4.2, threaded=True), count=2))
    assert found.closes
    assert (found.grip_mm, found.buy, found.count) == (4.0, "countersunk screw M5 ISO 10642 x 10 mm", 2)
    assert text(found, "clearance in side").endswith("0.50 mm of play")
    assert text(found, "thread in quadrant") == "6 mm, 7.5 threads, 5 mm wanted"
    assert text(found, "length") == "10 mm: grip 4, engaged 6 mm"
    assert text(found, "head to the edge") == "24.27 mm"


def test_a_bolt_with_a_nut():
    """M8 through 3 + 30 + 3 mm: grip 36, nut 6.8 high (ISO 4032), one pitch of 1.25 out: 44.05, so 45 mm; 2.2 stand
    out."""
    found = report(joint("M8 hex", layer("cover", 9), spacer(30.0, 9.0), layer("cover", 9), nut="M8"))
    assert found.closes
    assert (found.grip_mm, found.buy) == (36.0, "hex bolt M8 x 45 mm, nut M8 ISO 4032")
    assert text(found, "length") == "45 mm: grip 36, nut 6.8, 2.2 mm stands out"


@pytest.mark.parametrize(
    ("length", "out", "good"),
    [(44.05, "1.25 mm stands out", True), (44.0, "1.2 mm stands out", False),
    (60.0, "17.2 mm stands out: a shorter one would do", True)],
)  # fmt: skip
def test_a_given_length_is_held_against_the_stack(length, out, good):
    found = report(joint("M8 hex", layer("cover", 9), spacer(30.0, 9.0), layer("cover", 9), nut="M8", length_mm=length))
    assert text(found, "length").endswith(out)
    assert found.closes is good


@pytest.mark.parametrize(
    ("hole", "good", "words"),
    [(8.4, True, "0.40 mm of play"), (8.3, False, "tighter than the fine clearance of 8.4"),
    (7.9, False, "does not pass"),
     (10.0, True, "2.00 mm of play"), (10.1, False, "wider than the coarse clearance of 10")],
)  # fmt: skip
def test_clearance_in_a_plate(hole, good, words):
    """ISO 273, M8: 8.4, 9, 10."""
    found = report(joint("M8", spacer(20.0, hole), nut="M8"))
    assert words in text(found, "clearance in spacer")
    assert found.closes is good


def test_nothing_that_holds():
    assert "nothing holds" in text(report(joint("M8", layer("cover", 9))), "hold")
    both = report(joint("M5 ISO 10642", layer("side", 5.5), layer("quadrant", 4.2, threaded=True), nut="M5"))
    assert "hold against each other" in text(both, "hold")
    middle = report(joint("M5", layer("quadrant", 4.2, threaded=True), spacer(3.0, 5.5)))
    assert "not the last" in text(middle, "hold")


def test_a_wrong_thread_or_nut():
    found = report(joint("M6", spacer(4.0, 6.6), layer("quadrant", 4.2, threaded=True)))
    assert text(found, "thread in quadrant") == "M5 is tapped, the screw is M6"
    assert not found.closes
    other = report(joint("M8", spacer(4.0, 9.0), nut="M6"))
    assert "another size" in text(other, "nut")


def test_an_untapped_last_plate_is_an_open_question():
    found = report(joint("M8", spacer(10.0, 9.0), layer("cover", 9, threaded=True)))
    assert "no tap is asked for" in text(found, "thread in cover")
    assert outcome(found, "thread in cover") is Outcome.OPEN


def test_a_thread_too_short_for_its_material():
    thin = bench(plate(100, 60, (30, 30, 4.2), name="thin"), work("tap", "M5", hole_mm=4.2), thickness=2.0)
    found = report(joint("M5", spacer(4.0, 5.5), layer("thin", 4.2, threaded=True)), thin)
    assert outcome(found, "thread in thin") is Outcome.BAD


def test_a_countersunk_screw_needs_its_own_sink():
    found = report(joint("M5 DIN 7991", layer("side", 5.5), layer("quadrant", 4.2, threaded=True)))
    assert outcome(found, "head in side") is Outcome.BAD


def test_a_counterbored_head_sits_lower():
    """M6 counterbored 6.4 deep in 10 mm: grip 3.6; the nut plate tapped M6 in 8 mm steel wants 6: 9.6, so 10 mm."""
    top = bench(plate(100, 60, (30, 30, 6.6), name="top"), work("counterbore", "M6", hole_mm=6.6), thickness=10.0)
    base = bench(plate(100, 60, (30, 30, 5.0), name="base"), work("tap", "M6", hole_mm=5.0), thickness=8.0)
    found = report(joint("M6 ISO 4762", layer("top", 6.6), layer("base", 5.0, threaded=True)), top, base)
    assert found.grip_mm == pytest.approx(3.6)
    assert found.buy == "socket head screw M6 x 10 mm"


@pytest.mark.parametrize(
    ("x", "edge", "neighbour"),
    [(30.0, Outcome.GOOD, None), (7.0, Outcome.BAD, None), (91.0, Outcome.GOOD, Outcome.BAD)],
)
def test_room_for_the_head(x, edge, neighbour):
    """M8 hex: 13 across flats, 15.01 across corners: 7.5 mm to each side; a hole of 9 stands at 80, its rim at 84.5."""
    part = bench(plate(100, 60, (x, 30, 8.99), (80, 30, 9.5), name="part"), thickness=3.0)
    found = report(joint("M8 hex", layer("part", at=(x, 30.0)), spacer(20.0, 9.0), nut="M8"), part)
    assert outcome(found, "head to the edge") is edge
    beside = [check.outcome for check in found.checks if "next hole" in check.what]
    assert beside == ([] if neighbour is None else [neighbour])


@pytest.mark.parametrize(
    ("rim", "told"), [(12.5, False), (11.9, True), (7.6, True)], ids=["free", "tight-for-the-spanner", "close"]
)
def test_room_for_the_spanner(rim, told):
    """M8 hex: 7.506 to a corner, 0.5 mm free and half a diameter, 4 mm, for the spanner: 12.0 mm from the centre."""
    part = bench(plate(200, 60, (30, 30, 8.99), (30 + rim + 5, 30, 10), name="part"), thickness=3.0)
    found = report(joint("M8 hex", layer("part", at=(30.0, 30.0)), spacer(20.0, 9.0), nut="M8"), part)
    beside = [check for check in found.checks if check.what == "head to the next hole of part"]
    assert [check.outcome for check in beside] == ([Outcome.OPEN] if told else [])


def test_a_bolt_near_its_edge_is_weak():
    """1.5 d: 12 mm for M8."""
    for x, weak in ((11.9, True), (12.0, False)):
        part = bench(plate(200, 60, (x, 30, 8.99), name="part"), thickness=3.0)
        found = report(joint("M8 hex", layer("part", at=(x, 30.0)), spacer(20.0, 9.0), nut="M8"), part)
        assert ("weak" in text(found, "head to the edge")) is weak


# ---------------------------------------------------------------- shoulder screws and dowels


def test_a_shoulder_screw_turns_with_its_play():
    """10 mm h8 shoulder: 9.978 to 10. A bush of 10 mm bore (10.000 to 10.000 as given), 6 + 3.85 = 9.85 mm of stack
    under a
    shoulder of 10: 0.15 mm of axial play. Thread M8, 13 mm long: 12 mm of steel hold 9.6 threads, 1 mm stands out."""
    base = bench(plate(100, 60, (30, 30, 6.8), name="base"), work("tap", "M8", hole_mm=6.8), thickness=12.0)
    ask = joint("shoulder 10", spacer(6.0, 10.05), spacer(3.85, 10.05), layer("base", 6.8, threaded=True))
    found = report(ask, base)
    assert found.closes
    assert found.buy == "shoulder screw 10 ISO 7379 x 10 mm"
    assert "0.15 mm of axial play" in text(found, "play")
    assert "0.050 to 0.072 mm of play" in text(found, "shoulder in spacer")
    assert "12 mm engaged, 9.6 threads, 1 mm stands out" in text(found, "thread in base")


def test_a_quarter_inch_shoulder_screw_has_a_10_24_thread_three_eighths_long():
    """ASME B18.3: shoulder 0.246 to 0.248 in; 6 + 6.5 = 12.5 under a shoulder of 1/2 in, 12.7: 0.2 mm of play."""
    base = bench(plate(100, 60, (30, 30, 3.8), name="base"), work("tap", "#10-24", hole_mm=3.8), thickness=10.0)
    found = report(joint("shoulder 1/4", spacer(12.5, 6.35), layer("base", 3.8, threaded=True)), base)
    assert found.buy == "shoulder screw 1/4 ASME B18.3 x 0.5 in"
    assert "9.525 mm of #10-24 UNC: 9.525 mm engaged, 9.0 threads" in text(found, "thread in base")
    assert found.closes


@pytest.mark.parametrize(
    ("stack", "words"),
    [(9.96, "axial play: add washers"), (9.94, "0.06 mm of axial play"), (9.76, "0.24 mm of axial play"),
     (9.7, "add washers of 0.05 to 0.25 mm")],
)  # fmt: skip
def test_axial_play(stack, words):
    """0.05 to 0.25 mm; a stack of 9.96 leaves 0.04 under 10, so 12 mm is taken: 2.04, washers of 1.79 to 1.99."""
    assert words in text(report(joint("shoulder 10", spacer(stack, 10.05), nut="M8")), "play")


def test_a_given_shoulder_that_clamps():
    found = report(joint("shoulder 10", spacer(10.0, 10.05), nut="M8", length_mm=10.0))
    assert "the plates are clamped" in text(found, "play")


def test_a_hole_under_the_shoulder_does_not_turn():
    found = report(joint("shoulder 10", spacer(9.8, 9.99), nut="M8"))
    assert "does not turn" in text(found, "shoulder in spacer")


def test_a_reamed_hole_brings_its_limits():
    found = report(joint("shoulder 12", layer("arm", 11.5), spacer(3.8, 12.1), nut="M10"))
    assert text(found, "shoulder in arm").startswith("hole 12.000 to 12.018, shoulder 11.941 to 11.984")


def test_a_dowel_is_held_by_one_plate_and_slides_in_the_other():
    """8 m6: 8.006 to 8.015. H7 holds it (0 to 15 µm), F7 (8.013 to 8.028) lets it slide or nearly: 22 µm loose to 2
    µm tight."""
    press = bench(plate(100, 60, (30, 30, 7.5), name="press"), work("ream", "8 H7", hole_mm=7.5), thickness=6.0)
    slip = bench(plate(100, 60, (30, 30, 7.4), name="slip"), work("ream", "8 F7", hole_mm=7.4), thickness=6.0)
    found = report(joint("8 dowel", layer("press", 7.5), layer("slip", 7.4)), press, slip)
    assert found.closes
    assert found.buy == "dowel pin 8 m6 ISO 8734 x 12 mm"
    assert "it holds the pin" in text(found, "pin in press")
    assert "-0.002 to 0.022 mm of play" in text(found, "pin in slip")
    loose = report(joint("8 dowel", layer("slip", 7.4), layer("slip", 7.4)), press, slip)
    assert "no plate holds the pin" in text(loose, "hold")


def test_a_cut_hole_is_no_dowel_hole():
    found = report(joint("8 dowel", layer("cover", 9), spacer(6.0, 8.0)))
    assert "ream it" in text(found, "pin in cover")


# ---------------------------------------------------------------- what is refused, and names


@pytest.mark.parametrize(
    ("ask", "words"),
    [
        (joint("M9", spacer(4.0, 9.0)), 'fastener = "M9"'), (joint("8 rivet", spacer(4.0)), 'fastener = "8 rivet"'),
        (joint("M8", spacer(4.0, 9.0), nut="M9"), 'nut = "M9"'),
        (joint("M8", layer("cover", 7)), "hole = 7: cover has no such hole"),
        (joint("M8", layer("lost", 7)), 'part = "lost"'),
    ],
)  # fmt: skip
def test_wrong_joints_name_file_key_and_value(ask, words):
    with pytest.raises(JobError) as caught:
        report(ask)
    assert caught.value.message.startswith("job.toml: joint 1 (joint)")
    assert words in caught.value.message


@pytest.mark.parametrize(
    ("name", "title", "head"),
    [
        ("M12", "hex bolt M12", 20.785), ("M12 ISO 4017", "hex bolt M12", 20.785),
        ("M8 hex bolt", "hex bolt M8", 15.011), ("M14 hex", "hex bolt M14", 24.249),
        ("M8x1 hex", "hex bolt M8x1", 15.011), ("M6 ISO 4762", "socket head screw M6", 10.0),
        ("M6 socket head screw", "socket head screw M6", 10.0),
        ("1/4-20 socket", "socket head screw 1/4-20 UNC", 9.525),
        ("3/8", "hex bolt 3/8-16 UNC", 0.65 * 25.4), ("3/8-24 UNF", "hex bolt 3/8-24 UNF", 0.65 * 25.4),
        ("M5 ISO 10642", "countersunk screw M5 ISO 10642", 11.47),
        ("1/4-20 B18.3 flat", "countersunk screw 1/4 ASME B18.3", 13.4874),
        ("shoulder screw 1/4", "shoulder screw 1/4 ASME B18.3", 9.525),
        ("8 shoulder", "shoulder screw 8 ISO 7379", 13.0),
        ("6 dowel", "dowel pin 6 m6 ISO 8734", 0.0),
    ],
)  # fmt: skip
def test_fastener_names(name, title, head):
    found = find_fastener(name)
    assert (found.title, found.head_dia_mm) == (title, pytest.approx(head))


def test_unknown_fasteners():
    with pytest.raises(UnknownHardwareError):
        find_fastener("wood screw 4x30")


LENGTHS = {
    "M8": "4 5 6 8 10 12 16 20 25 30 35 40 45 50 55 60 65 70 80 90 100 110 120 130 140 150 160 180 200",
    "shoulder 10": "10 12 16 20 25 30 40 50 60 70 80 90 100 120",
    "6 dowel": "4 5 6 8 10 12 14 16 18 20 24 26 28 30 32 35 40 45 50 55 60 65 70 80 90 100",
}
EIGHTHS = {
    "1/4": "1.5 2 2.5 3 4 5 6 7 8 10 12 14 16 18 20 22 24 28 32 36 40 48",
    "shoulder 1/4": "1 1.5 2 2.5 3 4 5 6 7 8 10 12 14 16 18 20 22 24",
}
"""Inch lengths in eighths."""


@pytest.mark.parametrize("name", [*LENGTHS, *EIGHTHS])
def test_standard_lengths(name):
    """ISO 888, ISO 7379 and ISO 8734 from memory; inch lengths as distributors list them."""
    scale = 1.0 if name in LENGTHS else 25.4 / 8.0
    expected = [scale * float(word) for word in (LENGTHS.get(name) or EIGHTHS[name]).split()]
    assert lengths_mm(find_fastener(name)) == pytest.approx(expected)
