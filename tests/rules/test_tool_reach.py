"""tool-reach: told where no corner, slot or hole says the same, and only there."""

from dataclasses import replace
from pathlib import Path

import pytest

from flatprep.job.corners import Corners
from flatprep.job.values import JobPart
from flatprep.profile.process import Band, Terms
from flatprep.rules import run
from tests.measure.shapes import chorded, circle, obround, part, path, rectangle
from tests.rules.setting import PLATE, context, found, laser, router

SLOTS = {"slot_min": 3.0, "hole_min": 3.0}


def rules(*holes, outer=PLATE, limits=SLOTS, job_part=None):
    process = replace(router(3.0), general=Terms((Band(limits, {}, {}),)))
    return [f.rule for f in run(context(part(outer, *holes), process=process, job_part=job_part))]


def test_a_fillet_of_fine_chords_is_told_once_a_corner():
    """No vertex of it turns sharply: r 0.5 where the cutter has 1.5 leaves 2 (1 - π / 4) = 0.429 mm²."""
    ctx = context(part(PLATE, chorded(rectangle(40, 20, 20, 20, 0.5), 0.002)), process=router(3.0))
    told = found("tool-reach", ctx)
    assert [f.measured for f in told] == pytest.approx([0.429] * 4, rel=0.05)
    assert {f.unit for f in told} == {"mm²"}
    assert "0.41 mm deep" in told[0].message


@pytest.mark.parametrize(
    ("hole", "rule", "count"),
    [
        pytest.param(rectangle(40, 20, 20, 20), "inside-corner", 4, id="corners"),
        pytest.param(rectangle(40, 20, 20, 20, 0.5), "inside-corner", 4, id="fillets"),
        pytest.param(obround(50, 30, 20, 2.9), "narrow-slot", 1, id="slot"),
        pytest.param(circle(50, 30, 1.4), "small-hole", 1, id="hole"),
        pytest.param(rectangle(40, 20, 2.9, 2.9), "small-hole", 1, id="square hole"),
    ],
)
def test_nothing_is_told_twice(hole, rule, count):
    assert rules(hole) == [rule] * count


NOTCH = path((0, 0), (40, 0), (40, 20), (42.9, 20), (42.9, 0), (100, 0), (100, 60), (0, 60))


@pytest.mark.parametrize(("limits", "rule"), [(SLOTS, "narrow-slot"), ({}, "tool-reach")])
def test_a_notch_that_the_cutter_does_not_enter_is_told_once(limits, rule):
    """Its corners are no matter of their own; where no limit forbids it, it is told as a region."""
    assert rules(outer=NOTCH, limits=limits) == [rule]


def test_a_gap_that_grows_narrow():
    """From 4 mm to 2 mm: its narrow end is told by its width, the wide one by its corners."""
    wedge = path((30, 28), (70, 29), (70, 31), (30, 32))
    assert rules(wedge) == ["narrow-slot", "inside-corner", "inside-corner"]


def test_corners_that_do_not_matter_are_not_told_as_regions():
    job_part = JobPart(Path("plate.dxf"), "plate", None, 3.0, router(3.0), corners=Corners.NONE)
    assert rules(rectangle(40, 20, 20, 20), job_part=job_part) == []


def test_a_laser_enters_everywhere():
    shape = part(PLATE, chorded(rectangle(40, 20, 20, 20, 0.5), 0.002))
    assert found("tool-reach", context(shape, process=laser())) == []
