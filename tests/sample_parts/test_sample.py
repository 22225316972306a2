"""The sample job: its drawings are those of the script, clean and as received they are the same parts."""

import shutil
import subprocess
import sys
import tomllib
from math import pi
from pathlib import Path

import ezdxf
import pytest

from flatprep.drawing.read import read
from flatprep.job.load import load_job

SAMPLE = Path(__file__).parents[2] / "sample_parts"
NAMES = sorted(path.stem for path in (SAMPLE / "drawings").glob("*.dxf"))


def test_the_script_draws_the_kept_files_byte_for_byte(tmp_path):
    for script in ("draw.py", "hoe.py"):
        shutil.copy(SAMPLE / script, tmp_path)
    subprocess.run([sys.executable, "draw.py"], cwd=tmp_path, check=True, timeout=60)
    for folder in ("drawings", "as_received", "stock"):
        drawn = {path.name: path.read_bytes() for path in (tmp_path / folder).glob("*.dxf")}
        kept = {path.name: path.read_bytes() for path in (SAMPLE / folder).glob("*.dxf")}
        assert drawn.keys() == kept.keys()
        assert [name for name in drawn if drawn[name] != kept[name]] == []


@pytest.mark.parametrize("folder", ["drawings", "as_received", "stock"])
def test_the_library_that_wrote_them_finds_no_fault(folder):
    for path in sorted((SAMPLE / folder).glob("*.dxf")):
        audit = ezdxf.readfile(path).audit()
        assert not audit.errors, path.name


def test_the_job_shows_what_it_is_meant_to_show():
    job = load_job(SAMPLE / "job.toml")
    assert len(job.parts) >= 14
    assert {part.drawing.stem for part in job.parts} == set(NAMES)
    assert len({part.material.id for part in job.parts}) >= 5
    assert len({part.thickness_mm for part in job.parts}) >= 6
    assert {part.process.id for part in job.parts} == {"fibre-laser", "co2-laser", "router"}
    assert any(part.quantity_opposite for part in job.parts)
    assert any(isinstance(stock.outline, Path) for stock in job.stock)
    assert {work.kind for part in job.parts for work in part.work} >= {
        "tap",
        "ream",
        "bore",
        "countersink",
        "clearance",
    }
    # the half inch of the skids: 25.4 / 2
    assert next(p.thickness_mm for p in job.parts if p.name == "skid") == pytest.approx(12.7)


def test_both_cut_lists_of_the_sample_name_the_same_parts():
    with (SAMPLE / "job.toml").open("rb") as file:
        listed = {Path(part["drawing"]).stem for part in tomllib.load(file)["part"]}
    rows = (SAMPLE / "cutlist.csv").read_text().splitlines()[1:]
    assert listed | {Path(row.split(",")[0]).stem for row in rows} == set(NAMES)
    received = (SAMPLE / "as_received" / "cutlist.csv").read_text().splitlines()[1:]
    assert {Path(row.split(",")[0]).stem for row in received} == set(NAMES)


def only_part(path: Path):
    drawing = read(path)
    assert len(drawing.parts) == 1, path
    return drawing.parts[0]


@pytest.mark.parametrize(
    ("name", "area_mm2", "length_mm", "holes"),
    [
        # ring of 40 and 13.5 mm
        ("washer", pi * (20**2 - 6.75**2), pi * 53.5, 1),
        # disc of 80, bore of 21, four holes of 6.6 mm
        ("hub_flange", pi * (40**2 - 10.5**2 - 4 * 3.3**2), pi * (80 + 21 + 4 * 6.6), 5),
        # stadium of 180 between centres and radius 16; two holes of 11.5 and two of 4.2 mm
        (
            "link_lower",
            180 * 32 + pi * (16**2 - 2 * 5.75**2 - 2 * 2.1**2),
            360 + pi * (32 + 2 * 11.5 + 2 * 4.2),
            4,
        ),
        # 8 x 3 in with corners of 3/8 in, four holes of 0.406 in, a slot 3 in long and 0.406 in wide
        (
            "tool_bar_plate",
            25.4**2 * (24 - (4 - pi) * 0.375**2 - pi * 0.203**2 * 4 - (3 - 0.406) * 0.406 - pi * 0.203**2),
            25.4 * (22 - 8 * 0.375 + 2 * pi * 0.375 + 5 * pi * 0.406 + 2 * (3 - 0.406)),
            5,
        ),
    ],
)
def test_parts_measure_what_they_were_drawn_to(name, area_mm2, length_mm, holes):
    part = only_part(SAMPLE / "drawings" / f"{name}.dxf")
    assert part.area_mm2 == pytest.approx(area_mm2, rel=1e-9)
    assert part.cut_length_mm == pytest.approx(length_mm, rel=1e-9)
    assert len(part.holes) == holes


# inches that nobody says are inches: only a person can know
UNSAID = {"clamp_plate"}
# a chord polygon of 48 sides has less area than its circle: n / 2 sin(2 pi / n) of pi
CHORDS = {"link_lower"}


@pytest.mark.parametrize("name", [name for name in NAMES if name not in UNSAID])
def test_a_drawing_as_received_is_the_same_part(name):
    clean = only_part(SAMPLE / "drawings" / f"{name}.dxf")
    received = only_part(SAMPLE / "as_received" / f"{name}.dxf")
    assert received.area_mm2 == pytest.approx(clean.area_mm2, rel=2e-4 if name in CHORDS else 1e-5)
    assert len(received.holes) == len(clean.holes)


@pytest.mark.parametrize(
    ("name", "kinds"),
    [
        ("side_plate", {"open-contour"}),
        ("wheel_disc", {"duplicate-line"}),
        ("washer", {"unknown-units"}),
        ("clamp_plate", {"unknown-units"}),
        ("side_knife", {"duplicate-line"}),
        ("tray_floor", {"off-plane"}),
    ],
)
def test_the_mess_is_noticed(name, kinds):
    assert {fault.kind for fault in read(SAMPLE / "as_received" / f"{name}.dxf").faults} >= kinds
