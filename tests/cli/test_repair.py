"""The repair command as a user calls it."""

import json
import os
from math import cos, pi, sin

import ezdxf
import pytest
from click.testing import CliRunner
from jsonschema import Draft202012Validator

from flatprep.cli.main import root
from flatprep.report.schema import schema
from tests.drawing.draw import box, drawn


def plate(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_line((80, 0), (0, 0))
    msp.add_circle((40, 25), 10)


def stray(msp):
    plate(msp)
    msp.add_line((200, 0), (260, 40))


def call(*words):
    return CliRunner().invoke(root, ["repair", *(str(w) for w in words)])


def test_clean_ends_with_0(tmp_path):
    path, out = drawn(tmp_path, plate), tmp_path / "clean.dxf"
    result = call(path, "--out", out)
    assert result.exit_code == 0
    assert "doubles taken out: 1" in result.stdout
    assert result.stdout.splitlines()[-1].endswith("nothing left wrong")
    assert len(ezdxf.readfile(out).modelspace()) == 2


def test_something_left_ends_with_1_and_says_where(tmp_path):
    path = drawn(tmp_path, stray)
    result = call(path, "--out", tmp_path / "clean.dxf", "--format", "json")
    assert result.exit_code == 1
    document = json.loads(result.stdout)
    Draft202012Validator(schema("repair")).validate(document)
    assert document["schema"] == "flatprep-repair/1"
    (left,) = document["left"]
    assert (left["rule"], left["at"]) == ("open-contour", pytest.approx([230, 20]))
    assert [c["kind"] for c in document["changes"]] == ["double", "layer"]
    assert document["area_before_mm2"] == pytest.approx(document["area_after_mm2"])


def test_many_of_a_kind_are_told_in_short_and_one_by_one_on_request(tmp_path):
    def paint(msp):
        plate(msp)
        for k in range(30):
            msp.add_line((200 + 9 * k, 0), (205 + 9 * k, 40))

    path = drawn(tmp_path, paint)
    short = call(path, "--out", tmp_path / "clean.dxf").stdout
    assert short.count("open-contour") == 10
    assert "and 20 more" in short
    assert short.count("→") == 1
    long = call(path, "--out", tmp_path / "clean.dxf", "--every").stdout
    assert long.count("open-contour") == 30
    assert "more" not in long


@pytest.mark.parametrize("link", ["same", "symbolic", "hard"])
def test_the_drawing_is_never_written_over(tmp_path, link):
    path, out = drawn(tmp_path, plate), tmp_path / "other.dxf"
    before = path.read_bytes()
    if link == "same":
        out = tmp_path / "x" / ".." / "leaf.dxf"
        (tmp_path / "x").mkdir()
    elif link == "symbolic":
        out.symlink_to(path)
    else:
        os.link(path, out)
    result = call(path, "--out", out)
    assert result.exit_code == 2
    assert "never written over" in result.stderr
    assert path.read_bytes() == before


@pytest.mark.parametrize(
    ("words", "says"),
    [
        (["--gap", "wide"], "is not a length"),
        (["--gap", "-1mm"], "below 0"),
        (["--layer", "L7"], "--layer"),
        (["--units", "px"], "--units"),
    ],
)
def test_bad_options_end_with_2(tmp_path, words, says):
    out = tmp_path / "clean.dxf"
    result = call(drawn(tmp_path, plate), "--out", out, *words)
    assert result.exit_code == 2
    assert says in result.stderr
    assert not out.exists()


def test_a_missing_or_broken_drawing_ends_with_2(tmp_path):
    (tmp_path / "text.dxf").write_text("no drawing")
    for name in ("missing.dxf", "text.dxf"):
        result = call(tmp_path / name, "--out", tmp_path / "clean.dxf")
        assert result.exit_code == 2
        assert name in result.stderr
    assert not (tmp_path / "clean.dxf").exists()


@pytest.mark.parametrize(("deviation", "kind"), [("0", "LWPOLYLINE"), ("0.1mm", "CIRCLE")])
def test_deviation_0_keeps_chords(tmp_path, deviation, kind):
    ring = [(9 * cos(2 * pi * k / 36), 9 * sin(2 * pi * k / 36)) for k in range(36)]
    path = drawn(tmp_path, lambda msp: msp.add_lwpolyline(ring, close=True))
    call(path, "--out", tmp_path / "clean.dxf", "--deviation", deviation)
    (line,) = ezdxf.readfile(tmp_path / "clean.dxf").modelspace()
    assert line.dxftype() == kind
