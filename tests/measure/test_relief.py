"""Relieved corners against the circle through a corner."""

from dataclasses import replace

import numpy as np
import pytest

from flatprep.geom import bulge
from flatprep.job.corners import Corners, ReliefKind
from flatprep.measure.part import MeasuredPart
from flatprep.measure.relief import ROOM
from flatprep.measure.relieved import ReliefAsk, relieved
from tests.measure.shapes import circle, moved, part, path, rectangle

R = ROOM * 1.5


def relieve(shape, radius, kind=ReliefKind.DOGBONE, corners=Corners.ALL, web=0.0):
    return relieved(MeasuredPart(shape), ReliefAsk(kind, radius, web, corners))


def pocket(turn=0.0):
    return part(moved(rectangle(0, 0, 100, 60), turn), moved(rectangle(40, 20, 20, 20), turn))


@pytest.mark.parametrize("turn", [0.0, 31.0])
def test_dogbones_open_every_corner(turn):
    opened, told = relieve(pocket(turn), 1.5)
    assert [relief.why_not for relief in told] == [""] * 4
    # at a right angle the circle's diameter lies across the corner: half of it is new, less the triangle under it
    grown = pocket(turn).area_mm2 - opened.area_mm2
    assert grown == pytest.approx(4 * (np.pi * R * R / 2 - R * R))
    assert MeasuredPart(opened).inside_corners(1.5, 0.05) == ()


def test_dogbone_goes_through_the_corner():
    opened, _ = relieve(pocket(), 1.5, corners=((60.0, 40.0),))
    seg = bulge.segments(opened.holes[0].xyb, closed=True)
    arcs = seg.is_arc
    assert arcs.sum() == 2
    assert seg.radius[arcs] == pytest.approx([R, R])
    # on the bisector into the pocket, R from the corner
    assert seg.centre[arcs] == pytest.approx(np.array([[60, 40], [60, 40]]) - R / np.sqrt(2))


def test_dogbone_in_a_corner_of_60_degrees():
    triangle = part(rectangle(-10, -10, 80, 80), path((0, 0), (40, 0), (20, 20 * np.sqrt(3))))
    opened, told = relieve(triangle, 1.5)
    assert [relief.why_not for relief in told] == [""] * 3
    # the arc sweeps 2 π - 2 θ = 240 degrees; it hides the triangle between corner and walls
    sweep, reach = np.radians(240), 2 * R * np.cos(np.radians(30))
    grown = R * R / 2 * (sweep - np.sin(sweep)) - reach * reach / 2 * np.sin(np.radians(60))
    assert triangle.area_mm2 - opened.area_mm2 == pytest.approx(3 * grown)


def test_t_bone_opens_one_wall():
    opened, _ = relieve(pocket(), 1.5, kind=ReliefKind.T_BONE)
    assert pocket().area_mm2 - opened.area_mm2 == pytest.approx(4 * np.pi * R * R / 2)
    x0, y0, x1, y1 = opened.holes[0].bounds
    # each wall keeps its line on one end and is opened at the other
    assert (x0, y0, x1, y1) == pytest.approx((40 - R, 20 - R, 60 + R, 40 + R))


def test_narrow_slots_get_t_bones_in_their_long_walls():
    """A slot of 3 mm: the end is too short for two dogbones, which take 2 r cos 45 degrees each."""
    narrow = part(rectangle(0, 0, 100, 60), rectangle(40, 20, 20, 3))
    opened, told = relieve(narrow, 1.5)
    assert {(relief.kind, relief.why_not) for relief in told} == {(ReliefKind.T_BONE, "")}
    assert opened.holes[0].bounds == pytest.approx((40, 20 - R, 60, 23 + R))
    assert narrow.area_mm2 - opened.area_mm2 == pytest.approx(4 * np.pi * R * R / 2)


def test_short_walls_are_left_and_told():
    """Three of the four corners of a pocket of 3.05 mm: nothing that is wider than its wall goes in."""
    small = part(rectangle(0, 0, 100, 60), rectangle(40, 20, 3.05, 3.05))
    opened, told = relieve(small, 1.5)
    assert [relief.why_not for relief in told] == ["the walls beside it are shorter than the relief"] * 4
    assert opened is small


def test_a_small_pocket_opens_each_wall_once():
    opened, told = relieve(part(rectangle(0, 0, 100, 60), rectangle(40, 20, 4, 4)), 1.5)
    assert {relief.kind for relief in told} == {ReliefKind.T_BONE}
    assert opened.holes[0].bounds == pytest.approx((40 - R, 20 - R, 44 + R, 24 + R))


def test_a_fillet_is_opened_through_the_corner_of_its_walls():
    """What the fillets of 1 mm held goes too: (4 - π) r² in all."""
    drawn = part(rectangle(0, 0, 100, 60), rectangle(40, 20, 20, 20, 1.0))
    opened, told = relieve(drawn, 1.5)
    assert [relief.why_not for relief in told] == [""] * 4
    assert drawn.area_mm2 - opened.area_mm2 == pytest.approx(4 * (np.pi * R * R / 2 - R * R) + 4 - np.pi)


def test_outside_corners_and_wide_curves_stay():
    plain = part(rectangle(0, 0, 100, 60), rectangle(40, 20, 20, 20, 3))
    opened, told = relieve(plain, 1.5)
    assert told == []
    assert opened is plain


NOTCHED = path((0, 0), (40, 0), (40, 20), (60, 20), (60, 0), (100, 0), (100, 60), (0, 60))


@pytest.mark.parametrize(
    ("corners", "count"), [(Corners.ALL, 5), (Corners.SQUARE, 3), (Corners.NONE, 0), (((40.2, 20.1),), 1)]
)
def test_only_corners_that_matter_are_opened(corners, count):
    shape = part(NOTCHED, path((20, 30), (60, 30), (40, 50)))  # square at its top only
    _, told = relieve(shape, 1.5, corners=corners)
    assert len(told) == count


@pytest.mark.parametrize(("gap", "refused"), [(4.91, 0), (4.90, 4)])
def test_a_web_is_not_broken(gap, refused):
    """Each of two facing dogbones reaches r (1 - 1 / √2) = 0.4525 past its wall: 4.9 mm less 0.905 are under 4 mm."""
    shape = part(rectangle(0, 0, 100, 60), rectangle(10, 20, 20, 20), rectangle(30 + gap, 20, 20, 20))
    opened, told = relieve(shape, 1.5, web=4.0)
    why = [relief.why_not for relief in told if relief.why_not]
    assert len(why) == refused
    assert all("4.00 mm of material" in words or "3.99" in words for words in why)
    assert MeasuredPart(opened).webs(4.0 - 1e-3) == ()


WINDOW = rectangle(40, 20, 20, 20)


@pytest.mark.parametrize(
    ("shape", "refused"),
    [
        pytest.param(part(rectangle(0, 0, 60.4, 60), WINDOW), [(60, 20), (60, 40)], id="0.4 mm from the outline"),
        pytest.param(part(rectangle(0, 0, 100, 60), WINDOW, circle(60.3, 38.9, 0.1)), [(60, 40)], id="pin hole"),
    ],
)
def test_another_edge_is_not_cut(shape, refused):
    opened, told = relieve(shape, 1.5)
    why = {relief.corner.at: relief.why_not for relief in told if relief.why_not}
    assert sorted(why) == refused
    assert set(why.values()) == {"it would cut into another edge"}
    assert len(opened.contours) == len(shape.contours)


def test_handles_stay_with_their_edges():
    plain = pocket()
    hole = replace(plain.holes[0], handles=("A", "B", "C", "D"))
    drawn = replace(plain, holes=(hole,))
    opened, _ = relieve(drawn, 1.5, corners=((60.0, 40.0),))
    after = opened.holes[0]
    assert len(after.handles) == len(after.xyb)
    straight = [name for name, bulge_ in zip(after.handles, after.xyb[:, 2], strict=True) if bulge_ == 0.0]
    assert straight == ["A", "B", "C", "D"]
