"""The checklist as text, JSON and CSV."""

import csv
import io
import json

from flatprep.bench.checklist import checklist
from flatprep.job.values import JointAsk, JointLayer
from flatprep.model.work import Checklist, PartSteps, Step, StepKind
from flatprep.report.checklist_csv import checklist_csv
from flatprep.report.checklist_json import checklist_document
from flatprep.report.checklist_text import checklist_text
from tests.bench.parts import bench, plate, work

PART = bench(
    plate(100, 50, (10, 12, 4.2), (90, 12, 4.2), (50, 25, 5.5)),
    work("tap", "M5", hole_mm=4.2), work("countersink", "M5 ISO 10642", hole_mm=5.5, side="A"),
    thickness=5.0, quantity_opposite=1,
)  # fmt: skip
JOINT = JointAsk(
    "cover", "M5 ISO 10642",
    (JointLayer("plate", hole_mm=5.5), JointLayer(None, "block", 10.0, 4.2, threaded=True)), count=3,
)  # fmt: skip
LIST = checklist([PART], [JOINT])

STEP_KEYS = {"order", "kind", "size", "tool_dia_mm", "depth_mm", "count", "at", "cut_dia_mm", "side", "note", "caution"}


def test_the_document_has_what_is_promised():
    document = json.loads(json.dumps(checklist_document(LIST)))
    assert document["schema"] == "flatprep-checklist/1"
    (part,) = document["parts"]
    assert (part["name"], part["quantity"], part["quantity_opposite"]) == ("plate", 2, 1)
    assert all(set(step) >= STEP_KEYS for step in part["steps"])
    tap = next(step for step in part["steps"] if step["kind"] == "tap")
    assert (tap["size"], tap["tool_dia_mm"], tap["count"], tap["at"]) == ("M5", 4.2, 2, [[10.0, 12.0], [90.0, 12.0]])
    assert tap["side"] is None
    assert document["cautions"]
    assert {tool["tool"] for tool in document["tools"]} == {"tap M5", "countersink 90°, 11.47 mm or larger"}


def test_joints_are_in_the_document():
    (joint,) = checklist_document(LIST)["joints"]
    assert (joint["name"], joint["count"], joint["closes"], joint["grip_mm"]) == ("cover", 3, True, 5.0)
    assert {check["outcome"] for check in joint["checks"]} <= {"good", "bad", "open"}


def test_the_text_has_boxes_cautions_kit_and_joints():
    text = checklist_text(LIST)
    assert "plate: 2 pieces and 1 turned over" in text
    assert "[ ]  4  countersink M5 ISO 10642: countersink 90°, 11.47 mm or larger" in text
    assert "side A" in text
    assert "kit for the job" in text
    assert "tap M5  (6 x: plate)" in text
    assert "joint cover: closes; 3 pieces of countersunk screw M5 ISO 10642 x" in text
    assert max(len(line) for line in text.splitlines()) <= 120


def test_inch_jobs_are_shown_in_inches():
    text = " ".join(checklist_text(LIST, "in").split())
    assert "cut before to 0.165 in" in text
    assert "(0.394, 0.472), (3.543, 0.472)" in text


def test_the_table_has_one_row_a_step():
    rows = list(csv.DictReader(io.StringIO(checklist_csv(LIST))))
    assert len(rows) == len(LIST.parts[0].steps)
    tap = next(row for row in rows if row["kind"] == "tap")
    assert (tap["part"], tap["size"], tap["tool_dia_mm"], tap["at_mm"]) == ("plate", "M5", "4.2", "(10 12) (90 12)")
    assert (tap["least_mm"], tap["most_mm"]) == ("4.134", "4.334")


def test_a_name_is_no_formula_in_a_spreadsheet():
    step = Step(1, StepKind.DRILL, "@sum", note="-1+2", why="x")
    text = checklist_csv(Checklist((PartSteps("=cmd", 1, (step,)),), ()))
    assert "'=cmd" in text
    assert "'@sum" in text
    assert "'-1+2" in text


def test_a_job_without_work_still_has_its_cautions():
    text = checklist_text(checklist([bench(plate(100, 50))]))
    assert "deburr" in text
    assert "kit for the job" not in text
    assert "Local codes" in text
