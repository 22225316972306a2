"""What is cut where bench work opens holes up."""

import pytest

from flatprep.base.errors import JobError
from flatprep.bench.pilots import MARK_LAYER, apply_pilots
from flatprep.job.values import Pilots
from tests.bench.parts import bench, plate, work

PART = plate(200, 60, (10, 12, 4.2), (40, 12, 7.5), (70, 30, 21), (100, 12, 5.5), (130, 12, 5.0), (160, 30, 10))
WORKS = (
    work("tap", "M5", hole_mm=4.2), work("ream", "8 H7", hole_mm=7.5), work("bore", "22 N7", hole_mm=21),
    work("countersink", "M5 ISO 10642", hole_mm=5.5), work("clearance", "M5", hole_mm=5.0),
)  # fmt: skip


def diameters(part):
    return sorted(round(2 * hole.circle[2], 3) for hole in part.holes)


def test_as_drawn_changes_nothing():
    found = apply_pilots(bench(PART, *WORKS))
    assert found.part is PART
    assert (found.changes, found.marks) == ((), ())


def test_no_work_changes_nothing():
    assert apply_pilots(bench(PART, pilots=Pilots.MARK)).part is PART


def test_cut_opens_what_is_to_be_opened():
    """S355, 6 mm: M5 drill 4.2 less 1.25 is 2.95, under the 3 mm that the laser cuts there: marked. 8 H7: 7.5 will do.
    22 N7: 21 will do. M5 clearance 5.5: the hole of 5.0 is cut at 5.5 at once; the sunk hole has its size."""
    found = apply_pilots(bench(PART, *WORKS, pilots=Pilots.CUT, material="s355", thickness=6.0))
    assert diameters(found.part) == [5.5, 5.5, 7.5, 10, 21]
    assert found.marks == ((10, 12),)
    assert any("cut at 5.5 mm for clearance M5" in told for told in found.changes)
    assert any("centre-marked for tap M5" in told for told in found.changes)
    assert found.part.outer is PART.outer


def test_cut_makes_a_pilot_for_a_drilled_out_thread():
    """8 mm mild steel, M8: drill 6.8 less a tenth: 6.12."""
    part = plate(100, 50, (10, 12, 6.8))
    found = apply_pilots(bench(part, work("tap", "M8", hole_mm=6.8), pilots=Pilots.CUT, thickness=8.0))
    assert diameters(found.part) == [6.12]
    x, y, _ = found.part.holes[0].circle
    assert (x, y) == pytest.approx((10, 12))
    assert found.part.holes[0].layers == part.holes[0].layers


def test_cut_holes_run_as_holes_do():
    found = apply_pilots(
        bench(plate(100, 50, (10, 12, 6.8)), work("tap", "M8", hole_mm=6.8), pilots=Pilots.CUT, thickness=8.0)
    )
    assert found.part.area_mm2 == pytest.approx(5000 - 3.14159265 * 3.06**2, abs=1e-4)
    assert all(found.part.holes[0].xyb[:, 2] < 0)  # clockwise: material to the left


def test_mark_leaves_only_centres_of_worked_holes():
    found = apply_pilots(bench(PART, *WORKS, pilots=Pilots.MARK))
    assert diameters(found.part) == [5.5, 10]
    assert set(found.marks) == {(10, 12), (40, 12), (70, 30), (130, 12)}
    strokes = [curve for curve in found.part.marks if curve.layer == MARK_LAYER]
    assert len(strokes) == 8
    middles = {tuple((curve.xyb[0, :2] + curve.xyb[1, :2]) / 2) for curve in strokes}
    assert middles == set(found.marks)


def test_a_hole_is_named_once():
    part = plate(100, 50, (10, 12, 4.2))
    works = (work("tap", "M5", hole_mm=4.2), work("countersink", "8 x 90", hole_mm=4.2))
    found = apply_pilots(bench(part, *works, pilots=Pilots.MARK))
    assert len(found.changes) == 1


def test_wrong_work_is_told():
    with pytest.raises(JobError, match="hole = 9"):
        apply_pilots(bench(PART, work("tap", "M5", hole_mm=9), pilots=Pilots.CUT))


def test_a_hole_drawn_too_large_is_put_right_when_pilots_are_cut():
    """M5 in a hole drawn 6: cut at the tap drill instead, and told."""
    found = apply_pilots(bench(plate(100, 50, (10, 12, 6)), work("tap", "M5", hole_mm=6), pilots=Pilots.CUT))
    assert diameters(found.part) == [4.2]
    assert found.changes == ("hole of 6 mm at (10.000, 12.000) cut at 4.2 mm for tap M5",)
