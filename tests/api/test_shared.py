"""`--also shared`: the file, what is said, and where it is refused."""

import ezdxf
import pytest
from click.testing import CliRunner

from flatprep.cli.main import root
from tests.drawing.draw import box, drawn

JOB = """
process = "fibre-laser"
spacing = {spacing}
[[stock]]
name = "steel"
material = "mild-steel"
thickness = 3
length = 300
width = 100
[[part]]
drawing = "leaf.dxf"
material = "mild-steel"
thickness = 3
quantity = 2
turns = [0]
"""
KERF = 0.22
"""Of the shipped fibre laser in 3 mm low-carbon steel, as its profile says."""


def nest(folder, spacing, *more, verb="nest"):
    drawn(folder, lambda msp: box(msp, 0, 0, 80, 80))
    (folder / "job.toml").write_text(JOB.format(spacing=spacing))
    words = [verb, str(folder / "job.toml"), "--out", str(folder / "out"), "--steps", "1", *more]
    return CliRunner().invoke(root, words)


@pytest.mark.parametrize("verb", ["nest", "prepare"])
def test_two_plates_share_a_side(tmp_path, verb):
    """80 mm wide on a sheet with 84 mm of room: they can only lie beside each other, 0.22 mm apart, 80 mm in common."""
    got = nest(tmp_path, KERF, "--also", "shared", verb=verb)
    assert "one edge cut for two parts at once, 80 mm less to cut" in got.stderr
    assert "takes the support of its neighbour away" in got.stderr
    lines = list(ezdxf.readfile(tmp_path / "out" / "sheet-01-shared.dxf").modelspace())
    assert [bool(e.closed) for e in lines] == [True, False]
    sheet = ezdxf.readfile(tmp_path / "out" / "sheet-01.dxf").modelspace()
    assert [e.closed for e in sheet if e.dxf.layer == "CUT"] == [True, True]


def test_it_is_off_unless_asked_for(tmp_path):
    got = nest(tmp_path, KERF)
    assert "shared" not in got.stderr
    assert not (tmp_path / "out" / "sheet-01-shared.dxf").exists()


@pytest.mark.parametrize("verb", ["nest", "prepare"])
def test_another_spacing_is_refused_before_anything_is_searched(tmp_path, verb):
    got = nest(tmp_path, 3, "--also", "shared", verb=verb)
    assert got.exit_code == 2
    assert "spacing 3 mm: --also shared needs a spacing of just the kerf (0.22 mm)" in got.stderr
    assert not list(tmp_path.glob("out/*"))


@pytest.mark.parametrize("form", ["kerf", "shared"])
def test_a_hole_that_does_not_survive_the_kerf_is_refused_before_anything_is_searched(tmp_path, form):
    def pierced(msp):
        box(msp, 0, 0, 80, 80)
        msp.add_circle((40, 40), 0.1)

    nest(tmp_path, KERF)
    drawn(tmp_path, pierced)
    words = ["nest", str(tmp_path / "job.toml"), "--out", str(tmp_path / "new"), "--steps", "1", "--also", form]
    got = CliRunner().invoke(root, words)
    assert got.exit_code == 2
    assert "does not survive a kerf of 0.22 mm" in got.stderr
    assert not list(tmp_path.glob("new/*"))
