"""Coupons: which sizes are tried, where they lie, and that a process can cut what its coupon asks for."""

from dataclasses import replace
from itertools import pairwise

import numpy as np
import pytest

from flatprep.bench.coupon_plates import CHAMFER_MM, MOST_MM, Room, plates
from flatprep.bench.trials import Sheet, trials
from flatprep.measure.part import MeasuredPart
from flatprep.model.coupon import Trial, TrialKind
from tests.bench.parts import bench, plate, work
from tests.measure.shapes import contour, rectangle

ROOM = Room(web_mm=4.0, part_mm=30.0, spacing_mm=5.0)


def slotted(*widths):
    shape = plate(200, 60)
    holes = (contour(rectangle(20 + 40 * k, 20, 30, w), hole=True) for k, w in enumerate(widths))
    return replace(shape, holes=tuple(holes))


def trial(kind, *sizes):
    return Trial(kind, "what goes in", sizes[len(sizes) // 2], sizes, ("plate",))


def test_each_width_once_with_its_steps():
    found, left_out = trials([bench(slotted(3.0, 3.0, 3.1, 5.0, 4.0))], [Sheet(3.0), Sheet(4.0)])
    assert [one.wanted_mm for one in found] == pytest.approx([3.0, 3.1, 4.0])
    assert found[0].sizes_mm == pytest.approx((2.8, 2.9, 3.0, 3.1, 3.2))
    assert [one.mate for one in found] == ["a sheet of 3 mm", "a sheet of 3 mm", "a sheet of 4 mm"]
    assert left_out == ()


def test_the_fitted_width_where_the_job_has_slots_fitted():
    (one,), _ = trials([bench(slotted(3.0, 3.1))], [Sheet(3.0, 2.9, 0.15)])
    assert one.wanted_mm == pytest.approx(3.05)
    assert one.mate == "a sheet of 3 mm, which measures 2.9 mm"


def test_bores_that_are_fitted_and_no_others():
    part = plate(200, 60, (20, 20, 7.5), (60, 20, 7.5), (100, 20, 21.0), (140, 20, 5.5), (180, 20, 6.0))
    works = (
        work("ream", "8 H7", hole_mm=7.5),
        work("bore", "22 N7", hole_mm=21.0),
        work("clearance", "M5", hole_mm=5.5),
    )
    found, _ = trials([bench(part, *works)], [Sheet(3.0)])
    assert [(one.kind, one.mate, one.wanted_mm) for one in found] == [("bore", "8 H7", 7.5), ("bore", "22 N7", 21.0)]


def test_what_the_process_does_not_cut_is_left_out():
    """The router's slots begin at 3 mm, one cutter."""
    router = {"process": "router", "material": "birch-ply"}
    (one,), _ = trials([bench(slotted(3.1), **router)], [Sheet(3.0)])
    assert one.sizes_mm == pytest.approx((3.0, 3.1, 3.2, 3.3))
    none, left_out = trials([bench(slotted(2.0), **router)], [Sheet(2.0)])
    assert none == ()
    assert left_out == ("slot of 2 mm for a sheet of 2 mm: the process cuts none below 3 mm",)


def test_notches_and_bores_have_the_sizes_that_stand_beside_them():
    rows = (trial(TrialKind.SLOT, 2.9, 3.0, 3.1), trial(TrialKind.BORE, 7.9, 8.0, 8.1))
    (part,), labels = plates(rows, ROOM, name="coupon", inch=False, layer="NOTE")
    measured = MeasuredPart(part)
    assert sorted(gap.width_mm for gap in measured.slots(5.0)) == pytest.approx([2.9, 3.0, 3.1])
    assert [hole.width_mm for hole in measured.holes] == pytest.approx([7.9, 8.0, 8.1])
    words = [text.text for text in labels]
    assert words == ["slot 3.00", "2.90", "3.00", "3.10", "bore 8.00", "7.90", "8.00", "8.10"]
    for gap in measured.slots(5.0):  # the label stands under its notch
        below = min((t for t in labels if abs(t.at[0] + gap.width_mm / 2 - gap.at[0]) < 1e-6), key=lambda t: -t.at[1])
        assert below.text == f"{gap.width_mm:.2f}"
    assert measured.webs(ROOM.web_mm - 0.01) == ()


def test_the_outline_by_hand():
    """One notch of 3 mm, 12 deep with a round ground; the corner cut off is half a square of 5 mm."""
    (part,), _ = plates([trial(TrialKind.SLOT, 3.0)], ROOM, name="coupon", inch=False, layer="NOTE")
    width, height = part.size_mm
    assert width == pytest.approx(ROOM.part_mm)
    cut = 3 * 12 + np.pi * 1.5**2 / 2 + CHAMFER_MM**2 / 2
    assert part.area_mm2 == pytest.approx(width * height - cut)


def test_inches():
    _, labels = plates([trial(TrialKind.SLOT, 6.35)], ROOM, name="coupon", inch=True, layer="NOTE")
    assert [text.text for text in labels] == ["slot 0.250", "0.250"]


def test_many_rows_go_on_several_plates_that_do_not_touch():
    rows = [trial(TrialKind.SLOT, *(w + d for d in (-0.2, -0.1, 0.0, 0.1, 0.2))) for w in range(2, 12)]
    parts, _ = plates(rows, ROOM, name="coupon", inch=False, layer="NOTE")
    assert len(parts) > 1
    assert [part.name for part in parts] == [f"coupon-{k + 1}" for k in range(len(parts))]
    assert all(part.size_mm[0] <= MOST_MM + 2 * ROOM.web_mm for part in parts)
    boxes = [part.outer.bounds for part in parts]
    assert all(low[3] <= high[1] - ROOM.spacing_mm + 1e-9 for high, low in pairwise(boxes))
