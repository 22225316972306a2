"""The lint command as a user calls it."""

import json
import subprocess
import sys

import pytest
from click.testing import CliRunner

from flatprep.cli.main import root
from tests.drawing.draw import box, drawn, new, save

LASER = """name = "a laser"
kind = "laser"
kerf = 0.2
[limits]
hole_min = 1.0
hole_to_thickness = 1.0
web_min = 1.0
web_to_thickness = 1.0
slot_min = 0.5
slot_to_thickness = 0.5
part_min = 30.0
join_gap = 0.05
"""


def plate(hole):
    def paint(msp):
        box(msp, 0, 0, 80, 50)
        msp.add_circle((40, 25), hole / 2)

    return paint


@pytest.fixture
def run(tmp_path):
    (tmp_path / "laser.toml").write_text(LASER)

    def call(*words):
        return CliRunner().invoke(root, [str(w) for w in words])

    return call


def options(tmp_path):
    return ["--process", tmp_path / "laser.toml", "--material", "mild-steel", "--thickness", "3"]


def test_clean_part_ends_with_0(run, tmp_path):
    got = run("lint", drawn(tmp_path, plate(8)), *options(tmp_path))
    assert got.exit_code == 0
    assert "leaf" in got.stdout


def test_small_hole_ends_with_1_and_says_where_and_how_much(run, tmp_path):
    got = run("lint", drawn(tmp_path, plate(2)), *options(tmp_path), "--format", "json")
    assert got.exit_code == 1
    document = json.loads(got.stdout)
    assert document["schema"] == "flatprep-lint/1"
    (one,) = document["drawings"]
    (finding,) = [f for f in one["findings"] if f["rule"] == "small-hole"]
    assert finding["severity"] == "error"
    assert (finding["measured"], finding["limit"], finding["unit"]) == (pytest.approx(2), 3.0, "mm")
    assert finding["at"] == pytest.approx([40, 25])
    assert one["parts"][0]["mass_kg"] == pytest.approx((4000 - 3.141592653589793) * 3 * 7.85e-6)


@pytest.mark.parametrize("thickness", ["1.5", "1.5mm", "0.0625in", "1/16in", "16ga"])
def test_ways_of_writing_a_thickness(run, tmp_path, thickness):
    # 1/16 in = 1.5875 mm; 16 ga steel 0.0598 in = 1.519 mm (manufacturers' standard gauge)
    words = ["--process", tmp_path / "laser.toml", "--material", "mild-steel", "--thickness", thickness]
    got = run("lint", drawn(tmp_path, plate(2)), *words, "--format", "json")
    assert got.exit_code == 0, got.output


def test_folder_is_searched_through_all_levels_in_any_case(run, tmp_path):
    inner = tmp_path / "a" / "b"
    inner.mkdir(parents=True)
    drawn(inner, plate(8), name="ONE.DXF")
    drawn(tmp_path / "a", plate(8), name="two.dxf")
    got = run("lint", tmp_path / "a", *options(tmp_path), "--format", "json")
    assert [d["file"].rpartition("/")[2] for d in json.loads(got.stdout)["drawings"]] == ["ONE.DXF", "two.dxf"]


def test_cut_list_goes_before_the_options(run, tmp_path):
    folder = tmp_path / "parts"
    folder.mkdir()
    drawn(folder, plate(2.5), name="thin.dxf")
    drawn(folder, plate(2.5), name="thick.dxf")
    (folder / "cutlist.csv").write_text("file,material,thickness,quantity\nthin.dxf,mild-steel,2,1\n")
    got = run("lint", folder, *options(tmp_path), "--format", "json")
    rules = {
        d["file"].rpartition("/")[2]: [f["rule"] for f in d["findings"] if f["severity"] != "note"]
        for d in json.loads(got.stdout)["drawings"]
    }
    assert rules == {"thick.dxf": ["small-hole"], "thin.dxf": []}


def test_cut_list_that_names_no_drawing_is_an_error(run, tmp_path):
    folder = tmp_path / "parts"
    folder.mkdir()
    drawn(folder, plate(8))
    (folder / "cutlist.csv").write_text("file,material,thickness,quantity\nleafs.dxf,mild-steel,2,1\n")
    got = run("lint", folder)
    assert got.exit_code == 2
    assert "line 2" in got.stderr
    assert "leafs.dxf" in got.stderr


def test_what_was_not_said_is_told_once(run, tmp_path):
    drawn(tmp_path, plate(2), name="a.dxf")
    drawn(tmp_path, plate(2), name="b.dxf")
    got = run("lint", tmp_path)
    assert got.exit_code == 0
    assert got.output.count("rules that need it did not run") == 1


def test_every_file_is_answered(run, tmp_path):
    good = drawn(tmp_path, plate(8), name="good.dxf")
    bad = tmp_path / "bad.dxf"
    bad.write_text("no drawing")
    got = run("lint", good, bad, tmp_path / "none.dxf", "--format", "json")
    document = json.loads(got.stdout)
    assert got.exit_code == 1
    assert [d["file"] for d in document["drawings"]] == [str(good)]
    assert [u["file"] for u in document["unreadable"]] == [str(bad), str(tmp_path / "none.dxf")]


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (["--material", "mildsteal"], "mild"),
        (["--thickness", "-3"], "-3"),
        (["--thickness", "thick"], "thick"),
        (["--thickness", "16ga"], "material"),
        (["--process", "lazer"], "lazer"),
        (["--layer", "CUT"], "CUT"),
        (["--layer", "CUT=drill"], "drill"),
    ],
)
def test_wrong_options_end_with_2_and_one_message(run, tmp_path, words, said):
    got = run("lint", drawn(tmp_path, plate(8)), *words)
    assert got.exit_code == 2
    assert said in got.stderr
    assert got.stderr.startswith("error: ")
    assert got.stdout == ""


def test_no_such_file_and_empty_folder(run, tmp_path):
    (tmp_path / "empty").mkdir()
    for path in (tmp_path / "none.dxf", tmp_path / "empty"):
        got = run("lint", path, "--format", "json")
        assert got.exit_code == 2
        assert json.loads(got.stdout)["unreadable"][0]["file"] == str(path)


def test_roles_of_layers_can_be_said(run, tmp_path):
    doc = new()
    box(doc.modelspace(), 0, 0, 80, 50)
    doc.modelspace().add_circle((40, 25), 10, dxfattribs={"layer": "Engraving"})
    path = save(doc, tmp_path)
    said = run("lint", path, "--layer", "Engraving=cut", "--format", "json")
    assert json.loads(said.stdout)["drawings"][0]["parts"][0]["holes"] == 1


def test_same_findings_in_one_process_and_in_two(run, tmp_path):
    for k in range(5):
        drawn(tmp_path, plate(2 + k), name=f"p{k}.dxf")
    one = run("lint", tmp_path, *options(tmp_path), "--format", "json")
    two = run("lint", tmp_path, *options(tmp_path), "--format", "json", "--jobs", "2")
    assert one.stdout == two.stdout


def test_module_can_be_run():
    got = subprocess.run([sys.executable, "-m", "flatprep", "--version"], capture_output=True, text=True, check=True)
    assert "flatprep" in got.stdout


def test_help_loads_no_heavy_library():
    lines = [
        "import sys; sys.argv = ['flatprep', '--help']",
        "from flatprep.cli.main import main",
        "try: main()",
        "except SystemExit: pass",
        "heavy = {'ezdxf', 'numpy', 'shapely', 'numba', 'jinja2'} & set(sys.modules)",
        "assert not heavy, heavy",
    ]
    subprocess.run([sys.executable, "-c", "\n".join(lines)], check=True, capture_output=True)


def test_a_failure_of_flatprep_itself_is_told_without_a_traceback(run, tmp_path, monkeypatch):
    def broken(*_args, **_options):
        raise ZeroDivisionError("a bug")

    monkeypatch.delenv("FLATPREP_TRACEBACK")
    monkeypatch.setattr("flatprep.cli.lint.lint_paths", broken)
    got = run("lint", drawn(tmp_path, plate(8)))
    assert got.exit_code == 2
    assert "a bug" in got.stderr
    assert "Traceback" not in got.output


def test_the_kerf_is_told_once_a_run(run, tmp_path):
    for name in ("a.dxf", "b.dxf"):
        drawn(tmp_path, plate(8), name=name)
    words = run("lint", tmp_path, *options(tmp_path)).stdout
    line = "note: a cut that runs on the line makes holes wider and parts smaller than drawn by its kerf (laser 0.2 mm)"
    assert words.count(line) == 1
    assert "by its kerf" not in run("lint", tmp_path).stdout
