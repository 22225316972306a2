"""Hole patterns of two parts that were meant to agree."""

import pytest

from flatprep import api
from tests.drawing.draw import box, drawn

JOB = """
process = "fibre-laser"
[[stock]]
name = "ply"
material = "birch-ply"
thickness = 6
measured_thickness = 6.4
length = 600
width = 400
"""


def plate(pitch, hole=6.6):
    def paint(msp):
        box(msp, 0, 0, 100, 80)
        for x in (20, 20 + pitch):
            for y in (20, 60):
                msp.add_circle((x, y), hole / 2)

    return paint


def linted(folder, names, job=JOB):
    parts = "".join(f'[[part]]\ndrawing = "{n}.dxf"\nmaterial = "birch-ply"\nthickness = 6\n' for n in names)
    (folder / "job.toml").write_text(job + parts)
    return api.lint_job(api.load_job(folder / "job.toml")).linted


@pytest.mark.parametrize(
    ("pitch", "hole", "told"),
    [
        pytest.param(40.0, 6.6, False, id="the same"),
        pytest.param(40.04, 6.6, False, id="within drawing accuracy"),
        pytest.param(40.5, 6.6, True, id="a near miss"),
        pytest.param(42.0, 6.6, False, id="another pattern"),
        pytest.param(40.5, 9.0, False, id="for another bolt"),
    ],
)
def test_near_misses_are_noted_once(tmp_path, pitch, hole, told):
    drawn(tmp_path, plate(40.0), name="one.dxf")
    drawn(tmp_path, plate(pitch, hole), name="two.dxf")
    found = [f for d in linted(tmp_path, ["one", "two"]) for f in d.findings if f.rule == "nearly-same-pattern"]
    assert len(found) == told
    if told:
        assert sorted([found[0].measured, found[0].limit]) == pytest.approx([40.0, 40.5])
        assert found[0].severity == "note"


def test_the_measured_thickness_of_the_stock_reaches_the_joints(tmp_path):
    def slotted(msp):
        box(msp, 0, 0, 100, 80)
        box(msp, 40, 30, 6, 20)

    drawn(tmp_path, slotted, name="one.dxf")
    (one,) = linted(tmp_path, ["one"])
    (jam,) = [f for f in one.findings if f.rule == "joint-fit"]
    assert "jams" in jam.message
    assert jam.measured == pytest.approx(6.0)
    (silent,) = linted(tmp_path, ["one"], JOB.replace("measured_thickness = 6.4", ""))
    assert [f for f in silent.findings if f.rule == "joint-fit"] == []
