"""Every document that a command writes keeps its schema."""

import json
import subprocess
import sys
from pathlib import Path

import pytest
from jsonschema import Draft202012Validator

from flatprep.report.schema import schema

JOB = str(Path(__file__).parents[2] / "sample_parts" / "job.toml")
RECEIVED = str(Path(__file__).parents[2] / "sample_parts" / "as_received")


def faults(kind: str, document: object) -> list[str]:
    found = Draft202012Validator(schema(kind)).iter_errors(document)
    return [f"{'/'.join(map(str, fault.path))}: {fault.message}" for fault in found]


def flatprep(*words: str) -> str:
    command = [sys.executable, "-m", "flatprep", *words]
    done = subprocess.run(command, capture_output=True, encoding="utf-8", timeout=300)
    assert done.returncode in (0, 1), done.stderr
    assert "Traceback" not in done.stderr, done.stderr
    return done.stdout


@pytest.mark.parametrize(
    ("kind", "words"),
    [
        ("lint", ("lint", JOB)),
        ("lint", ("lint", RECEIVED, "--process", "fibre-laser")),
        ("checklist", ("checklist", JOB)),
        ("alternatives", ("alternatives", JOB)),
        ("lookup", ("lookup", "thread", "M6")),
        ("lookup", ("lookup", "clearance", "1/4")),
        ("lookup", ("lookup", "fit", "22 N7")),
        ("lookup", ("lookup", "bearing", "608")),
        ("lookup", ("lookup", "nut", "M8")),
        ("lookup", ("lookup", "countersink", "M5 ISO 10642")),
        ("lookup", ("lookup", "shoulder-screw", "8")),
        ("lookup", ("lookup", "bend", "--thickness", "2", "--radius", "2", "--angle", "90")),
        ("lookup", ("lookup", "gauge", "16", "--material", "mild-steel")),
        ("lookup", ("lookup", "tolerance", "iso2768 m 35")),
    ],
    ids=lambda value: value if isinstance(value, str) else " ".join(Path(word).name for word in value),
)
def test_standard_output_is_one_document_of_its_schema(kind, words):
    assert faults(kind, json.loads(flatprep(*words, "--format", "json"))) == []


@pytest.mark.parametrize("name", ["side_plate", "wheel_disc", "link_lower", "tray_bracket", "tray_floor"])
def test_repair_keeps_its_schema(name, tmp_path):
    words = ("repair", f"{RECEIVED}/{name}.dxf", "--out", str(tmp_path / "clean.dxf"), "--format", "json")
    assert faults("repair", json.loads(flatprep(*words))) == []


def test_coupon_keeps_its_schema(tmp_path):
    words = ("coupon", JOB, "--out", str(tmp_path), "--format", "json")
    assert faults("coupon", json.loads(flatprep(*words))) == []


def test_prepare_writes_documents_of_their_schemas(tmp_path):
    out = tmp_path / "out"
    flatprep("prepare", JOB, "--out", str(out), "--seconds", "2")
    for kind in ("lint", "layout", "checklist", "estimate"):
        assert faults(kind, json.loads((out / f"{kind}.json").read_text(encoding="utf-8"))) == [], kind
    page = (out / "report.html").read_text(encoding="utf-8")
    # twelve side plates fill no full sheet: what is left of it is shown
    assert "<dt>Offcut</dt>" in page
    for name in ("report.html", "parts.csv", "findings.csv", "steps.csv", "sheets.csv", "bench/side_plate.html"):
        assert (out / name).stat().st_size > 0
