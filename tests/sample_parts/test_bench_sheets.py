"""Five bench sheets of the sample job, checked line by line against the job file and the tables: side, size, count,
order, cut."""

from pathlib import Path

import pytest

from flatprep.api.pieces import read_job
from flatprep.api.work import checklist_job
from flatprep.job.load import load_job

JOB = Path(__file__).parents[2] / "sample_parts" / "job.toml"

SHEETS = {
    # 4 mm mild steel, laser. ISO 273 medium: M12 13.5, M10 11, M8 9, M5 5.5, all cut to size.
    # M5 ISO 10642: sink 11.47 over 5.5, 2.985 deep, outwards (A).
    "side_plate": (
        ("deburr", "", 1, None, None, None), ("inspect", "M12 clearance", 1, 13.5, 13.5, None),
        ("inspect", "M10 clearance", 2, 11.0, 11.0, None), ("inspect", "M8 clearance", 2, 9.0, 9.0, None),
        ("inspect", "M5 clearance", 2, 5.5, 5.5, None), ("flatness", "", 1, None, None, None),
        ("countersink", "M5 ISO 10642", 2, 11.47, 5.5, "A"), ("deburr", "", 2, None, None, None),
        ("inspect", "", 1, None, None, None),
    ),
    # 6 mm mild steel: five index holes 8 H7 from 7.5 (0.5 mm left), drilled 7.7; two M5, cut to 4.2, tapped directly.
    "depth_quadrant": (
        ("deburr", "", 1, None, None, None), ("inspect", "M8 clearance", 1, 9.0, 9.0, None),
        ("flatness", "", 1, None, None, None), ("drill", "7.7 mm", 5, 7.7, 7.5, None),
        ("ream", "8 H7", 5, 8.0, 7.5, None),
        ("tap", "M5", 2, 4.2, 4.2, None), ("deburr", "", 7, None, None, None), ("inspect", "", 1, None, None, None),
    ),
    # 8 mm aluminium, routed: no skin, so 11.5 is reamed to 12 H7 (0.3 to 0.6 mm may be left); two M5.
    "link_lower": (
        ("deburr", "", 1, None, None, None), ("flatness", "", 1, None, None, None),
        ("ream", "12 H7", 2, 12.0, 11.5, None),
        ("tap", "M5", 2, 4.2, 4.2, None), ("deburr", "", 4, None, None, None), ("inspect", "", 1, None, None, None),
    ),
    # 6 mm aluminium, laser: 22 N7 bored from 21 (0.8 to 1.5 mm is left); four M6 clearance holes 6.6.
    "hub_flange": (
        ("deburr", "", 1, None, None, None), ("inspect", "M6 clearance", 4, 6.6, 6.6, None),
        ("flatness", "", 1, None, None, None), ("bore", "22 N7", 1, 22.0, 21.0, None),
        ("deburr", "", 1, None, None, None),
        ("inspect", "", 1, None, None, None),
    ),
    # 12.7 mm HDPE, routed: M8 ISO 10642, sink 18.25 over 9, from the sliding face (B).
    "skid": (
        ("deburr", "", 1, None, None, None), ("inspect", "M8 clearance", 2, 9.0, 9.0, None),
        ("flatness", "", 1, None, None, None),
        ("countersink", "M8 ISO 10642", 2, 18.25, 9.0, "B"), ("deburr", "", 2, None, None, None),
        ("inspect", "", 1, None, None, None),
    ),
}  # fmt: skip
"""Kind, size, count, tool diameter, cut diameter, side, in order."""


@pytest.fixture(scope="module")
def bench():
    return checklist_job(read_job(load_job(JOB)))


@pytest.mark.parametrize("name", SHEETS)
def test_bench_sheet(bench, name):
    (sheet,) = [part for part in bench.parts if part.name == name]
    found = [(str(s.kind), s.size, s.count, s.tool_dia_mm, s.cut_dia_mm, s.side) for s in sheet.steps]
    assert [row[:3] for row in found] == [row[:3] for row in SHEETS[name]]
    for got, expected in zip(found, SHEETS[name], strict=True):
        assert got[3:5] == tuple(None if v is None else pytest.approx(v, abs=0.001) for v in expected[3:5])
        assert got[5] == expected[5]
    assert not any(step.problem for step in sheet.steps)


def test_handed_plates_are_sunk_from_their_own_outside(bench):
    (plate,) = [part for part in bench.parts if part.name == "side_plate"]
    assert (plate.quantity, plate.quantity_opposite) == (6, 6)
    sink = next(step for step in plate.steps if step.kind == "countersink")
    assert "on turned-over pieces (6) from side B as drawn" in sink.note


def test_the_joint_of_the_side_plates_closes(bench):
    """Worked by hand in tests/bench/test_joints.py: grip 4, 5 mm of thread wanted, 6 there: M5 x 10."""
    (joint,) = bench.joints
    assert joint.closes
    assert (joint.buy, joint.count, joint.grip_mm) == ("countersunk screw M5 ISO 10642 x 10 mm", 2, 4.0)


def test_the_kit_counts_all_pieces(bench):
    """M5: 2 in 6 quadrants, 2 in 12 lower links, 1 in 12 upper links: 48; sinks: 2 in 12 plates, 2 in 12 skids."""
    uses = {tool.name: tool.uses for tool in bench.tools}
    assert uses["tap M5"] == 48
    assert uses["reamer 12 H7"] == 48
    assert uses["countersink 90°, 11.47 mm or larger"] == 24
    assert uses["boring head, set to 22 N7"] == 12
