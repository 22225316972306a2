"""Labels etched on request, as they come out on a sheet."""

import json

import ezdxf
import pytest
import shapely

from flatprep.base.errors import JobError
from flatprep.job.load import load_job
from tests.cli.test_jobs import JOB, job, run

__all__ = ["job"]  # a fixture


def marks(folder, form=""):
    doc = ezdxf.readfile(folder / f"sheet-01{form}.dxf")
    lines = doc.modelspace().query('LWPOLYLINE[layer=="MARK"]')
    return [shapely.LineString([(x, y) for x, y, *_ in line.get_points()]) for line in lines]


def nest(job, folder, *words):
    got = run("nest", job, "--out", folder, "--steps", "3", *words)
    assert got.exit_code == 0, got.output
    return got


def test_nothing_is_etched_unless_asked(job, tmp_path):
    nest(job, tmp_path / "out")
    assert marks(tmp_path / "out") == []


@pytest.mark.parametrize("by", ["option", "key"])
def test_every_piece_gets_its_name_and_revision(job, tmp_path, by):
    """LEAF B: L is one line, the others two each, on each of four pieces; clear of rim and hole by 2 mm."""
    text = JOB.replace('name = "seed drill"\n', 'revision = "B"\n' + ("etch_labels = true\n" if by == "key" else ""))
    job.write_text(text)
    nest(job, tmp_path / "out", *(["--etch"] if by == "option" else []), "--also", "cut-only")
    lines = marks(tmp_path / "out")
    assert len(lines) == 4 * 9
    assert marks(tmp_path / "out", "-cut-only") == []
    for p in json.loads((tmp_path / "out" / "layout.json").read_text())["sheets"][0]["placements"]:
        motion = (p["turn_deg"], p["dx"], p["dy"])
        body = shapely.affinity.translate(
            shapely.affinity.rotate(shapely.box(0, 0, 80, 50).difference(shapely.Point(20, 25).buffer(5, 64)),
                                    motion[0], origin=(0, 0)), *motion[1:])  # fmt: skip
        own = [line for line in lines if body.contains(line)]
        assert len(own) == 9
        assert min(line.distance(body.boundary) for line in own) >= 2.0 - 0.05
    assert 'class="etched"' in (tmp_path / "out" / "sheet-01.svg").read_text()


def test_a_part_without_room_is_named(job, tmp_path):
    job.write_text(JOB.replace("quantity = 4", 'quantity = 1\nname = "' + "long_" * 12 + 'leaf"'))
    got = nest(job, tmp_path / "out", "--etch")
    assert "leaf: no label etched: no room for letters of 3 mm" in got.stderr
    job.write_text(JOB.replace("quantity = 4", 'quantity = 1\nname = "' + "long_" * 12 + 'leaf"\netch_label = false'))
    assert "no label" not in nest(job, tmp_path / "out", "--etch").stderr
    assert marks(tmp_path / "out") == []


def test_one_part_alone(job, tmp_path):
    job.write_text("etch_height = [2, 4]\n" + JOB + "etch_label = true\n")
    nest(job, tmp_path / "out")
    lines = marks(tmp_path / "out")
    assert len(lines) == 4 * 7
    ends = [line.bounds for line in lines if len(line.coords) == 3]
    assert max(max(x1 - x0, y1 - y0) for x0, y0, x1, y1 in ends) == pytest.approx(4.0)


@pytest.mark.parametrize(
    ("line", "words"),
    [
        ("etch_labels = 3", "true or false"),
        ("etch_height = 3", "a point|two lengths"),
        ("etch_height = [10, 3]", "the least and the largest height"),
        ("etch_height = [0, 3]", "two lengths above 0"),
    ],
)
def test_mistakes(job, line, words):
    job.write_text(line + "\n" + JOB)
    with pytest.raises(JobError, match=words):
        load_job(job)
