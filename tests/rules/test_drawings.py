"""Each drawing says itself what must be found in it and where; anything else is a false alarm."""

from pathlib import Path

import ezdxf
import pytest

from flatprep.drawing.read import ReadOptions, read
from flatprep.model.drawing import Role
from flatprep.model.finding import Severity
from flatprep.rules import run
from flatprep.rules.base import Context
from tests.rules.setting import laser

FOLDER = Path(__file__).parent.parent / "drawings"
FILES = sorted(FOLDER.glob("*.dxf"))
NEAR_MM = 0.6
"""As near as a finding must be told to its place: tapers are told at the middle of what is within 0.02 mm."""


def expected(path):
    texts = ezdxf.readfile(path).modelspace().query('TEXT[layer=="EXPECT"]')
    return sorted((t.dxf.text, t.dxf.insert.x, t.dxf.insert.y) for t in texts)


def told(path):
    drawing = read(path, ReadOptions(units="mm", roles={"EXPECT": Role.IGNORE}))
    loud = [f for f in run(Context(drawing, laser(), None, 3.0)) if f.severity is not Severity.NOTE]
    return sorted((f.rule, *(f.at or (float("nan"),) * 2)) for f in loud if f.rule != "text-not-outlined")


def test_there_are_drawings():
    assert len(FILES) == 8


@pytest.mark.parametrize("path", FILES, ids=lambda p: p.stem)
def test_drawing_carries_its_expectation(path):
    want, got = expected(path), told(path)
    assert [w[0] for w in want] == [g[0] for g in got]
    for (_, x, y), (_, at_x, at_y) in zip(want, got, strict=True):
        assert (at_x, at_y) == (pytest.approx(x, abs=NEAR_MM), pytest.approx(y, abs=NEAR_MM))
