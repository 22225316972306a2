"""Small parts of a job: held by tabs where the job asks for it, else warned of."""

import ezdxf
import pytest
from click.testing import CliRunner

from flatprep.api.pieces import read_job
from flatprep.api.tabs import job_tabs, tab_notes, tab_warnings
from flatprep.bench.checklist import checklist
from flatprep.cli.main import root
from flatprep.job.load import load_job
from tests.drawing.draw import box, drawn

JOB = """
name = "seed drill"
process = "fibre-laser"
{top}
[[stock]]
name = "steel"
material = "mild-steel"
thickness = 3
length = 300
width = 200
[[part]]
drawing = "slider.dxf"
material = "mild-steel"
thickness = 3
quantity = 4
{slider}
[[part]]
drawing = "leaf.dxf"
material = "mild-steel"
thickness = 3
{leaf}
"""


def slider(msp):
    box(msp, 0, 0, 24, 12)
    msp.add_circle((12, 6), 2.5)


def leaf(msp):
    box(msp, 0, 0, 80, 50)


@pytest.fixture
def folder(tmp_path):
    drawn(tmp_path, slider, name="slider.dxf")
    drawn(tmp_path, leaf, name="leaf.dxf")
    return tmp_path


def job(folder, top="", slider="", leaf=""):
    path = folder / "job.toml"
    path.write_text(JOB.format(top=top, slider=slider, leaf=leaf))
    return read_job(load_job(path))


@pytest.mark.parametrize(
    ("words", "held", "warned"),
    [
        ({}, [], True),
        ({"top": "tabs = true"}, ["slider"], False),
        ({"slider": "tabs = true"}, ["slider"], False),
        ({"top": "tabs = true", "slider": "tabs = false"}, [], True),
        ({"top": "tabs = true", "leaf": "tabs = true"}, ["slider", "leaf"], False),
    ],
)
def test_who_is_held(folder, words, held, warned):
    read = job(folder, **words)
    assert list(job_tabs(read)) == held
    warnings = tab_warnings(read)
    assert len(warnings) == warned
    if warned:
        assert "slider" in warnings[0]
        assert "30 mm" in warnings[0]
        assert "leaf" not in warnings[0]
    assert bool(tab_notes(read)) == bool(held)


def test_a_part_without_a_place_for_a_tab_is_named(folder):
    """Router tabs of 5 mm with a cutter of 3 mm need 16 mm of straight edge; the longest here has 12."""
    drawn(folder, lambda msp: box(msp, 0, 0, 12, 10), name="slider.dxf")
    read = job(folder, top="tabs = true", slider='process = "router"')
    assert job_tabs(read) == {}
    assert any("slider" in w and "hold it otherwise" in w for w in tab_warnings(read))


def test_a_hole_narrower_than_the_kerf_is_told_and_left_as_drawn(folder):
    def pierced(msp):
        slider(msp)
        msp.add_circle((4, 4), 0.05)

    drawn(folder, pierced, name="slider.dxf")
    job(folder, top="tabs = true")
    got = CliRunner().invoke(root, ["nest", str(folder / "job.toml"), "--out", str(folder / "out"), "--steps", "5"])
    assert got.exit_code == 0, got.output
    assert "as drawn, without the kerf" in got.stderr
    assert (folder / "out" / "sheet-01-tabs.dxf").exists()


def test_nest_writes_the_gaps_beside_the_sheet_and_takes_them_away_again(folder):
    out = folder / "out"
    for top, there in (("tabs = true", True), ("", False)):
        job(folder, top=top)
        got = CliRunner().invoke(root, ["nest", str(folder / "job.toml"), "--out", str(out), "--steps", "5"])
        assert got.exit_code == 0, got.output
        assert ("holding tabs: slider (2 of 0.3 mm)" in got.stderr) == there
        assert ("may fall between the slats" in got.stderr) != there
        assert (out / "sheet-01-tabs.dxf").exists() == there
        cut = [e for e in ezdxf.readfile(out / "sheet-01.dxf").modelspace() if e.dxf.layer == "CUT"]
        assert all(e.dxftype() == "CIRCLE" or e.closed for e in cut)
        assert ('class="tabs"' in (out / "sheet-01.svg").read_text()) == there
        if there:
            lines = list(ezdxf.readfile(out / "sheet-01-tabs.dxf").modelspace())
            assert sum(e.dxftype() == "LWPOLYLINE" and not e.closed for e in lines) == 8


def test_the_bench_breaks_them_out(folder):
    slider_steps, leaf_steps = checklist([p.bench for p in job(folder, top="tabs = true").pieces]).parts
    assert "break out the 2 tabs of 0.3 mm and dress the stubs flush" in slider_steps.steps[0].note
    assert "sharp stubs" in slider_steps.steps[0].caution
    assert "stubs" not in leaf_steps.steps[0].note + leaf_steps.steps[0].caution


@pytest.mark.parametrize(("top", "severities"), [("", ["warning"]), ("tabs = true", ["note"])])
def test_lint_knows_that_it_is_held(folder, top, severities):
    report = job(folder, top=top).report
    assert [str(f.severity) for one in report.linted for f in one.findings if f.rule == "small-part"] == severities
