"""Two revisions: every change is a number that was drawn, wherever and however the new part lies."""

from math import pi, radians, sqrt

import pytest
from ezdxf.math import Matrix44

from flatprep.compare.compare import compare
from flatprep.compare.values import HoleChange, Task
from flatprep.drawing.read import read
from tests.drawing.draw import box, drawn


def plate(msp, holes=((10, 10, 5), (10, 50, 5), (90, 10, 5), (70, 40, 16)), width=100.0):
    """A plate of `width` x 60 with round holes (x, y, diameter), no two of which make it symmetrical."""
    msp.add_lwpolyline([(0, 0), (width, 0), (width, 60), (0, 60)], close=True)
    for x, y, d in holes:
        msp.add_circle((x, y), d / 2)


HOLES = ((10, 10, 5), (10, 50, 5), (90, 10, 5), (70, 40, 16))
MOTIONS = {
    "in place": Matrix44(),
    "moved": Matrix44.translate(313.7, -42.5, 0),
    "turned": Matrix44.z_rotate(radians(127.3)),
    "turned over": Matrix44.chain(
        Matrix44.scale(-1, 1, 1), Matrix44.z_rotate(radians(33)), Matrix44.translate(9, 5, 0)
    ),
}


@pytest.fixture
def hold(tmp_path):
    """Compare two painted drawings, the new one moved."""

    def call(old, new, motion="in place"):
        def laid(msp):
            new(msp)
            for entity in msp:
                entity.transform(MOTIONS[motion])

        return compare(read(drawn(tmp_path, old, name="old.dxf")), read(drawn(tmp_path, laid, name="new.dxf")))

    return call


def changed(change):
    return [p for p in change.holes if p.change is not HoleChange.SAME]


every_motion = pytest.mark.parametrize("motion", MOTIONS)


@every_motion
def test_the_same_part_is_the_same_wherever_it_lies(hold, motion):
    found = hold(plate, plate, motion)
    (change,) = found.changes
    assert found.same
    assert change.same_place == (motion == "in place")
    assert change.motion.mirrored == (motion == "turned over")
    assert change.rework.possible
    assert change.rework.steps == ()


@every_motion
def test_a_moved_hole(hold, motion):
    """By 1.2 and 0.9 mm; the cut piece is scrap: the old hole stays where it is."""
    new = [(71.2, 40.9, 16) if h[2] == 16 else h for h in HOLES]
    (change,) = hold(plate, lambda msp: plate(msp, new), motion).changes
    (pair,) = changed(change)
    assert pair.change is HoleChange.MOVED
    assert pair.step == pytest.approx((1.2, 0.9), abs=1e-3)
    assert change.edges == ()
    (gap,) = change.rework.missing
    # the widest gap between a circle and itself moved by d is d
    assert gap.depth_mm == pytest.approx(1.5, abs=0.02)


@every_motion
def test_a_larger_and_a_further_hole_can_be_drilled(hold, motion):
    new = [*((x, y, 6.6 if d == 5 else d) for x, y, d in HOLES), (40, 30, 4.2)]
    (change,) = hold(plate, lambda msp: plate(msp, new), motion).changes
    assert sorted(p.change for p in changed(change)) == ["appeared", "resized", "resized", "resized"]
    assert change.rework.possible
    drill = [s for s in change.rework.steps if s.task is Task.DRILL]
    opened = [s for s in change.rework.steps if s.task is Task.OPEN_UP]
    assert [(s.to_mm, s.at) for s in drill] == [(pytest.approx(4.2), pytest.approx((40, 30), abs=1e-3))]
    assert [(s.from_mm, s.to_mm) for s in opened] == [(pytest.approx(5), pytest.approx(6.6))] * 3


def test_a_hole_that_went_or_became_smaller_is_scrap(hold):
    for new in (HOLES[1:], [(10, 10, 4), *HOLES[1:]]):
        (change,) = hold(plate, lambda msp, new=new: plate(msp, new)).changes
        assert not change.rework.possible
    (change,) = hold(plate, lambda msp: plate(msp, HOLES[1:])).changes
    assert [p.change for p in changed(change)] == [HoleChange.GONE]
    assert change.rework.missing[0].depth_mm == pytest.approx(2.5, abs=0.02)
    assert change.rework.missing[0].area_mm2 == pytest.approx(pi * 6.25, rel=0.01)


def chamfered(msp):
    msp.add_lwpolyline([(0, 0), (100, 0), (100, 45), (85, 60), (0, 60)], close=True)
    for x, y, d in HOLES:
        msp.add_circle((x, y), d / 2)


@every_motion
def test_a_corner_cut_off(hold, motion):
    (change,) = hold(plate, chamfered, motion).changes
    (edge,) = change.edges
    assert not edge.added
    assert edge.depth_mm == pytest.approx(15 / sqrt(2), abs=0.02)
    assert edge.length_mm == pytest.approx(15 * sqrt(2), abs=0.06)
    assert edge.area_mm2 == pytest.approx(112.5, rel=0.01)
    (step,) = change.rework.steps
    assert (step.task, step.to_mm) == (Task.RECUT, edge.depth_mm)


def test_a_corner_put_back_is_scrap(hold):
    (change,) = hold(chamfered, plate).changes
    assert [e.added for e in change.edges] == [True]
    assert not change.rework.possible


@pytest.mark.parametrize("width", [99.5, 100.4])
def test_a_stretched_plate(hold, width):
    (change,) = hold(plate, lambda msp: plate(msp, width=width)).changes
    (edge,) = change.edges
    assert edge.added == (width > 100)
    assert edge.depth_mm == pytest.approx(abs(width - 100), abs=0.01)
    assert edge.length_mm == pytest.approx(60, abs=1.0)
    assert change.rework.possible == (width < 100)


@pytest.mark.parametrize(("by", "seen"), [(0.015, False), (0.06, True)])
def test_changes_below_the_tolerance_are_none(hold, by, seen):
    found = hold(plate, lambda msp: plate(msp, [(x + by, y, d) for x, y, d in HOLES]))
    assert found.same is not seen


def test_a_smaller_part_that_fits_only_when_it_is_moved(hold):
    """A plate drawn from another corner: laid in a corner of the old one it fits."""

    def small(msp):
        box(msp, 30, 30, 90, 50)

    found = hold(lambda msp: box(msp, 0, 0, 100, 60), small)
    (change,) = found.changes
    assert change.rework.possible
    assert not found.same


def test_slots_and_windows(hold):
    def slotted(msp):
        plate(msp)
        msp.add_lwpolyline([(20, 28, 0), (34, 28, 1), (34, 34, 0), (20, 34, 1)], format="xyb", close=True)

    (change,) = hold(plate, slotted).changes
    (pair,) = changed(change)
    assert (pair.change, pair.new.width_mm, pair.new.length_mm) == (
        HoleChange.APPEARED,
        pytest.approx(6),
        pytest.approx(20),
    )
    (step,) = change.rework.steps
    assert (step.task, step.to_mm, step.length_mm) == (Task.CUT_HOLE, pytest.approx(6), pytest.approx(20))


def test_a_round_hole_becomes_square(hold):
    def square(msp):
        plate(msp, HOLES[:3])
        box(msp, 62, 32, 16, 16)

    (change,) = hold(plate, square).changes
    (pair,) = changed(change)
    assert pair.change is HoleChange.RESHAPED
    assert change.rework.possible


def test_bend_lines_and_marks(hold):
    def bent(y, layer):
        def paint(msp):
            plate(msp)
            msp.add_line((0, y), (100, y), dxfattribs={"layer": layer})

        return paint

    (change,) = hold(bent(20, "bend"), bent(20, "bend"), "turned").changes
    assert change.same
    (change,) = hold(bent(20, "bend"), bent(25, "bend")).changes
    assert (len(change.bends.appeared), len(change.bends.gone)) == (1, 1)
    assert not change.same
    (change,) = hold(plate, bent(20, "engrave")).changes
    assert (len(change.marks.appeared), len(change.marks.gone)) == (1, 0)


def test_several_parts_are_paired_and_counted(hold):
    def row(*widths):
        def paint(msp):
            for k, width in enumerate(widths):
                box(msp, 200 * k, 0, width, 50)
                msp.add_circle((200 * k + 20, 20), width / 10)

        return paint

    found = hold(row(80, 60, 120), row(80, 61, 120, 40))
    assert [c.same for c in found.changes] == [True, False, True]
    assert [p.size_mm[0] for p in found.appeared] == pytest.approx([40])
    found = hold(row(80, 60, 120), row(80, 60))
    assert [p.size_mm[0] for p in found.gone] == pytest.approx([120])
    assert not found.same


def test_a_plate_with_only_round_holes_on_a_round_edge(hold):
    def disc(holes):
        def paint(msp):
            msp.add_circle((0, 0), 50)
            for x, y, d in holes:
                msp.add_circle((x, y), d / 2)

        return paint

    ring = [(30, 0, 6), (0, 30, 6), (-30, 0, 6), (10, -30, 9)]
    assert hold(disc(ring), disc(ring), "turned over").same
    (change,) = hold(disc(ring), disc([*ring, (5, 5, 3)]), "turned").changes
    (pair,) = changed(change)
    assert (pair.change, pair.at) == (HoleChange.APPEARED, pytest.approx((5, 5), abs=1e-3))


@pytest.mark.parametrize(("diameter", "possible"), [(4.94, True), (4.86, False)])
def test_material_missing_below_the_truth_of_a_cut_edge_is_no_loss(hold, diameter, possible):
    """0.03 mm a side is within what a cut edge is true to, 0.07 mm is not."""
    (change,) = hold(plate, lambda msp: plate(msp, [(10, 10, diameter), *HOLES[1:]])).changes
    assert [p.change for p in changed(change)] == [HoleChange.RESIZED]
    assert change.rework.possible is possible


@pytest.mark.parametrize(("far", "kinds"), [(15, ["moved"]), (70, ["appeared", "gone"])])
def test_a_hole_far_away_is_another_one(hold, far, kinds):
    new = [(10 + far, 10, 5), *HOLES[1:2], (90, 30, 5), HOLES[3]]
    old = [HOLES[0], HOLES[1], (90, 30, 5), HOLES[3]]
    (change,) = hold(lambda msp: plate(msp, old), lambda msp: plate(msp, new)).changes
    assert sorted(p.change for p in changed(change)) == kinds


def test_rework_may_need_another_way_of_laying_the_part(hold):
    """In place the old hole is in the way; turned by half a turn the new, larger one lies over it."""

    def symmetric(*holes):
        def paint(msp):
            box(msp, 0, 0, 100, 60)
            for x, y, d in holes:
                msp.add_circle((x, y), d / 2)

        return paint

    (change,) = hold(symmetric((10, 10, 5)), symmetric((90, 50, 9))).changes
    assert change.same_place
    assert change.rework.possible
    assert change.rework.motion.turn_deg == pytest.approx(180) or change.rework.motion.mirrored
    (step,) = change.rework.steps
    assert (step.task, step.from_mm, step.to_mm) == (Task.OPEN_UP, pytest.approx(5), pytest.approx(9))
