"""The coupon command as a user calls it: what it writes can be cut by the process it is for."""

import json
from pathlib import Path

import pytest
from click.testing import CliRunner
from jsonschema import Draft202012Validator

from flatprep.cli.main import root
from flatprep.report.schema import schema
from tests.drawing.draw import box, drawn

SAMPLE = Path(__file__).parents[2] / "sample_parts" / "job.toml"


def call(*words):
    return CliRunner().invoke(root, [str(w) for w in words])


def test_lint_finds_no_fault_with_the_coupons_of_the_sample_job(tmp_path):
    result = call("coupon", SAMPLE, "--out", tmp_path, "--format", "json")
    assert result.exit_code == 0, result.output
    document = json.loads(result.stdout)
    Draft202012Validator(schema("coupon")).validate(document)
    assert len(document["coupons"]) > 2
    for one in document["coupons"]:
        words = ("--process", one["process"], "--material", one["material"], "--thickness", one["thickness_mm"])
        linted = json.loads(call("lint", one["file"], *words, "--format", "json").stdout)
        (drawing,) = linted["drawings"]
        assert [f for f in drawing["findings"] if f["severity"] != "note"] == [], one["file"]
        assert sum(p["holes"] for p in drawing["parts"]) == sum(
            len(t["sizes_mm"]) for t in one["trials"] if t["kind"] == "bore"
        )


def job(folder, paint, *lines):
    drawn(folder, paint)
    head = ['process = "co2-laser"', "[[part]]", 'drawing = "leaf.dxf"', 'material = "birch-ply"', "thickness = 3"]
    (folder / "job.toml").write_text("\n".join([*head, *lines]))
    return folder / "job.toml"


def slotted(msp):
    box(msp, 0, 0, 90, 60)
    box(msp, 40, 30, 20, 3)


def test_text_tells_how_to_use_it_and_what_to_mind(tmp_path):
    text = call("coupon", job(tmp_path, slotted), "--out", tmp_path / "out").stdout.replace("\u00a0", " ")
    assert "slot for a sheet of 3 mm (leaf): 2.8  2.9  [3]  3.1  3.2 mm" in text
    assert "how to use it" in text
    assert "Local codes, the machine's manual" in text
    assert [p.name for p in (tmp_path / "out").iterdir()] == ["coupon-birch-ply-3mm-co2-laser.dxf"]


def test_nothing_to_try(tmp_path):
    result = call("coupon", job(tmp_path, lambda msp: box(msp, 0, 0, 90, 60)), "--out", tmp_path / "out")
    assert result.exit_code == 0
    assert result.stdout.startswith("nothing to try first")
    assert not (tmp_path / "out").exists()


@pytest.mark.parametrize("words", [("missing.toml", "--out", "x"), ("job.toml",)])
def test_bad_words_end_with_2(words):
    assert call("coupon", *words).exit_code == 2


def test_a_folder_that_cannot_be_written_into(tmp_path):
    (tmp_path / "out").write_text("a file")
    result = call("coupon", job(tmp_path, slotted), "--out", tmp_path / "out")
    assert result.exit_code == 2
    assert "cannot be written" in result.stderr
