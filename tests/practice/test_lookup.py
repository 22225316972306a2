"""The lookup, asked for what the sources print."""

import json

import pytest

from flatprep.base.errors import UsageError
from flatprep.practice.bends import bend, din_k, measured_k_factor
from flatprep.practice.lookup import KINDS, lookup
from flatprep.profile.material_load import load_material
from flatprep.report.lookup_json import lookup_document
from flatprep.report.lookup_text import lookup_text
from tests.profile.hardware.rows import named, rows
from tests.reference_tables import table

WORKED = table("worked_checks")["row"]
PRINTED_MM = 0.0005
"""Half of the last digit that mm tables print; inch tables print 0.0001 in."""


def _asked(row):
    material = load_material(row["material"]) if "material" in row else None
    kind, name = row["ask"]
    units = {"thickness": "thickness_mm", "radius": "radius_mm", "angle": "angle_deg"}
    given = {key: row[short] for short, key in units.items() if short in row}
    return lookup(kind, name, material=material, **given)


@pytest.mark.parametrize("row", WORKED, ids=lambda r: " ".join(r["ask"]) + str(r.get("thickness", "")))
def test_worked_checks(row):
    answer = _asked(row)
    scale = 25.4 if row.get("in") else 1.0
    tolerance = row.get("tolerance", 0.00005 if row.get("in") else PRINTED_MM) * scale
    for key, expected in row["values"].items():
        assert answer.values[key] == pytest.approx(expected * scale, abs=tolerance), key
    if "thread" in row:
        assert answer.values["thread"] == row["thread"]
    assert answer.source
    assert answer.name == row["ask"][1] or answer.kind == "bend"


CONTRACT = {
    ("thread", "M6"): ("pitch_mm", "drill_mm", "minor_min_mm", "minor_max_mm"),
    ("clearance", "M6"): ("fine_mm", "medium_mm", "coarse_mm"),
    ("fit", "22 N7"): ("min_mm", "max_mm"),
    ("bearing", "608"): ("bore_mm", "outside_mm", "width_mm"),
    ("nut", "M8"): ("across_flats_mm", "across_corners_mm", "height_mm"),
    ("countersink", "M5 ISO 10642"): ("head_dia_mm", "sink_dia_mm", "angle_deg"),
    ("shoulder-screw", "1/4"): ("shoulder_mm", "thread", "thread_length_mm"),
    ("bend", ""): ("allowance_mm", "deduction_mm", "k"),
    ("gauge", "16"): ("thickness_mm",),
    ("tolerance", "iso2768 m 35"): ("plus_minus_mm",),
    ("tolerance", "iso9013 1 20"): ("plus_minus_mm",),
}


@pytest.mark.parametrize("ask", CONTRACT, ids=" ".join)
def test_every_kind_has_the_values_that_are_promised(ask):
    steel = load_material("mild-steel")
    answer = lookup(*ask, thickness_mm=1.0, radius_mm=2.0, angle_deg=90.0, material=steel)
    document = json.loads(json.dumps(lookup_document(answer)))
    assert document["kind"] == ask[0]
    assert set(CONTRACT[ask]) <= set(document["values"])
    assert all(document["values"][key] is not None for key in CONTRACT[ask])
    assert document["source"]


@pytest.mark.parametrize("row", rows("bend_radius_tempers"), ids=named)
def test_every_bend_radius_is_as_published(row):
    found = lookup("bend-radius", row["alloy"], thickness_mm=row["thickness"])
    assert found.values[f"{row['kind']}_ratio"] == row["ratio"]
    assert found.values[f"{row['kind']}_radius_mm"] == pytest.approx(row["ratio"] * row["thickness"])


@pytest.mark.parametrize(
    ("kind", "name", "near"),
    [
        ("thread", "M9", "M8"), ("clearance", "M9", "M8"), ("fit", "22 N9", "N7"), ("bearing", "605", "604"),
        ("nut", "M9", "M8 ISO 4032"), ("countersink", "M5", "M5 ISO 10642"),
        ("shoulder-screw", "M6", "name the shoulder"),
        ("tolerance", "iso 1 2", "iso2768 m 35"), ("gauge", "x", "whole number"), ("counterbore", "M7", "M6"),
        ("bush", "11", "10 x 12"), ("pin", "7", "6 ISO"), ("drill", "#99", "#80"),
        ("bend-radius", "6062-T6", "6061-T6"),
        ("thread", "", "flatprep lookup thread"), ("thred", "M6", "thread"), ("bend", "", "--thickness"),
    ],
)  # fmt: skip
def test_unknown_names_get_the_nearest(kind, name, near):
    with pytest.raises(UsageError) as caught:
        lookup(kind, name, thickness_mm=None if kind == "bend" else 3.0)
    assert near in caught.value.remedy


@pytest.mark.parametrize(
    ("kind", "name", "title"),
    [
        ("thread", "M6 coarse", "M6"), ("thread", "UNC 1/4-20", "1/4-20 UNC"), ("thread", "ISO metric M8", "M8"),
        ("clearance", "M6 medium", "M6"), ("clearance", "ISO 273 M6", "M6"), ("clearance", "1/4-20 UNC", "1/4"),
        ("fit", "H7 22", "22 H7"), ("nut", "hex nut M8 ISO 4032", "M8 ISO 4032"), ("nut", "M8x1.25", "M8 ISO 4032"),
        ("nut", "1/4-20", "1/4 ASME B18.2.2"), ("bearing", "DIN 625 608", "608"),
        ("shoulder-screw", "ISO 7379 8", "8 ISO 7379"), ("countersink", "M5, ISO 10642", "M5 ISO 10642"),
        ("counterbore", "M6 DIN 912", "M6 ISO 4762"), ("tolerance", "ISO 2768-1 m 35 mm", "ISO 2768-m 35"),
        ("tolerance", "iso9013 class 1 20", "ISO 9013 class 1 20"), ("tolerance", "iso2768 mK 35", "ISO 2768-m 35"),
    ],
)  # fmt: skip
def test_names_among_standards_and_words(kind, name, title):
    assert lookup(kind, name, thickness_mm=1.0).title == title


def test_kinds_may_be_written_as_people_do():
    assert lookup("Threads", "M6").kind == "thread"
    assert lookup("shoulder_screw", "1/4").kind == "shoulder-screw"
    assert set(KINDS) >= {kind for kind, _ in CONTRACT}


def test_text_shows_inches_beside_for_inch_users():
    answer = lookup("clearance", "1/4")
    assert "7.142 mm  (0.2812 in)" in lookup_text(answer, "in")
    assert "(" not in lookup_text(answer).split("source")[0]


def test_a_name_stays_as_it_was_asked():
    answer = lookup("nut", " M8 ")
    assert (answer.name, answer.title) == ("M8", "M8 ISO 4032")


# ---------------------------------------------------------------- bends


@pytest.mark.parametrize(
    ("ratio", "k"), [(1.0, 0.65), (0.5, 0.499485), (5.0, 0.999485), (5.0001, 1.0), (10.0, 1.0), (0.01, 0.0)]
)
def test_din_k(ratio, k):
    """DIN 6935: 0.65 + 0.5 log10(r / s) up to 5, then 1; never below nothing."""
    assert din_k(ratio) == pytest.approx(k, abs=1e-6)


@pytest.mark.parametrize(("angle", "setback"), [(90.0, 4.0), (60.0, 2.3094), (120.0, 4.0), (165.0, 4.0)])
def test_setback_runs_to_the_tangent_above_a_right_angle(angle, setback):
    """DIN 6935: (r + s) tan(angle / 2) up to 90 degrees, r + s above; r = s = 2."""
    assert bend(2.0, 2.0, angle).setback_mm == pytest.approx(setback, abs=1e-4)


def test_flat_length():
    """Worked example: 50 + 50 outside legs, r 2, t 2: 96.16; r 3, t 3: 94.24."""
    assert bend(2.0, 2.0, 90.0).flat_mm(50.0, 50.0) == pytest.approx(96.1626, abs=1e-4)
    assert bend(3.0, 3.0, 90.0).flat_mm(50.0, 50.0) == pytest.approx(94.2439, abs=1e-4)
    assert bend(10.0 / 5, 10.0, 90.0).allowance_mm == pytest.approx(17.2780, abs=1e-4)


def test_a_coupon_goes_before_the_standard():
    """Neutral fibre at 0.44 t: allowance pi / 2 (2 + 0.88) = 4.5239."""
    assert bend(2.0, 2.0, 90.0, k=0.88).allowance_mm == pytest.approx(4.52389, abs=1e-5)


@pytest.mark.parametrize(
    "sizes", [(0.0, 2.0, 90.0), (2.0, 0.0, 90.0), (2.0, 2.0, 0.0), (2.0, 2.0, 166.0), (-1.0, 2.0, 90.0)]
)
def test_impossible_bends(sizes):
    with pytest.raises(UsageError):
        bend(*sizes)


@pytest.mark.parametrize(
    ("family", "k"), [("aluminium", (0.38, 0.41)), ("low-carbon-steel", (0.42, 0.47)),
    ("stainless", (0.44, 0.48)), ("wood", None)]
)  # fmt: skip
def test_measured_k_factors(family, k):
    """K factor table attributed to Machinery's Handbook, 26th edition."""
    assert measured_k_factor(family) == k
