"""The compare command as a user calls it."""

import json
from xml.etree import ElementTree

import pytest
from click.testing import CliRunner
from jsonschema import Draft202012Validator

from flatprep.cli.main import root
from flatprep.report.schema import schema
from tests.drawing.draw import box, drawn


def plate(*holes):
    def paint(msp):
        box(msp, 0, 0, 80, 50)
        for x, y, d in holes:
            msp.add_circle((x, y), d / 2)

    return paint


@pytest.fixture
def old(tmp_path):
    return drawn(tmp_path, plate((20, 25, 5), (60, 30, 8)), name="old.dxf")


@pytest.fixture
def new(tmp_path):
    return drawn(tmp_path, plate((20, 25, 5), (60, 30, 9), (40, 10, 4.2)), name="new.dxf")


def call(*words):
    return CliRunner().invoke(root, ["compare", *(str(w) for w in words)])


def test_no_change_ends_with_0(old):
    result = call(old, old)
    assert result.exit_code == 0
    assert result.stdout.splitlines()[-1] == "no change"


def test_text_names_every_change_and_the_rework(old, new):
    result = call(old, new)
    assert result.exit_code == 1
    plain = result.stdout.replace("\u00a0", " ")
    assert "hole ⌀ 8 mm became hole ⌀ 9 mm at (60, 30)" in plain
    assert "hole ⌀ 4.2 mm came at (40, 10)" in plain
    assert "open up ⌀ 8 mm to ⌀ 9 mm at (60, 30)" in plain
    assert "drill ⌀ 4.2 mm at (40, 10)" in plain
    assert "caution" in plain
    assert plain.splitlines()[-1] == "1 part changed, pieces already cut can be reworked"


def test_the_other_way_round_it_is_scrap(old, new):
    plain = call(new, old).stdout.replace("\u00a0", " ")
    assert "hole ⌀ 4.2 mm went at (40, 10)" in plain
    assert "scrap" in plain.splitlines()[-1]
    assert "caution" not in plain


def test_json(old, new):
    document = json.loads(call(old, new, "--format", "json").stdout)
    Draft202012Validator(schema("compare")).validate(document)
    assert document["schema"] == "flatprep-compare/1"
    (part,) = document["parts"]
    assert sorted(h["change"] for h in part["holes"]) == ["appeared", "resized", "same"]
    assert part["rework"]["possible"] is True
    assert {s["task"] for s in part["rework"]["steps"]} == {"drill", "open up"}
    assert part["motion"] == {"mirrored": False, "turn_deg": 0.0, "dx": 0.0, "dy": 0.0}


def test_units_of_each_drawing(tmp_path, old):
    inch = drawn(tmp_path, lambda msp: plate((20, 25, 5), (60, 30, 8))(msp), unit=0, name="other.dxf")
    assert call(old, inch, "--units", "mm").exit_code == 0
    result = call(old, inch, "--new-units", "in")
    assert result.exit_code == 1
    assert "the old drawing is in mm, the new one in in" in result.stdout


def test_picture(tmp_path, old, new):
    out = tmp_path / "both.svg"
    call(old, new, "--svg", out)
    tree = ElementTree.fromstring(out.read_text())
    words = " ".join(e.text or "" for e in tree.iter("{http://www.w3.org/2000/svg}text"))
    assert "old edge" in words
    assert "4.2" in words
    classes = [e.get("class") for e in tree.iter("{http://www.w3.org/2000/svg}path")]
    assert {"old", "new"} <= set(classes)


def test_names_in_the_picture_are_escaped(tmp_path):
    a = drawn(tmp_path, plate((20, 25, 5)), name="a<b>&c.dxf")
    b = drawn(tmp_path, plate((20, 25, 6)), name="d.dxf")
    call(a, b, "--svg", tmp_path / "both.svg")
    ElementTree.fromstring((tmp_path / "both.svg").read_text())


@pytest.mark.parametrize("name", ["missing.dxf", "text.dxf", "open.dxf"])
def test_what_cannot_be_compared_ends_with_2(tmp_path, old, name):
    (tmp_path / "text.dxf").write_text("no drawing")
    drawn(tmp_path, lambda msp: msp.add_line((0, 0), (9, 9)), name="open.dxf")
    for pair in ((old, tmp_path / name), (tmp_path / name, old)):
        result = call(*pair)
        assert result.exit_code == 2
        assert name in result.stderr
