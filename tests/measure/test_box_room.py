"""Where a box has room."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely import affinity, box
from shapely.geometry import Point, Polygon

from flatprep.measure.box_room import box_room

ALL = (0.0, 90.0)


def as_polygon(room, ratio):
    x, y, h = *room.middle, room.height_mm
    flat = box(x - ratio * h / 2, y - h / 2, x + ratio * h / 2, y + h / 2)
    return affinity.rotate(flat, room.turn_deg, origin=(x, y))


@pytest.mark.parametrize(
    ("region", "ratio", "height", "turn"),
    [
        (box(0, 0, 100, 30), 4.0, 20.0, 0.0),  # higher than the largest asked for would go: 25
        (box(0, 0, 60, 30), 4.0, 15.0, 0.0),  # 60 / 4
        (box(0, 0, 200, 12), 4.0, 12.0, 0.0),
        (box(0, 0, 12, 200), 4.0, 12.0, 90.0),
        (Point(0, 0).buffer(50, quad_segs=64), 1.0, 20.0, 0.0),
        (Point(0, 0).buffer(10, quad_segs=64), 1.0, 200**0.5, 0.0),  # the square in a circle
    ],
)
def test_by_hand(region, ratio, height, turn):
    room = box_room(region, ratio, (5.0, 20.0), ALL)
    assert room.height_mm == pytest.approx(height, rel=0.06)
    assert room.height_mm <= height * (1 + 1e-3)
    assert room.turn_deg == turn
    assert region.buffer(1e-9).covers(as_polygon(room, ratio))


def test_no_room():
    assert box_room(box(0, 0, 19, 19), 4.0, (5.0, 20.0), ALL) is None
    assert box_room(Polygon(), 4.0, (5.0, 20.0), ALL) is None
    assert box_room(box(0, 0, 100, 4.9), 4.0, (5.0, 20.0), ALL) is None


def test_it_keeps_away_from_the_edge_where_it_may():
    room = box_room(box(0, 0, 200, 100), 2.0, (5.0, 10.0), ALL)
    assert room.middle == pytest.approx((100.0, 50.0), abs=4.0)


@settings(max_examples=20)
@given(st.integers(0, 10_000), st.floats(1.0, 8.0))
def test_the_box_lies_in_the_region(seed, ratio):
    rng = np.random.default_rng(seed)
    region = Polygon(rng.uniform(0, 100, (6, 2))).buffer(0)
    room = box_room(region, ratio, (2.0, 9.0), (0.0, 90.0, float(rng.uniform(0, 90))))
    if room is not None:
        assert 2.0 <= room.height_mm <= 9.0
        assert region.buffer(1e-6).covers(as_polygon(room, ratio))
