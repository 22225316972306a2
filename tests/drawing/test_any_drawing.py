"""Whatever stands in a drawing, damaged or not: parts that can be measured, or one clear message."""

import math
from pathlib import Path
from random import Random

import ezdxf
import pytest
from hypothesis import HealthCheck, given, settings

from flatprep.api.lint import LintTask, lint_one
from flatprep.base.errors import FlatprepError
from flatprep.model.linted import Linted
from flatprep.profile.process_load import load_process
from flatprep.repair.clean import repair
from flatprep.repair.values import RepairOptions
from tests.damage import damaged
from tests.strategies import add, drawings

OURS = sorted((Path(__file__).parents[1] / "drawings").glob("*.dxf"))
PROCESS = load_process("fibre-laser", ())
HOUSE = settings(
    max_examples=max(80, settings.default.max_examples),
    suppress_health_check=[HealthCheck.function_scoped_fixture, HealthCheck.too_slow, HealthCheck.data_too_large],
)


def answered(path):
    """What lint says of a drawing is whole: finite figures, words where something was left out."""
    got = lint_one(LintTask(path, process=PROCESS, thickness_mm=3.0))
    if not isinstance(got, Linted):
        assert str(path) in got.message
        assert len(got.message) < 400
        return None
    for part in got.drawing.parts:
        figures = (part.area_mm2, part.cut_length_mm, *part.size_mm)
        assert all(map(math.isfinite, figures)), part.name
        assert part.area_mm2 > 0.0
    for finding in got.findings:
        assert finding.message
        assert all(v is None or math.isfinite(v) for v in (finding.measured, finding.limit))
    for skipped in got.drawing.skipped:
        assert skipped.reason
    return got


@HOUSE
@given(doc=drawings())
def test_any_drawing(tmp_path, doc):
    path = tmp_path / "any.dxf"
    doc.saveas(path)
    answered(path)


@pytest.mark.parametrize("far", [1e300, float("inf"), float("nan")])
@pytest.mark.parametrize("kind", ["ellipse", "spline"])
def test_curves_out_of_all_bounds_are_left_out_and_said(tmp_path, kind, far):
    made = {"layer": "0", "at": (0.0, 0.0), "axis": (far, 5.0), "ratio": 0.5, "closed": False}
    made["points"] = [(0.0, 0.0), (far, 1.0), (5.0, 5.0), (9.0, 0.0)]
    doc = ezdxf.new("R2010")
    add(doc.modelspace(), "box", {"layer": "0", "at": (0.0, 0.0), "size": (50.0, 30.0)})
    add(doc.modelspace(), kind, made)
    doc.saveas(tmp_path / "far.dxf")
    got = answered(tmp_path / "far.dxf")
    assert len(got.drawing.parts) == 1
    assert [(s.kind, "out of all bounds" in s.reason) for s in got.drawing.skipped] == [(kind.upper(), True)]


@pytest.mark.parametrize("seed", range(40))
def test_damaged_drawing(tmp_path, seed):
    rng = Random(seed)
    path = tmp_path / "damaged.dxf"
    path.write_bytes(damaged(rng.choice(OURS).read_bytes(), rng))
    answered(path)
    text, message = mended(path)
    assert text.rstrip().endswith("EOF") if text else str(path) in message


def mended(path):
    """The repaired drawing, or the message of our own error."""
    try:
        return repair(path, RepairOptions()).text, ""
    except FlatprepError as err:
        return "", err.message
