"""Slots made to fit the sheet as it measures, in the drawing that repair writes."""

import json

import pytest
from click.testing import CliRunner

from flatprep.cli.main import root
from flatprep.drawing.read import read
from tests.drawing.draw import box, drawn


def slotted(msp):
    """A notch of 3 mm in the edge, 12 deep, and a slot of 3 by 20 mm: 90 x 60 - 36 - 60 mm²."""
    msp.add_lwpolyline([(0, 0), (40, 0), (40, 12), (43, 12), (43, 0), (90, 0), (90, 60), (0, 60)], close=True)
    box(msp, 60, 30, 20, 3)


def call(*words):
    return CliRunner().invoke(root, ["repair", *(str(w) for w in words)])


def resized(tmp_path, *words, paint=slotted):
    out = tmp_path / "clean.dxf"
    result = call(drawn(tmp_path, paint), "--out", out, "--format", "json", *words)
    assert result.exit_code in (0, 1), result.stderr
    return json.loads(result.stdout), out


@pytest.mark.parametrize(("clearance", "width"), [([], 2.85), (["--clearance", "0.2mm"], 2.95)])
def test_slots_fit_the_measured_sheet(tmp_path, clearance, width):
    document, out = resized(tmp_path, "--thickness", "3", "--measured", "2.75", *clearance)
    told = {tuple(c["at"]): c["message"] for c in document["changes"] if c["kind"] == "slot"}
    words = f"slot of 3.000 mm made {width:.3f} mm wide"
    assert told == {(41.5, 6.0): words, (70.0, 31.5): words}
    (after,) = read(out).parts
    assert after.area_mm2 == pytest.approx(90 * 60 - width * (12 + 20))
    again, _ = resized(tmp_path, "--thickness", "3", "--measured", "2.75", *clearance)
    assert again["area_after_mm2"] == pytest.approx(after.area_mm2)


def test_with_reliefs_in_the_slots_as_they_become(tmp_path):
    """The corners of the slot of 3.5 mm: 60 and 80, 31.5 -+ 1.75."""
    words = ("--thickness", "3", "--measured", "3.4", "--process", "router", "--relief", "t-bone")
    document, _ = resized(tmp_path, *words)
    at = [tuple(c["at"]) for c in document["changes"] if c["kind"] == "relief"]
    assert {(60, 29.75), (80, 29.75), (60, 33.25), (80, 33.25), (39.75, 12), (43.25, 12)} == set(at)


def test_text_says_old_and_new_width(tmp_path):
    text = call(drawn(tmp_path, slotted), "--out", tmp_path / "x.dxf", "--thickness", "3", "--measured", "2.9").stdout
    assert "slots made to fit" not in text
    plain = call(drawn(tmp_path, slotted), "--out", tmp_path / "x.dxf", "--thickness", "3", "--measured", "3.2").stdout
    assert "slot of 3.000 mm made 3.300 mm wide at (41.5, 6)" in plain.replace("\u00a0", " ")


@pytest.mark.parametrize(
    ("words", "says"),
    [
        (["--measured", "2.9"], "for which thickness"),
        (["--measured", "2", "--thickness", "3"], "no sheet of 3 mm measures that"),
        (["--measured", "thick", "--thickness", "3"], "is not a length"),
        (["--measured", "2.9", "--thickness", "3", "--clearance", "-1"], "below 0"),
        (["--clearance", "0.2mm"], "without --measured"),
    ],
)
def test_bad_options_end_with_2(tmp_path, words, says):
    result = call(drawn(tmp_path, slotted), "--out", tmp_path / "clean.dxf", *words)
    assert result.exit_code == 2
    assert says in result.stderr
