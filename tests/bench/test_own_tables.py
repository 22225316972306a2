"""A shop's own hardware tables and bench rules go before the shipped ones, in jobs as at the counter."""

from pathlib import Path

import pytest

from flatprep.api.pieces import read_job
from flatprep.api.work import checklist_job
from flatprep.bench.checklist import checklist
from flatprep.bench.joints import check_joints
from flatprep.job.context import JobOptions
from flatprep.job.load import load_job
from flatprep.job.values import JobPart, JointAsk, JointLayer, Work
from flatprep.model.work import StepKind
from flatprep.profile.process_load import load_process
from flatprep.profile.where import SHIPPED
from tests.bench.parts import bench, plate, work
from tests.rules.setting import context, found

SERIES = """
source.title = "made up for the test"
row = [{ thread = "M7x0.5", series = "fine", d = 7.0, pitch = 0.5, drill = 6.5, minor_min = 6.459, minor_max = 6.599 }]
"""


@pytest.fixture
def own(tmp_path):
    folder = tmp_path / "shop" / "hardware"
    folder.mkdir(parents=True)
    (folder / "threads_house.toml").write_text(SERIES)
    rules = (SHIPPED / "hardware" / "bench_rules.toml").read_text()
    changed = rules.replace("direct_up_to = 6.0", "direct_up_to = 1.0").replace("play_most = 0.25", "play_most = 0.05")
    assert changed.count("direct_up_to = 1.0") == changed.count("play_most = 0.05") == 1
    (folder / "bench_rules.toml").write_text(changed)
    return (tmp_path / "shop",)


def test_an_own_thread_series_is_tapped(own):
    (part,) = checklist([bench(plate(100, 50, (30, 25, 6.5)), work("tap", "M7x0.5", hole_mm=6.5), own=own)]).parts
    assert next(s for s in part.steps if s.kind is StepKind.TAP).tool_dia_mm == 6.5


def test_own_rules_change_the_pilot(own):
    """M5 in 3 mm: cut to 4.2 as shipped, 3.7 where only 1 mm is tapped directly."""
    cut = {}
    for name, folders in (("shipped", ()), ("own", own)):
        (part,) = checklist([bench(plate(100, 50, (30, 25, 4)), work("tap", "M5", hole_mm=4.0), own=folders)]).parts
        cut[name] = next(s for s in part.steps if s.kind is StepKind.TAP).cut_dia_mm
    assert cut == {"shipped": pytest.approx(4.2), "own": pytest.approx(3.7)}


def test_own_rules_hold_for_joints(own):
    ask = JointAsk("pivot", "shoulder 10", (JointLayer(None, "bush", 9.8, 10.05),), nut="M8")
    plates = [bench(plate(100, 50), own=folders) for folders in ((), own)]
    assert [check_joints([ask], [part])[0].closes for part in plates] == [True, False]


def test_a_job_takes_the_folders_of_the_command_line(own):
    job = load_job(Path(__file__).parents[2] / "sample_parts" / "job.toml", JobOptions(profile_folders=own))
    read = read_job(job)
    quadrant = next(part for part in checklist_job(read).parts if part.name == "depth_quadrant")
    assert next(s for s in quadrant.steps if s.kind is StepKind.TAP).cut_dia_mm == pytest.approx(3.7)
    assert all(one.rule != "tap-hole-size" for lint in read.report.linted for one in lint.findings)


def test_lint_knows_the_own_series(own, tmp_path):
    part = plate(100, 50, (30, 25, 6.5))
    asked = Work("tap", "M7x0.5", hole_mm=6.5)
    for folders, told in (((), 1), (own, 0)):
        job = JobPart(Path("plate.dxf"), "plate", None, 6.0, load_process("fibre-laser"), work=(asked,), own=folders)
        assert len(found("tap-hole-size", context(part, process=job.process, job_part=job))) == told
