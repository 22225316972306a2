"""Slots for the sheet made as wide as asked, against areas worked out by hand."""

import numpy as np
import pytest

from flatprep.measure.part import MeasuredPart
from flatprep.measure.slots import resized, sheet_slots
from tests.measure.shapes import moved, obround, part, path, rectangle

PLATE = rectangle(0, 0, 100, 60)
NOTCHED = path((0, 0), (50, 0), (50, 20), (53, 20), (53, 0), (100, 0), (100, 60), (0, 60))


def resize(shape, width, nominal=3.0):
    measured = MeasuredPart(shape)
    return resized(measured, sheet_slots(measured, nominal), width)


@pytest.mark.parametrize("turn", [0.0, 17.0])
@pytest.mark.parametrize("width", [2.8, 3.2])
def test_a_window_keeps_its_middle_and_its_length(width, turn):
    slot = moved(rectangle(40, 20, 20, 3), turn)
    after, told = resize(part(moved(PLATE, turn), slot), width)
    assert [(one.slot.width_mm, one.width_mm, one.why_not) for one in told] == [(pytest.approx(3.0), width, "")]
    (hole,) = MeasuredPart(after).holes
    assert (hole.width_mm, hole.length_mm) == pytest.approx((width, 20.0))
    assert hole.at == pytest.approx(told[0].slot.at)
    assert after.area_mm2 == pytest.approx(6000 - 20 * width)


def test_a_notch_in_the_edge():
    """20 mm deep; the edges beside its mouth and its ground get longer or shorter, nothing else moves."""
    after, told = resize(part(NOTCHED), 3.3)
    assert after.area_mm2 == pytest.approx(6000 - 20 * 3.3)
    assert [row[:2] for row in after.outer.xyb.tolist()] == [
        pytest.approx(at)
        for at in ((0, 0), (49.85, 0), (49.85, 20), (53.15, 20), (53.15, 0), (100, 0), (100, 60), (0, 60))
    ]
    assert told[0].slot.at == pytest.approx((51.5, 10.0))


def dogboned(width):
    """A slot of 20 mm with four reliefs of 0.5 mm radius, half circles in its long walls."""
    low, high = 30 - width / 2, 30 + width / 2
    return path(
        (40, low, 1.0), (41, low), (59, low, 1.0), (60, low), (60, high, 1.0), (59, high), (41, high, 1.0), (40, high),
    )  # fmt: skip


def test_reliefs_move_with_their_walls():
    shape = part(PLATE, dogboned(3.0))
    after, told = resize(shape, 2.8)
    assert [one.why_not for one in told] == [""]
    assert after.holes[0].xyb == pytest.approx(part(PLATE, dogboned(2.8)).holes[0].xyb)


def test_chamfers_at_the_mouth_move_with_their_walls():
    outer = path((0, 0), (49, 0), (50, 1), (50, 20), (53, 20), (53, 1), (54, 0), (100, 0), (100, 60), (0, 60))
    after, told = resize(part(outer), 3.4)
    assert [one.why_not for one in told] == [""]
    assert after.outer.xyb[1:7, 0] == pytest.approx([48.8, 49.8, 49.8, 53.2, 53.2, 54.2])
    assert after.outer.xyb[:, 1] == pytest.approx(outer[:, 1])


def test_two_notches_with_a_tooth_between():
    outer = path(
        (0, 0), (50, 0), (50, 20), (53, 20), (53, 0), (57, 0), (57, 20), (60, 20), (60, 0), (100, 0), (100, 60), (0, 60)
    )
    after, told = resize(part(outer), 3.2)
    assert len(told) == 2
    assert after.area_mm2 == pytest.approx(6000 - 2 * 20 * 3.2)


@pytest.mark.parametrize(
    ("shape", "count"),
    [
        pytest.param(part(PLATE, rectangle(40, 20, 20, 3.26)), 0, id="not for the sheet"),
        pytest.param(part(PLATE, rectangle(40, 20, 20, 3.24)), 1, id="nearly"),
        pytest.param(part(PLATE, rectangle(40, 20, 5.9, 3)), 0, id="a square hole"),
        pytest.param(part(PLATE, obround(50, 30, 20, 3)), 0, id="an obround"),
        pytest.param(
            part(path((0, 0), (50, 0), (50, 3), (53, 3), (53, 0), (100, 0), (100, 60), (0, 60))), 0, id="tooth"
        ),
    ],
)
def test_what_is_a_slot_for_the_sheet(shape, count):
    assert len(sheet_slots(MeasuredPart(shape), 3.0)) == count


def test_a_slot_of_that_width_stays():
    shape = part(PLATE, rectangle(40, 20, 20, 3))
    after, told = resize(shape, 3.0005)
    assert after is shape
    assert told == []


def test_a_notch_in_a_round_edge_is_left_and_told():
    """Its walls end in arcs: they would have to be cut anew."""
    rise = np.sqrt(40**2 - 1.5**2)
    half = np.tan((np.pi - np.arcsin(1.5 / 40)) / 4)
    notched = path((-1.5, rise, half), (0, -40, half), (1.5, rise), (1.5, 20), (-1.5, 20))
    shape = part(notched)
    assert shape.area_mm2 == pytest.approx(np.pi * 40**2 - 3 * 20, rel=1e-3)
    after, told = resize(shape, 3.2)
    assert after is shape
    assert [one.why_not for one in told] == ["its side does not end in straight edges across it"]
