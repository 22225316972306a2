"""Relieved corners against the circle through a corner."""

import numpy as np
import pytest

from flatprep.geom import bulge
from flatprep.measure.part import MeasuredPart
from flatprep.measure.relief import ROOM, ReliefKind, relieve
from tests.measure.shapes import moved, part, path, rectangle

R = ROOM * 1.5


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
    opened, _ = relieve(pocket(), 1.5, at=[(60.0, 40.0)])
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


def test_short_walls_are_left_and_told():
    narrow = part(rectangle(0, 0, 100, 60), rectangle(40, 20, 20, 3))
    opened, told = relieve(narrow, 1.5)
    assert [bool(relief.why_not) for relief in told] == [True] * 4
    assert opened.area_mm2 == narrow.area_mm2


def test_outside_corners_and_curves_stay():
    plain = part(rectangle(0, 0, 100, 60), rectangle(40, 20, 20, 20, 3))
    opened, told = relieve(plain, 1.5)
    assert told == ()
    assert opened.holes[0] is plain.holes[0]
