"""``lint --svg``: one picture a part, never one over another, none outside the folder."""

import shutil
import xml.etree.ElementTree as ET
from pathlib import Path

from click.testing import CliRunner

from flatprep.cli.main import root
from tests.drawing.draw import box, drawn

DRAWINGS = Path(__file__).parents[2] / "sample_parts" / "drawings"


def test_every_part_gets_a_picture_with_its_marks(tmp_path):
    words = ["lint", str(DRAWINGS / "link_upper.dxf"), "--process", "fibre-laser", "--material", "al-6061-t6"]
    done = CliRunner().invoke(root, [*words, "--thickness", "6mm", "--svg", str(tmp_path / "pictures")])
    assert done.exit_code == 1
    (file,) = (tmp_path / "pictures").iterdir()
    assert file.name == "link_upper.svg"
    marks = [g.get("data-mark") for g in ET.parse(file).iter("{http://www.w3.org/2000/svg}g") if g.get("data-mark")]
    assert marks == ["f1"]


def test_drawings_of_one_name_get_a_file_each(tmp_path):
    for side in ("left", "right"):
        (tmp_path / "parts" / side).mkdir(parents=True)
        shutil.copy(DRAWINGS / "washer.dxf", tmp_path / "parts" / side / "leaf.dxf")
    done = CliRunner().invoke(root, ["lint", str(tmp_path / "parts"), "--svg", str(tmp_path / "pictures")])
    assert done.exit_code == 0
    assert sorted(file.name for file in (tmp_path / "pictures").iterdir()) == ["leaf-2.svg", "leaf.svg"]


def test_a_folder_that_cannot_be_written_is_one_message(tmp_path):
    (tmp_path / "taken").write_text("a file")
    words = ["lint", str(DRAWINGS / "washer.dxf"), "--svg", str(tmp_path / "taken")]
    done = CliRunner().invoke(root, words)
    assert done.exit_code == 2
    assert "taken: cannot be written into" in done.stderr


def test_what_the_cutter_does_not_enter_is_hatched(tmp_path):
    """A square window's four corners leave 4 r² (1 - π / 4) = 1.931 mm² to a cutter of 3 mm."""
    path = drawn(tmp_path, lambda msp: (box(msp, 0, 0, 80, 60), box(msp, 30, 20, 20, 20)))
    words = ["lint", str(path), "--process", "router", "--svg", str(tmp_path / "pictures")]
    CliRunner().invoke(root, words)
    tree = ET.parse(tmp_path / "pictures" / "leaf.svg")
    paths = [e.get("d") for e in tree.iter("{http://www.w3.org/2000/svg}path") if e.get("class") == "unreached"]
    assert [d.count("Z") for d in paths] == [4]
    said = [e.text for e in tree.iter("{http://www.w3.org/2000/svg}text")][-1].replace("\u00a0", " ")
    assert said == "hatched: what a tool of 3 mm does not enter, 1.93 mm² in 4 places"


def test_a_beam_enters_everywhere(tmp_path):
    path = drawn(tmp_path, lambda msp: (box(msp, 0, 0, 80, 60), box(msp, 30, 20, 20, 20)))
    CliRunner().invoke(root, ["lint", str(path), "--process", "co2-laser", "--svg", str(tmp_path / "pictures")])
    assert "hatched" not in (tmp_path / "pictures" / "leaf.svg").read_text()
