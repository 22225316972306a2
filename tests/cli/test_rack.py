"""A rack of sheets and remnants, as a user works with it."""

import json

import jsonschema
import pytest

from flatprep.base.journal import NAME
from flatprep.report.schema import schema
from tests.api.test_remnants import JOB, SAID, remnant
from tests.cli.test_jobs import run
from tests.cli.test_money import draw


@pytest.fixture
def job(tmp_path):
    (tmp_path / "rack").mkdir()
    draw(tmp_path / "leaf.dxf", 100)
    remnant(tmp_path / "rack", "a.dxf", *SAID, "label: R7")
    remnant(tmp_path / "rack", "wood.dxf", "material: birch-ply", "thickness: 6 mm")
    remnant(tmp_path / "rack", "bare.dxf")
    path = tmp_path / "job.toml"
    path.write_text(JOB.replace('rack = "rack"\n', ""))
    return path


def test_nest_takes_a_rack_and_says_what_it_left_out(job, tmp_path):
    got = run("nest", job, "--out", tmp_path / "out", "--steps", "3", "--rack", tmp_path / "rack")
    assert got.exit_code == 0, got.output
    assert "sheet-01: R7, mild-steel 3\u00a0mm" in got.stdout
    assert "warning: " in got.stderr
    assert "bare.dxf: does not say its material or thickness; left out" in got.stderr
    assert "1 remnant of materials or thicknesses that no part of this job has" in got.stderr
    layout = json.loads((tmp_path / "out" / "layout.json").read_text())
    jsonschema.validate(layout, schema("layout"))
    assert layout["rack"] == "../rack"
    assert [(s["stock"], s["rack_file"]) for s in layout["sheets"]] == [("R7", "a.dxf")]


def test_the_job_names_its_rack_for_every_verb(job, tmp_path):
    job.write_text(JOB)
    got = run("prepare", job, "--out", tmp_path / "out", "--steps", "3")
    assert got.exit_code in (0, 1), got.output
    page = (tmp_path / "out" / "report.html").read_text()
    assert "bare.dxf: does not say its material or thickness" in page
    assert json.loads((tmp_path / "out" / "layout.json").read_text())["sheets"][0]["stock"] == "R7"
    for words in (("--steps", "3"), ("--layout", tmp_path / "out" / "layout.json")):
        got = run("estimate", job, "--format", "json", *words)
        assert [s["name"] for s in json.loads(got.stdout)["stock"]] == ["R7"]
    (tmp_path / "rack" / "stock.toml").write_text("remnant_price = 0\n")
    assert json.loads(run("estimate", job, "--format", "json", "--steps", "3").stdout)["material_cost"] == 0.0


def test_without_a_rack_the_layout_names_none(job, tmp_path):
    run("nest", job, "--out", tmp_path / "out", "--steps", "3")
    layout = json.loads((tmp_path / "out" / "layout.json").read_text())
    assert "rack" not in layout
    assert "rack_file" not in layout["sheets"][0]


def test_a_layout_is_booked_once(job, tmp_path):
    """From the layout alone: it names its rack; the job file stays as it is."""
    job.write_text(JOB)
    run("nest", job, "--out", tmp_path / "out", "--steps", "3")
    got = run("book", tmp_path / "out" / "layout.json")
    assert got.exit_code == 0, got.output
    assert "sheet-01: R7: used up; offcut R0008" in got.stdout
    assert "  R0008  mild-steel 3 mm, holds " in got.stdout
    assert job.read_text() == JOB
    again = run("book", tmp_path / "out" / "layout.json")
    assert again.exit_code == 2
    assert "booked already: sheet-01" in again.stderr
    priced = run("estimate", job, "--format", "json", "--layout", tmp_path / "out" / "layout.json")
    assert [s["name"] for s in json.loads(priced.stdout)["stock"]] == ["R7"]  # gone, but what it cost is known


def test_booking_as_a_document(job, tmp_path):
    run("nest", job, "--out", tmp_path / "out", "--steps", "3")
    layout = tmp_path / "out" / "layout.json"
    lost = run("book", layout)
    assert (lost.exit_code, lost.stdout) == (2, "")
    assert "made without a rack" in lost.stderr
    got = run("book", layout, "--rack", tmp_path / "new", "--format", "json")
    document = json.loads(got.stdout)
    jsonschema.validate(document, schema("book"))
    (sheet,) = document["sheets"]
    assert (sheet["stock"], sheet["taken"], sheet["offcut"]["label"]) == ("full", "own", "R0001")
    assert (tmp_path / "new" / sheet["offcut"]["drawing"]).exists()


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (("none.json",), "No such file"),
        (("job.toml",), "no JSON"),
        (("out/layout.json", "--sheet", "2"), "no sheet 2"),
        (("out/layout.json", "--rack", "job.toml"), "cannot be written into"),
    ],
)
def test_bad_bookings(job, tmp_path, words, said):
    job.write_text(JOB)
    run("nest", job, "--out", tmp_path / "out", "--steps", "3")
    before = sorted(p.name for p in (tmp_path / "rack").rglob("*"))
    got = run("book", *(tmp_path / word if "." in word else word for word in words))
    assert got.exit_code == 2
    assert said in got.stderr
    assert "Traceback" not in got.output
    assert sorted(p.name for p in (tmp_path / "rack").rglob("*")) == before


def test_a_layout_that_was_carried_elsewhere(job, tmp_path):
    """Its rack is found from where it lies: none is made up there, nothing outside a rack is touched."""
    job.write_text(JOB)
    run("nest", job, "--out", tmp_path / "out", "--steps", "3")
    text = (tmp_path / "out" / "layout.json").read_text()
    (tmp_path / "far" / "off").mkdir(parents=True)
    (tmp_path / "far" / "off" / "layout.json").write_text(text)
    got = run("book", tmp_path / "far" / "off" / "layout.json")
    assert (got.exit_code, "is not there" in got.stderr) == (2, True)
    assert not (tmp_path / "far" / "rack").exists()
    (tmp_path / "out" / "layout.json").write_text(text.replace('"a.dxf"', '"../leaf.dxf"'))
    got = run("book", tmp_path / "out" / "layout.json")
    assert (got.exit_code, "lies outside the rack" in got.stderr) == (2, True)
    assert (tmp_path / "leaf.dxf").exists()


def test_a_booking_that_was_broken_off_is_finished_first(job, tmp_path):
    job.write_text(JOB)
    run("nest", job, "--out", tmp_path / "out", "--steps", "3")
    (tmp_path / "rack" / NAME).write_text(json.dumps({"write": {"R0009.dxf": "x"}, "move": [["a.dxf", "used.dxf"]]}))
    got = run("nest", job, "--out", tmp_path / "out2", "--steps", "3")
    assert got.exit_code == 2
    assert "a booking was broken off half way" in got.stderr
    got = run("book", tmp_path / "out" / "layout.json")
    assert "a.dxf: not in the rack any more" in got.stderr
    assert not (tmp_path / "rack" / NAME).exists()
    assert (tmp_path / "rack" / "used.dxf").exists()
