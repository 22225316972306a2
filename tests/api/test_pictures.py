"""``lint --svg``: one picture a part, never one over another, none outside the folder."""

import shutil
import xml.etree.ElementTree as ET
from pathlib import Path

from click.testing import CliRunner

from flatprep.cli.main import root

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
