"""Clearance, fits, heads, nuts, bearings, pins, drills and tolerances: every row against its reference."""

import re
from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.profile.hardware.bearings import all_bearings, all_bushes, find_bearing, find_bush
from flatprep.profile.hardware.clearance import all_clearances, find_clearance, split_series
from flatprep.profile.hardware.drills import find_drill, inch_drill, inch_drill_below, metric_drill_below
from flatprep.profile.hardware.fits import it_um, limits, parse_fit
from flatprep.profile.hardware.heads import all_countersinks, find_counterbore, find_countersink
from flatprep.profile.hardware.names import UnknownHardwareError
from flatprep.profile.hardware.nuts import all_nuts, find_nut
from flatprep.profile.hardware.pins import all_pins, all_shoulder_screws, find_pin, find_shoulder_screw
from flatprep.profile.hardware.table import table
from flatprep.profile.hardware.tolerance import cut_range, general_mm, thermal_cut_mm
from tests.profile.hardware.rows import named, rows

INCH = 25.4
SCALE = {"mm": 1.0, "in": INCH}
ZONES = sorted({row["class"] for row in rows("fits_iso286")})
STEPS = sorted({row["incl_mm"] for row in rows("fits_iso286")})


# ---------------------------------------------------------------- clearance


@pytest.mark.parametrize("row", rows("clearance"), ids=named)
def test_every_clearance_is_as_published(row):
    scale = 1.0 if row["screw"].startswith("M") else INCH
    found = find_clearance(row["screw"])
    sizes = (found.fine_mm, found.medium_mm, found.coarse_mm)
    assert sizes == pytest.approx([row[s] * scale for s in ("fine", "medium", "coarse")], rel=1e-12)
    assert found.metric_mm == tuple(row.get(f"{s}_mm", row[s]) for s in ("fine", "medium", "coarse"))


@pytest.mark.parametrize("hole", all_clearances(), ids=lambda c: c.screw)
def test_clearances_rise_and_their_drills_make_them(hole):
    assert hole.fine_mm < hole.medium_mm < hole.coarse_mm
    for series in ("fine", "medium", "coarse"):
        # tables print drills to 0.0001 in
        assert find_drill(hole.drill(series)) == pytest.approx(hole.series(series), abs=0.003)


@pytest.mark.parametrize(
    ("text", "screw"),
    [("M6", "M6"), ("m 6", "M6"), ("M8x1", "M8"), ("1/4", "1/4"), ('1/4"', "1/4"), ("0.25in", "1/4"), ("#10", "#10"),
     ("10-24", "#10"), ("1/4-20 UNC", "1/4"), ("No. 8", "#8"), ("1", "1")],
)  # fmt: skip
def test_clearance_names(text, screw):
    assert find_clearance(text).screw == screw


def test_a_series_may_stand_behind_the_screw():
    assert split_series("M5 fine") == ("M5", "fine")
    assert split_series("1/4 close") == ("1/4", "fine")
    assert split_series("1/4 (loose)") == ("1/4", "coarse")
    assert split_series("M5") == ("M5", "medium")


# ---------------------------------------------------------------- fits


@pytest.mark.parametrize("row", rows("fits_iso286"), ids=named)
def test_every_deviation_is_as_published(row):
    """At the end of a step of sizes, which belongs to it, and just above its beginning."""
    below = max((s for s in STEPS if s < row["incl_mm"]), default=0.0)
    for size in (row["incl_mm"], below + 0.001):
        found = limits(size, row["class"])
        assert (found.upper_um, found.lower_um) == (row["upper"], row["lower"])
        assert found.most_mm - found.least_mm == pytest.approx((row["upper"] - row["lower"]) / 1000.0, abs=1e-12)


@pytest.mark.parametrize("row", rows("it_grades"), ids=named)
def test_every_grade_is_as_published(row):
    """At the end of a step, which belongs to it, and just above its beginning."""
    steps = {r["incl_mm"] for r in rows("it_grades")}
    below = max((s for s in steps if s < row["incl_mm"]), default=0.0)
    for size in (row["incl_mm"], below + 0.001):
        assert it_um(size, int(row["grade"][2:])) == row["width"]


@pytest.mark.parametrize(
    ("letter", "distances"),
    [("d", "20 30 40 50 65 80 80 100 100 120 120"), ("e", "14 20 25 32 40 50 50 60 60 72 72")],
)
def test_fundamental_deviations_from_memory(letter, distances):
    """ISO 286-1, from memory: a shaft lies so far below its nominal size, a hole so far above."""
    for size, distance in zip(STEPS, distances.split(), strict=True):
        assert limits(size, f"{letter}9").upper_um == -float(distance)
        assert limits(size, f"{letter.upper()}9").lower_um == float(distance)


DERIVED = ["H5", "H10", "H12", "H13", "h7", "h11", "js6", "JS9", "F8", "E9", "D10", "G6", "f8", "n7", "p7"]


@pytest.mark.parametrize("grade", [12, 13, 14, 15, 16])
def test_five_grades_on_tolerances_are_ten_times_as_wide(grade):
    """ISO 286-1: above IT11 the widths are those of five grades below, times ten."""
    for size in (3.0, 6.0, 10.0, 18.0, 30.0, 50.0, 80.0, 120.0):
        assert it_um(size, grade) == 10 * it_um(size, grade - 5)


@given(size=st.floats(0.01, 120.0), zone=st.sampled_from([*ZONES, *DERIVED]))
def test_lower_is_below_upper_and_the_width_is_the_grade(size, zone):
    found = limits(size, zone)
    assert found.least_mm < found.most_mm
    assert found.upper_um - found.lower_um == it_um(size, found.grade)


@pytest.mark.parametrize(
    ("text", "least", "most"),
    [
        # computed by the definitions of ISO 286-1 from the IT grades: H 0 to +IT, h -IT to 0, js half and half
        ("10 H10", 10.0, 10.058), ("60 H12", 60.0, 60.3), ("25 h7", 24.979, 25.0), ("8 js6", 7.9955, 8.0045),
        # the same fundamental deviation in every grade: F from F7, E and D from ISO 286-1 (from memory)
        ("10 F8", 10.013, 10.035), ("6 E8", 6.020, 6.038), ("10 D10", 10.040, 10.098), ("20 f6", 19.967, 19.980),
        ("25 k7", 25.002, 25.023),
    ],
)  # fmt: skip
def test_classes_that_are_not_in_the_table(text, least, most):
    found = parse_fit(text).first
    assert (found.least_mm, found.most_mm) == pytest.approx((least, most), abs=1e-9)


@pytest.mark.parametrize("text", ["22 N7", "22N7", "Ø22 N7", "22 mm N7", "dia 22 N7", "22 (N7)", "22,0 N7", "⌀22N7"])
def test_usual_ways_of_writing_a_fit(text):
    assert parse_fit(text).first.name == "22 N7"


def test_a_pair_has_its_clearance():
    """25 H7/k6: hole 0 to 21, shaft 2 to 15 µm, so from 15 µm tight to 19 µm loose."""
    found = parse_fit("25H7/k6")
    assert found.second is not None
    assert (found.second.lower_um, found.second.upper_um) == (2, 15)
    assert found.clearance_um == (-15, 19)


@pytest.mark.parametrize("text", ["22", "N7", "22 Z9", "121 H7", "0 H7", "22 H", "22 H99", "22 K9", "abc", "25 k9"])
def test_unknown_fits(text):
    with pytest.raises(UnknownHardwareError):
        parse_fit(text)


# ---------------------------------------------------------------- heads and nuts


@pytest.mark.parametrize("row", rows("countersinks"), ids=named)
def test_every_countersink_is_as_published(row):
    found, scale = find_countersink(row["name"]), SCALE[row["unit"]]
    assert found.angle_deg == row["angle"]
    assert found.head_dia_mm == pytest.approx(row["head"] * scale, rel=1e-12)
    assert found.sink_dia_mm == pytest.approx((row["sink"] or row["head"]) * scale, rel=1e-12)
    assert (found.head_real_mm or 0.0) == pytest.approx(row["real"] * scale, rel=1e-12)
    assert (found.height_mm or 0.0) == pytest.approx(row["height"] * scale, rel=1e-12)


@pytest.mark.parametrize("sink", all_countersinks(), ids=lambda c: c.name)
def test_a_sink_takes_its_head(sink):
    assert sink.sink_dia_mm >= sink.head_dia_mm * 0.99  # ISO 10642 M16: the sink of the standard is 0.2 mm under sharp
    assert sink.head_dia_mm > find_clearance(sink.screw).coarse_mm
    if sink.height_mm is not None:
        assert sink.height_mm < sink.head_dia_mm / 2


@pytest.mark.parametrize(
    ("text", "name"),
    [("M5 ISO 10642", "M5 ISO 10642"), ("ISO 10642 M5", "M5 ISO 10642"), ("m5 iso10642", "M5 ISO 10642"),
     ("M4 ISO 7046", "M4 ISO 2009"), ("M4 DIN 965", "M4 DIN 963"), ("M6 DIN7991", "M6 DIN 7991"),
     ("1/4 ASME B18.3", "1/4 ASME B18.3"), ("M5 (ISO 10642)", "M5 ISO 10642"), ("M4 ISO 7046-1", "M4 ISO 2009"),
        ("M4 ISO 2009/7046", "M4 ISO 2009"), ("1/4-20 ASME B18.3 flat socket", "1/4 ASME B18.3"),
        ('1/4" flat socket', "1/4 ASME B18.3"), ("#10 B18.6.3", "#10 ASME B18.6.3")],
)  # fmt: skip
def test_countersink_names(text, name):
    assert find_countersink(text).name == name


@pytest.mark.parametrize("text", ["M5", "1/4", "M18 ISO 10642", "ISO 10642", "x"])
def test_a_countersink_without_a_clear_head_is_refused(text):
    with pytest.raises(UnknownHardwareError) as caught:
        find_countersink(text)
    assert caught.value.remedy


@pytest.mark.parametrize("row", rows("counterbores"), ids=named)
def test_every_counterbore_is_as_published(row):
    found = find_counterbore(row["screw"])
    sizes = (found.bore_mm, found.head_dia_mm, found.head_height_mm, found.depth_mm)
    assert sizes == (row["bore"], row["head"], row["height"], row["depth"])
    assert find_counterbore(f"{row['screw']} ISO 4762") == found


@pytest.mark.parametrize("row", rows("nuts"), ids=named)
def test_every_nut_is_as_published(row):
    found, scale = find_nut(row["name"]), SCALE[row["unit"]]
    sizes = (found.flats_mm, found.corners_mm, found.height_mm)
    assert sizes == pytest.approx([row[k] * scale for k in ("flats", "corners", "height")], rel=1e-12)


@pytest.mark.parametrize("nut", all_nuts(), ids=lambda n: n.name)
def test_corners_follow_from_flats(nut):
    # sharp corners of a hexagon, printed to 0.001 mm or 0.001 in
    assert nut.corners_mm == pytest.approx(nut.flats_mm / 0.8660254, abs=0.03)


def test_a_bare_screw_takes_the_usual_nut():
    assert find_nut("M10").standard == "ISO 4032"
    assert find_nut("M10 DIN 934").flats_mm == 17
    assert find_nut("1/4").standard == "ASME B18.2.2"
    assert find_nut("1/4 machine screw").standard == "ASME B18.6.3"
    assert find_nut("#10").standard == "ASME B18.6.3"


# ---------------------------------------------------------------- bearings, bushes, pins, shoulder screws


@pytest.mark.parametrize("row", rows("bearings"), ids=named)
def test_every_bearing_is_as_published(row):
    found, _ = find_bearing(row["name"])
    sizes = (found.bore_mm, found.outside_mm, found.width_mm, found.shielded_mm or 0)
    assert sizes == (row["bore"], row["outside"], row["width"], row["shielded"])


@pytest.mark.parametrize("bearing", all_bearings(), ids=lambda b: b.name)
def test_bearings_have_room_for_their_rings(bearing):
    assert 1.3 * bearing.bore_mm < bearing.outside_mm or bearing.outside_mm - bearing.bore_mm >= 4
    assert bearing.width_mm < bearing.outside_mm


@pytest.mark.parametrize(
    "row", [r for r in rows("bearings") if re.fullmatch(r"6\d0[4-9]|6\d1\d", r["name"])], ids=named
)
def test_bore_codes(row):
    """ISO 15: from code 04 on the bore is five times the last two digits."""
    assert row["bore"] == 5 * int(row["name"][2:])


@pytest.mark.parametrize(
    ("text", "name", "shielded"),
    [("608", "608", False), ("608ZZ", "608", True), ("608-2RS", "608", True), ("6205-2RS1 C3", "6205", True),
     ("6205 2RS", "6205", True), ("61804", "6804", False), ("618/8", "688", False), ("619/6-2Z", "696", True),
     ("61900", "6900", False), ("R4ZZ", "R4", True), ("MR105ZZ", "MR105", True), ("bearing 608", "608", False)],
)  # fmt: skip
def test_bearing_names(text, name, shielded):
    found, seals = find_bearing(text)
    assert (found.name, seals) == (name, shielded)


@pytest.mark.parametrize("row", rows("bushings"), ids=named)
def test_every_bush_is_as_published(row):
    assert find_bush(f"{row['bore']:g} {row['kind']}").outside_mm == row["outside"]
    assert find_bush(f"{row['bore']:g} x {row['outside']:g} bush").bore_mm == row["bore"]


def test_a_bare_bush_is_wrapped():
    assert find_bush("10 mm bush").kind == "wrapped"
    assert all(b.outside_mm > b.bore_mm for b in all_bushes())


@pytest.mark.parametrize("row", rows("pins"), ids=named)
def test_every_pin_is_there(row):
    found = find_pin(f"{row['d']:g} {row['standard']}")
    assert (found.diameter_mm, found.press) == (row["d"], "H7")
    assert found.slip == {"ISO 2338": "H7", "ISO 8734": "F7"}[row["standard"]]


def test_there_are_no_more_pins_than_published():
    assert len(all_pins()) == len(rows("pins"))
    assert find_pin("dowel 6 m6").standard == "ISO 8734"


@pytest.mark.parametrize("row", rows("shoulder_screws"), ids=named)
def test_every_shoulder_screw_is_as_published(row):
    found, scale = find_shoulder_screw(row["name"]), SCALE[row["unit"]]
    assert found.thread == row["thread"]
    assert found.thread_length_mm == (pytest.approx(row["thread_length"] * scale) if row["thread_length"] else None)
    assert (found.head_dia_mm, found.head_height_mm) == pytest.approx((row["head"] * scale, row["height"] * scale))
    assert found.fit == {"ISO 7379": "h8", "trade f9": "f9"}.get(found.standard, "")


@pytest.mark.parametrize(
    ("text", "name"),
    [("1/4", "1/4 ASME B18.3"), ('1/4"', "1/4 ASME B18.3"), ("0.25in", "1/4 ASME B18.3"), ("8", "8 ISO 7379"),
     ("8 mm", "8 ISO 7379"), ("8 f9", "8 trade f9"), ("12", "12 trade f9"), ("13", "13 ISO 7379"),
     ("1 in", "1 ASME B18.3"),
     ("1", "1 ASME B18.3"), ("shoulder screw 1/2", "1/2 ASME B18.3")],
)  # fmt: skip
def test_shoulder_screw_names(text, name):
    assert find_shoulder_screw(text).name == name


def test_inch_shoulders_are_under_size():
    """ASME B18.3, 1/4: 0.2460 to 0.2480 in (Machinery's Handbook, page 1818)."""
    found = find_shoulder_screw("1/4")
    assert found.under_mm is not None
    assert [(found.shoulder_mm - u) / INCH for u in found.under_mm] == pytest.approx([0.246, 0.248], abs=1e-9)
    assert len(all_shoulder_screws()) == len(rows("shoulder_screws"))


# ---------------------------------------------------------------- drills


@pytest.mark.parametrize("row", rows("drills_inch"), ids=named)
def test_every_drill_is_as_published(row):
    assert find_drill(row["drill"]) == pytest.approx(row["inch"] * INCH, rel=1e-12)


def test_number_drills_fall_and_letters_rise():
    numbers = [find_drill(f"#{n}") for n in range(80, 0, -1)]
    letters = [find_drill(chr(c)) for c in range(ord("A"), ord("Z") + 1)]
    assert all(a < b for a, b in pairwise([*numbers, *letters]))


@given(st.floats(0.5, 35.0))
def test_the_drill_below_is_not_above(size):
    below = inch_drill_below(size)
    assert below is not None
    assert below[0] <= size + 1e-9
    assert size - 0.5 - 1e-9 < metric_drill_below(size) <= size + 1e-9
    assert abs(inch_drill(size)[0] - size) <= 0.2


def test_drill_names():
    assert find_drill("17/64") == pytest.approx(17 / 64 * INCH)
    assert find_drill("5.1 mm") == find_drill("5,1") == 5.1
    assert inch_drill(6.35)[1] == "1/4"
    assert inch_drill(5.1)[1] == "#7"
    assert (metric_drill_below(7.69), metric_drill_below(21.4)) == (7.6, 21.0)
    with pytest.raises(UnknownHardwareError):
        find_drill("#99")


# ---------------------------------------------------------------- tolerances


@pytest.mark.parametrize("row", rows("tolerance_iso2768"), ids=named)
def test_every_general_tolerance_is_as_published(row):
    """A step holds its upper end; its lower end only where it is the first (0.5 mm, or 3 mm in class v)."""
    inside = min(row["incl"], row["over"] + 0.001)
    for size in (inside, min(row["incl"], 5000.0)):
        assert general_mm(row["class"], size, row["kind"]) == row["plus_minus"]


@pytest.mark.parametrize("row", rows("tolerance_iso9013"), ids=named)
def test_every_thermal_tolerance_is_as_published(row):
    """A thickness step holds its upper end, a dimension step its lower end."""
    for size in (row["from"], row["below"] - 0.001):
        for thickness in (row["t_over"] + 0.001, row["t_incl"]):
            assert thermal_cut_mm(int(row["class"]), size, thickness) == row["plus_minus"]


@pytest.mark.parametrize(
    ("kind", "number", "constant", "slope"),
    [("u", 1, 0.05, 0.003), ("u", 2, 0.15, 0.007), ("u", 3, 0.4, 0.01), ("u", 4, 0.8, 0.02), ("u", 5, 1.2, 0.035),
     ("rz5", 1, 10, 0.6), ("rz5", 2, 40, 0.8), ("rz5", 3, 70, 1.2), ("rz5", 4, 110, 1.8)],
)  # fmt: skip
def test_ranges_of_the_cut_face(kind, number, constant, slope):
    """Practical guide to the ISO 9013 ranges (u of range 5 from memory)."""
    assert cut_range(kind, number, 10.0) == pytest.approx(constant + 10 * slope, abs=1e-12)
    assert cut_range(kind, number, 4.0) == pytest.approx(constant + 4 * slope, abs=1e-12)


@pytest.mark.parametrize("ask", [("f", 0.4), ("m", 5000.0), ("v", 1.0), ("x", 10.0), ("f", 3000.0)])
def test_general_tolerances_end(ask):
    with pytest.raises(UnknownHardwareError):
        general_mm(*ask)


@pytest.mark.parametrize("ask", [(1, 20.0, 60.0), (1, 1.0, 8.0), (3, 20.0, 1.0), (2, 5000.0, 0.5), (1, 20.0, 0.0)])
def test_thermal_tolerances_end(ask):
    with pytest.raises(UnknownHardwareError):
        thermal_cut_mm(*ask)


# ---------------------------------------------------------------- every table says where it is from


@pytest.mark.parametrize(
    "name",
    [
        "bearings",
        "bend_radius",
        "bushings",
        "clearance_inch",
        "clearance_metric",
        "counterbores",
        "drills_inch",
        "hazards",
        "nuts",
        "pins",
        "reaming",
        "shoulder_screws",
    ],
)
def test_every_row_names_its_source(name):
    sheet = table(name)
    assert sheet.source()
    assert all(row.texts("from") for row in sheet.rows)
