"""Inside corners opened by repair: the drawing that is written is one that the router can cut."""

import json

import ezdxf
import pytest
from click.testing import CliRunner
from jsonschema import Draft202012Validator

from flatprep.cli.main import root
from flatprep.report.schema import schema
from tests.drawing.draw import box, drawn

ROUTER = """name = "shop router"
kind = "router"
kerf = 3.0
tool_diameter = 3.0
[limits]
web_min = 2.0
"""


def slotted(msp):
    """A notch of 6.2 mm in the edge and a slot of 6.2 by 30 mm, 2.5 mm from the next one."""
    msp.add_lwpolyline([(0, 0), (40, 0), (40, 12), (46.2, 12), (46.2, 0), (150, 0), (150, 90), (0, 90)], close=True)
    box(msp, 60, 30, 6.2, 30)
    box(msp, 110, 30, 30, 30)


def crowded(msp):
    slotted(msp)
    box(msp, 68.7, 30, 6.2, 30)


def slanted(msp):
    slotted(msp)
    msp.add_lwpolyline([(80, 30), (100, 30), (90, 55)], close=True)


def call(*words):
    return CliRunner().invoke(root, [str(w) for w in words])


@pytest.fixture
def profile(tmp_path):
    path = tmp_path / "shop.toml"
    path.write_text(ROUTER)
    return path


def relieved(tmp_path, paint, profile, *words):
    out = tmp_path / "clean.dxf"
    result = call("repair", drawn(tmp_path, paint), "--out", out, "--process", profile, "--format", "json", *words)
    assert result.exit_code in (0, 1), result.stderr
    document = json.loads(result.stdout)
    Draft202012Validator(schema("repair")).validate(document)
    return result.exit_code, document, out


def rules(path, profile):
    return [f["rule"] for d in lint(path, profile) for f in d["findings"]]


def lint(path, profile):
    words = ("lint", path, "--process", profile, "--material", "birch-ply", "--thickness", "6", "--format", "json")
    return json.loads(call(*words).stdout)["drawings"]


@pytest.mark.parametrize("kind", ["dogbone", "t-bone"])
def test_what_is_written_has_no_corner_that_the_cutter_misses(tmp_path, profile, kind):
    path = drawn(tmp_path, slotted)
    assert rules(path, profile).count("inside-corner") == 10
    status, document, out = relieved(tmp_path, slotted, profile, "--relief", kind)
    assert status == 0
    told = [
        (c["message"].partition(" ")[0].lower(), tuple(c["at"])) for c in document["changes"] if c["kind"] == "relief"
    ]
    assert {word for word, _ in told} == {kind}
    # every corner, by its place as drawn: two of the notch, four of each window
    corners = {(40, 12), (46.2, 12), *((x, y) for x in (60, 66.2, 110, 140) for y in (30, 60))}
    assert {at for _, at in told} == corners
    assert rules(out, profile) == []


def test_once_more_changes_nothing(tmp_path, profile):
    _, _, out = relieved(tmp_path, slotted, profile, "--relief", "dogbone")
    again = tmp_path / "again.dxf"
    call("repair", out, "--out", again, "--process", profile, "--relief", "dogbone")
    assert again.read_bytes() == out.read_bytes()


def test_a_relief_that_would_break_a_web_is_refused(tmp_path, profile):
    """2.5 mm between two slots, each dogbone 1.545 (1 - 1 / √2) = 0.4525 mm wider: 1.595 mm would be left."""
    status, document, out = relieved(tmp_path, crowded, profile, "--relief", "dogbone")
    assert status == 1
    left = {tuple(f["at"]): f["message"] for f in document["left"]}
    assert set(left) == {(66.2, 30), (66.2, 60), (68.7, 30), (68.7, 60)}
    assert all("only 1.59 mm of material would be left beside it, 2 mm is needed" in words for words in left.values())
    assert sum(c["kind"] == "relief" for c in document["changes"]) == 10
    assert rules(out, profile) == ["inside-corner"] * 4


def test_corners_that_are_not_square_are_opened_on_request(tmp_path, profile):
    status, document, _ = relieved(tmp_path, slanted, profile, "--relief", "dogbone")
    assert status == 1
    (left,) = document["left"]
    assert left["message"] == "3 corners that are not square stay as drawn"
    status, _, out = relieved(tmp_path, slanted, profile, "--relief", "dogbone", "--corners", "all")
    assert status == 0
    assert rules(out, profile) == []


def test_an_outline_that_stays_open_is_left_alone(tmp_path, profile):
    def gappy(msp):
        """The notch's outline lacks 0.5 mm: what is written is the open line, without a word of reliefs."""
        points = [(0, 0.5), (0, 90), (150, 90), (150, 0), (46.2, 0), (46.2, 12), (40, 12), (40, 0), (0, 0)]
        msp.add_lwpolyline(points)
        box(msp, 60, 30, 6.2, 30)

    _, document, out = relieved(tmp_path, gappy, profile, "--relief", "dogbone")
    assert {tuple(c["at"]) for c in document["changes"] if c["kind"] == "relief"} == {
        (x, y) for x in (60, 66.2) for y in (30, 60)
    }
    (line,) = (e for e in ezdxf.readfile(out).modelspace() if not e.closed)
    assert len(line) == 9


@pytest.mark.parametrize(
    ("words", "says"),
    [
        (["--relief", "dogbone"], "the cutter is not known"),
        (["--relief", "dogbone", "--process", "fibre-laser"], "has no round cutter"),
        (["--relief", "square", "--process", "router"], "'square' is not one of"),
        (["--relief", "dogbone", "--process", "nothing"], "nothing"),
        (["--relief", "dogbone", "--process", "router", "--thickness", "thick"], "thick"),
        (["--corners", "all"], "--corners"),
    ],
)
def test_bad_options_end_with_2(tmp_path, words, says):
    out = tmp_path / "clean.dxf"
    result = call("repair", drawn(tmp_path, slotted), "--out", out, *words)
    assert result.exit_code == 2
    assert says in result.stderr
    assert not out.exists()
