"""Lint as JSON and as text, from values made up here."""

import json
import re
from dataclasses import replace

import jsonschema
import pytest

from flatprep.model.drawing import Drawing, UnitsFrom
from flatprep.model.finding import Finding, Severity
from flatprep.model.linted import Linted, LintReport, Unreadable
from flatprep.report.lint_json import lint_document
from flatprep.report.lint_text import lint_text as _lint_text
from flatprep.report.part_svg import MOST_LINES, part_pictures, part_svg
from flatprep.report.schema import schema
from tests.measure.shapes import circle, part, rectangle

LEAF = part(rectangle(0, 0, 100, 60), circle(30, 30, 1.2), name="leaf")
HOLE = Finding(
    "small-hole",
    Severity.ERROR,
    "the round hole is small",
    "leaf",
    (30.0, 30.0),
    2.4,
    3.0,
    "mm",
    "Enlarge it.",
    ("2F",),
)
UNITS = Finding("unknown-units", Severity.WARNING, "no header says which unit", remedy="Give --units.")
NOTE = Finding("several-parts", Severity.NOTE, "the drawing holds 2 parts", remedy="Nothing to do.")


def lint_text(report, units=None):
    return _lint_text(report, units).replace("\u00a0", " ")


def linted(*findings, file="parts/leaf.dxf", units="mm"):
    drawing = Drawing(file, units, UnitsFrom.HEADER, (LEAF,))
    return Linted(file, drawing, findings, "shop-laser", "mild-steel", 3.0, 7850.0)


REPORT = LintReport(
    (linted(HOLE, UNITS, NOTE),), (Unreadable("x.dxf", "x.dxf: damaged", "export it again"),), ("a note",)
)


def test_document_is_the_contract():
    document = json.loads(json.dumps(lint_document(REPORT)))
    assert document["schema"] == "flatprep-lint/1"
    (drawing,) = document["drawings"]
    assert (drawing["file"], drawing["units"], drawing["units_from"]) == ("parts/leaf.dxf", "mm", "header")
    (leaf,) = drawing["parts"]
    # plate less a circle of diameter 2.4; 3 mm of steel of 7850 kg/m3
    net = 6000 - 3.14159265358979 * 1.44
    assert leaf["area_mm2"] == pytest.approx(net)
    assert leaf["mass_kg"] == pytest.approx(net * 3 * 7850e-9)
    assert leaf["cut_length_mm"] == pytest.approx(320 + 3.14159265358979 * 2.4)
    assert (leaf["name"], leaf["holes"], leaf["pierces"], leaf["size_mm"]) == ("leaf", 1, 2, [100.0, 60.0])
    assert drawing["findings"][0] == {
        "rule": "small-hole", "severity": "error", "part": "leaf", "message": "the round hole is small",
        "at": [30.0, 30.0], "measured": 2.4, "limit": 3.0, "unit": "mm", "remedy": "Enlarge it.", "handles": ["2F"],
    }  # fmt: skip
    bare = drawing["findings"][1]
    assert [bare[k] for k in ("at", "measured", "limit", "unit", "part")] == [None] * 5
    assert document["unreadable"] == [{"file": "x.dxf", "message": "x.dxf: damaged"}]
    jsonschema.validate(document, schema("lint"))


def test_mass_is_null_where_it_is_not_known():
    bare = replace(linted(), density_kg_m3=None)
    assert lint_document(LintReport((bare,)))["drawings"][0]["parts"][0]["mass_kg"] is None


def test_text_has_a_block_a_drawing_with_place_measure_limit_and_remedy():
    text = lint_text(REPORT)
    block, unreadable, tail = text.split("\n\n")
    lines = block.splitlines()
    assert lines[0].startswith("parts/leaf.dxf")
    assert "leaf: 100 × 60" in lines[1]
    assert lines[2] == "  ERROR small-hole: the round hole is small [at (30, 30); 2.4 mm, limit 3 mm]"
    assert lines[3].strip() == "→ Enlarge it."
    assert "note several-parts" in lines[4]
    assert "→" not in lines[-1], "notes need no remedy"
    assert unreadable == "unreadable: x.dxf: damaged\n    → export it again"
    assert tail.splitlines()[-1] == "1 drawing, 1 unreadable: 1 error, 1 warning, 1 note"


def test_text_tells_unknown_units_once_a_folder():
    report = LintReport((linted(UNITS), linted(UNITS, file="parts/stem.dxf"), linted(UNITS, file="old/hub.dxf")))
    told = [line for line in lint_text(report).splitlines() if "unknown-units" in line]
    assert [line.split(":")[1].strip() for line in told] == ["2 drawings in parts", "1 drawing in old"]


def test_text_folds_many_alike_and_names_the_worst():
    many = [replace(HOLE, at=(float(n), 5.0), measured=2.0 + n / 10) for n in range(6)]
    text = lint_text(LintReport((linted(*many),)))
    assert "6 times; the worst: the round hole is small [at (0, 5); 2" in text
    assert text.count("ERROR") == 1
    assert all(f"({n}, 5)" in text for n in range(6))


def test_text_in_inches():
    assert "2.4" not in (text := lint_text(LintReport((linted(HOLE, units="in"),))))
    assert "0.094 in, limit 0.118 in" in text  # 2.4 and 3 mm


def test_a_finding_names_its_part_where_the_drawing_holds_several():
    one = linted(HOLE)
    assert "[at (30, 30);" in lint_text(LintReport((one,)))
    two = replace(one, drawing=replace(one.drawing, parts=(LEAF, replace(LEAF, name="stem"))))
    assert "[in leaf; at (30, 30);" in lint_text(LintReport((two,)))
    counted = replace(two, findings=(replace(HOLE, part="leaf#12"),))
    assert "[in #12; at (30, 30);" in lint_text(LintReport((counted,)))


def test_a_job_in_inches_is_told_in_inches_whatever_the_drawing_is_in():
    sized = replace(NOTE, message="the allowance is 25.4 mm")
    text = lint_text(LintReport((linted(HOLE, sized),), notes=("the kerf is 2.54 mm",)), "in")
    assert "leaf: 3.937 × 2.362 in" in text  # 100 and 60 mm over 25.4
    assert "0.094 in, limit 0.118 in" in text  # 2.4 and 3 mm
    assert "the allowance is 1.000 in" in text
    assert "note: the kerf is 0.100 in" in text
    assert " mm" not in text
    ((_, svg),) = part_pictures(linted(HOLE), None, "in")
    assert "0.094\u00a0in" in svg


def test_picture_numbers_what_it_lists():
    ((name, svg),) = part_pictures(linted(HOLE, UNITS))
    svg = svg.replace("\u00a0", " ")
    assert name == "leaf"
    assert svg.count('class="mark error"') == 1, "a finding without a place has no mark"
    assert ">1  error small-hole at (30, 30): 2.4 mm, limit 3 mm<" in svg
    assert ">2  warning unknown-units: no header says which unit<" in svg
    assert 'fill="#D55E00"' in svg
    assert "<polygon" in svg, "kinds differ in shape too"


def test_picture_says_whose_it_is_and_is_true_to_scale():
    one = linted(HOLE)
    ((_, svg),) = part_pictures(replace(one, drawing=replace(one.drawing, digest="0123456789abcdef")))
    assert ">leaf, drawing 0123456789<" in svg
    width, height, box = re.search(r'width="([\d.]+)mm" height="([\d.]+)mm" .*?viewBox="([^"]+)"', svg).groups()
    assert [float(width), float(height)] == pytest.approx([float(v) for v in box.split()[2:]], abs=0.01)


def test_picture_counts_what_it_does_not_list():
    svg = part_svg(LEAF, [HOLE] * (MOST_LINES + 3))
    assert ">and 3 more<" in svg
    assert svg.count(" error small-hole at") == MOST_LINES


def test_picture_escapes_strangers_words():
    svg = part_svg(replace(LEAF, name="<b>"), [replace(NOTE, message="</svg><script>", at=(5.0, 5.0))])
    assert "<script>" not in svg
    assert "<b>" not in svg
