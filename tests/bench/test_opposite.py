"""The other hand of a handed pair."""

import pytest

from flatprep.bench.checklist import checklist
from flatprep.bench.opposite import opposite_part, opposite_steps
from flatprep.model.work import StepKind
from tests.bench.parts import bench, line, plate, with_bends, work

PART = with_bends(plate(100, 60, (30, 20, 5.5), (80, 40, 9)), line(10, 0, 10, 60))


def test_the_part_is_mirrored_with_its_holes_and_lines():
    found = opposite_part(PART)
    assert found.outer.bounds == pytest.approx((-100, 0, 0, 60))
    assert [hole.circle for hole in found.holes] == [pytest.approx((-30, 20, 2.75)), pytest.approx((-80, 40, 4.5))]
    assert found.bends[0].xyb[:, 0].tolist() == [-10, -10]
    assert found.area_mm2 == pytest.approx(PART.area_mm2, rel=1e-12)


def test_material_still_lies_to_the_left():
    assert all(hole.xyb[:, 2].max() < 0 for hole in opposite_part(PART).holes)


def test_edges_keep_their_handles():
    """The edge on the right of the drawing lies on the left of its mirror image."""
    part = plate(100, 60)
    named = type(part.outer)(part.outer.xyb, ("bottom", "right", "top", "left"))
    found = opposite_part(type(part)("p", named)).outer
    for k, name in enumerate(found.handles):
        x0, y0 = found.xyb[k, :2]
        x1, y1 = found.xyb[(k + 1) % 4, :2]
        middle = ((x0 + x1) / 2, (y0 + y1) / 2)
        assert middle == {"bottom": (-50, 0), "right": (-100, 30), "top": (-50, 60), "left": (0, 30)}[name]


def test_twice_is_the_part_itself():
    again = opposite_part(opposite_part(PART))
    assert again.outer.bounds == PART.outer.bounds
    assert again.holes[0].circle == PART.holes[0].circle


def test_steps_are_mirrored_and_their_side_is_the_face_that_is_seen():
    sunk = work("countersink", "M5 ISO 10642", hole_mm=5.5, side="A")
    (found,) = checklist([bench(PART, sunk, thickness=5.0, quantity_opposite=2)]).parts
    step = next(s for s in opposite_steps(found.steps) if s.kind is StepKind.COUNTERSINK)
    assert (step.at, step.side) == (((-30, 20),), "A")
    assert "turned-over" not in step.note
    assert "to 11.47 mm at the face" in step.note
