"""The rack of a workshop, as a job names it."""

from decimal import Decimal

import pytest

from flatprep.base.errors import JobError
from flatprep.job.load import JobOptions, load_job
from tests.job.write import write_job

JOB = """
process = "fibre-laser"
rack = "rack"
[[stock]]
name = "al3"
material = "al-5052-h32"
thickness = 3
length = 1000
width = 500
[[part]]
drawing = "leaf.dxf"
"""

LIST = """
units = "in"
remnant_price = 0
[[stock]]
name = "plate"
material = "mild-steel"
thickness = 0.25
length = 40
width = 20
count = 0
[[stock]]
name = "odd"
material = "mild-steel"
thickness = "16ga"
outline = "shelf/odd.dxf"
"""


@pytest.fixture
def rack(tmp_path):
    folder = tmp_path / "rack"
    (folder / "shelf").mkdir(parents=True)
    (folder / "used").mkdir()
    for name in ("R2.dxf", "R1.DXF", "shelf/odd.dxf", "shelf/R3.dxf", "used/R0.dxf", "notes.txt"):
        (folder / name).touch()
    return folder


def test_sheets_join_the_stock_and_drawings_are_found(rack, tmp_path):
    (rack / "stock.toml").write_text(LIST)
    job = load_job(write_job(tmp_path, JOB))
    own, plate, odd = job.stock
    assert (own.name, own.rack_file) == ("al3", "")
    assert (plate.name, plate.rack_file, plate.count, plate.length_mm) == ("plate", "stock.toml", 0, 1016.0)
    assert (plate.thickness_mm, odd.outline) == (6.35, rack / "shelf/odd.dxf")
    assert job.rack.remnant_price == Decimal(0)
    assert [job.rack.inside(path) for path in job.rack.drawings] == ["R1.DXF", "R2.dxf", "shelf/R3.dxf"]


def test_a_rack_may_hold_remnants_alone(rack, tmp_path):
    job = load_job(write_job(tmp_path, JOB))
    assert [s.name for s in job.stock] == ["al3"]
    assert len(job.rack.drawings) == 4
    assert job.rack.remnant_price is None


def test_the_command_line_goes_before_the_job(rack, tmp_path):
    other = tmp_path / "other"
    other.mkdir()
    assert load_job(write_job(tmp_path, JOB), JobOptions(rack=other)).rack.folder == other
    assert load_job(write_job(tmp_path, JOB.replace('rack = "rack"', ""))).rack is None


@pytest.mark.parametrize(
    ("job", "listed", "words"),
    [
        ('rack = "shelf"', "", r'job.toml: rack = "shelf": no such folder'),
        ('rack = "leaf.dxf"', "", "no such folder"),
        ('rack = "../../.."', "", "neither under"),
        ("rack = 3", "", "a text in quotes"),
        ('rack = "rack"', "colour = 1", "stock.toml: unknown key colour"),
        ('rack = "rack"', "remnant_price = -1", "remnant_price = -1"),
        ('rack = "rack"', LIST.replace("0.25", '"thin"'), r"stock 1 \(plate\): thickness"),
        ('rack = "rack"', LIST.replace("count = 0", "count = -1"), "from 0 to"),
        ('rack = "rack"', LIST.replace('"plate"', '"al3"'), r'2 stocks are called "al3": .*job.toml.*stock.toml'),
        ('rack = "rack"', LIST.replace("shelf/odd", "shelf/add"), "no such file"),
        ('rack = "rack"', "[[stock]", "is not TOML"),
    ],
)
def test_mistakes_name_file_key_and_value(rack, tmp_path, job, listed, words):
    if listed:
        (rack / "stock.toml").write_text(listed)
    with pytest.raises(JobError, match=words):
        load_job(write_job(tmp_path, JOB.replace('rack = "rack"', job)))


def test_a_rack_that_is_not_there(tmp_path):
    with pytest.raises(JobError, match="no such folder"):
        load_job(write_job(tmp_path, JOB.replace('rack = "rack"', "")), JobOptions(rack=tmp_path / "none"))
