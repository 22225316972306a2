"""A drafted job file can be loaded, and says what it guessed."""

import shutil
from pathlib import Path

import pytest
from click.testing import CliRunner

from flatprep.api.draft import draft_job
from flatprep.base.errors import FlatprepError, ProfileError, UsageError
from flatprep.cli.main import root
from flatprep.job.context import JobOptions
from flatprep.job.load import load_job
from flatprep.report.draft_toml import draft_toml

LEAF = Path(__file__).parents[2] / "sample_parts" / "drawings" / "washer.dxf"


@pytest.fixture
def folder(tmp_path):
    """Drawings in two levels, two of them of one name."""
    for name in ("ring_3mm_steel_x4.dxf", 'odd "name"\u00e9.dxf', "left/leaf.dxf", "right/leaf.DXF"):
        target = tmp_path / "parts" / name
        target.parent.mkdir(parents=True, exist_ok=True)
        shutil.copy(LEAF, target)
    return tmp_path / "parts"


def test_a_drafted_job_loads_and_holds_every_drawing(folder, tmp_path):
    job_file = tmp_path / "job.toml"
    job_file.write_text(draft_toml(draft_job(folder, tmp_path, JobOptions(process="fibre-laser"))), encoding="utf-8")
    job = load_job(job_file)
    assert sorted(part.name for part in job.parts) == ["left_leaf", 'odd "name"é', "right_leaf", "ring_3mm_steel_x4"]
    ring = next(part for part in job.parts if part.name.startswith("ring"))
    assert (ring.material.id, ring.thickness_mm, ring.quantity) == ("mild-steel", 3.0, 4)
    assert [(stock.material.id, stock.thickness_mm) for stock in job.stock] == [("mild-steel", 3.0)]
    assert all(part.drawing.exists() for part in job.parts)


def test_guesses_and_gaps_are_marked(folder, tmp_path):
    text = draft_toml(draft_job(folder, tmp_path))
    assert 'material = "mild-steel"   # guess, from the name' in text
    assert "quantity = 4   # guess, from the name" in text
    assert text.count("the name does not tell") == 6  # three drawings without material and thickness
    assert "not said: needed" in text


def test_what_to_do_next_is_said(folder, tmp_path):
    """And the next command's first complaint names what may be filled in."""
    job_file = tmp_path / "my job.toml"
    got = CliRunner().invoke(root, ["draft", str(folder), "--out", str(job_file)])
    assert f"next: mend what is marked there, then flatprep prepare '{job_file}' --out out" in got.stderr
    got = CliRunner().invoke(root, ["prepare", str(job_file), "--out", str(tmp_path / "out")])
    assert "process is missing" in got.stderr
    assert '"fibre-laser"' in got.stderr


def test_a_cut_list_goes_before_names(folder, tmp_path):
    (folder / "cutlist.csv").write_text("file,material,thickness,quantity\nring_3mm_steel_x4.dxf,acrylic,5mm,7\n")
    draft = draft_job(folder, tmp_path)
    assert draft.cutlist == "parts/cutlist.csv"
    assert not [part for part in draft.parts if "ring" in part.drawing]


def test_wrong_asks(folder, tmp_path):
    empty = tmp_path / "empty"
    empty.mkdir()
    with pytest.raises(UsageError, match=r"no \.dxf drawing"):
        draft_job(empty, tmp_path)
    with pytest.raises(ProfileError, match="unknown process"):
        draft_job(folder, tmp_path, JobOptions(process="bread-knife"))


def test_a_job_file_is_never_overwritten(folder, tmp_path):
    target = tmp_path / "job.toml"
    target.write_text("mine")
    done = CliRunner().invoke(root, ["draft", str(folder), "--out", str(target)])
    assert done.exit_code == 2
    assert "is there already" in done.stderr
    assert target.read_text() == "mine"


def test_the_command_writes_the_file_and_tells_what_is_missing(folder, tmp_path):
    target = tmp_path / "job.toml"
    done = CliRunner().invoke(root, ["draft", str(folder), "--out", str(target), "--process", "router"])
    assert done.exit_code == 0
    assert "4 drawings; 3 without a material, 3 without a thickness" in done.stderr
    assert load_job(target).process.id == "router"


def test_what_is_said_fills_in_what_names_leave_open(folder, tmp_path):
    job_file = tmp_path / "job.toml"
    said = JobOptions(process="co2-laser", material="PMMA", thickness="1/4in")
    text = draft_toml(draft_job(folder, tmp_path, said))
    assert 'material = "acrylic"\n' in text
    job_file.write_text(text, encoding="utf-8")
    parts = {part.name: (part.material.id, part.thickness_mm) for part in load_job(job_file).parts}
    assert parts["ring_3mm_steel_x4"] == ("mild-steel", 3.0)
    assert parts["left_leaf"] == ("acrylic", 6.35)
    assert {stock.material.id for stock in load_job(job_file).stock} == {"mild-steel", "acrylic"}


@pytest.mark.parametrize(
    "said", [JobOptions(material="cheese"), JobOptions(thickness="-3"), JobOptions(thickness="16ga")]
)
def test_what_is_said_is_checked(folder, tmp_path, said):
    with pytest.raises(FlatprepError):
        draft_job(folder, tmp_path, said)
