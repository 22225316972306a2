"""Slots and corners of a job's parts, cut as the job asks for it; lint is content with what will be cut."""

import json

import pytest
from click.testing import CliRunner

from flatprep.api.pieces import read_job
from flatprep.base.errors import JobError
from flatprep.cli.main import root
from flatprep.drawing.read import read
from flatprep.job.load import load_job
from tests.drawing.draw import box, drawn


def slotted(msp):
    """90 x 60 mm with a notch of 3 mm in the edge, 12 deep, and a slot of 3 by 20 mm."""
    msp.add_lwpolyline([(0, 0), (40, 0), (40, 12), (43, 12), (43, 0), (90, 0), (90, 60), (0, 60)], close=True)
    box(msp, 60, 30, 20, 3)


def job(tmp_path, *lines, stock="", part="", measured="measured_thickness = 3.1"):
    drawn(tmp_path, slotted)
    (tmp_path / "job.toml").write_text(
        "\n".join(
            [
                'process = "router"', *lines, "[[stock]]", 'name = "ply"', 'material = "birch-ply"', "thickness = 3",
                "length = 300", "width = 200", measured, stock,
                "[[part]]", 'drawing = "leaf.dxf"', 'material = "birch-ply"', "thickness = 3", part,
            ]
        )
    )  # fmt: skip
    return load_job(tmp_path / "job.toml")


def rules(found):
    (one,) = found.report.linted
    return [f.rule for f in one.findings if f.rule in ("joint-fit", "inside-corner")]


def test_as_drawn_is_the_default(tmp_path):
    found = read_job(job(tmp_path))
    (piece,) = found.pieces
    assert piece.part is piece.drawn
    assert rules(found) == ["inside-corner"] * 6 + ["joint-fit"] * 2


def test_slots_fit_the_sheet_and_corners_are_opened(tmp_path):
    found = read_job(job(tmp_path, 'slots = "measured"', 'relief = "t-bone"', "slot_clearance = 0.15"))
    (piece,) = found.pieces
    assert piece.changed
    assert piece.changes[:2] == (
        "slot of 3.000 mm made 3.250 mm wide at (70.000, 31.500)",
        "slot of 3.000 mm made 3.250 mm wide at (41.500, 6.000)",
    )
    assert [words.partition(" of ")[0] for words in piece.changes[2:]] == ["T-bone"] * 6
    # six half circles of 1.03 times the cutter's radius, and both slots a quarter wider
    bone = 3.14159265 * (1.03 * 1.5) ** 2 / 2
    assert piece.part.area_mm2 == pytest.approx(90 * 60 - 3.25 * 32 - 6 * bone)
    assert piece.drawn.area_mm2 == pytest.approx(90 * 60 - 3 * 32)
    assert rules(found) == []


@pytest.mark.parametrize(
    ("part", "count"), [('corners = "none"', 0), ("corners = [[40, 12]]", 1), ('corners = "square"', 6), ("", 6)]
)
def test_only_corners_that_matter_are_told(tmp_path, part, count):
    assert rules(read_job(job(tmp_path, part=part, measured=""))).count("inside-corner") == count


def test_the_layout_takes_the_changed_copy(tmp_path):
    job(tmp_path, 'slots = "measured"')
    out = tmp_path / "out"
    result = CliRunner().invoke(root, ["nest", str(tmp_path / "job.toml"), "--out", str(out), "--steps", "1"])
    assert result.exit_code == 0, result.output
    assert (
        "leaf: not cut as drawn, 2 changes\n  slot of 3.000 mm made 3.200 mm wide at (70.000, 31.500)" in result.stdout
    )
    (source,) = json.loads((out / "layout.json").read_text())["parts"]
    (copy,) = read(out / source["drawing"]).parts
    assert copy.area_mm2 == pytest.approx(90 * 60 - 3.2 * 32)


def test_slots_are_not_resized_by_guess(tmp_path):
    with pytest.raises(JobError, match="no stock says what it measures"):
        read_job(job(tmp_path, 'slots = "measured"', measured=""))


@pytest.mark.parametrize(
    ("line", "part", "says"),
    [
        ('relief = "round"', "", 'relief = "round": must be one of "as-drawn", "dogbone", "t-bone"'),
        ('slots = "wide"', "", 'slots = "wide": must be one of "as-drawn", "measured"'),
        ("slot_clearance = 0.1", "", 'slot_clearance = 0.1: must be left out, unless slots = "measured"'),
        ("", 'corners = "round"', 'corners = "round": must be one of "all", "square", "none"'),
        ("", "corners = [[1]]", "corners = "),
    ],
)
def test_wrong_words_are_told(tmp_path, line, part, says):
    with pytest.raises(JobError) as told:
        job(tmp_path, line, part=part)
    assert says in told.value.message
