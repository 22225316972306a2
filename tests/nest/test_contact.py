"""The exact tests of two outlines, against shapely and against plain Python."""

import math

import numpy as np
import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from flatprep.nest.contact import collision_loss, depth, gap, overlap
from flatprep.nest.outlines import HAIR_MM, Outlines, pack
from tests.nest.outlines import QUARTERS, region, shapes

KINDS = shapes()
PACKED = pack(KINDS, [QUARTERS] * len(KINDS))
VARIANTS = st.integers(0, len(PACKED.shape) - 1)
OFFSETS = st.floats(-45.0, 45.0)
# an overlap thinner than the hairs that outlines are drawn in by is none
SURE_MM = 10.0 * HAIR_MM


def body(o: Outlines, v: int, x: float = 0.0, y: float = 0.0):
    return region(KINDS[o.shape[v]], o.turn[v, 2], mirrored=bool(o.mirrored[v]), x=x, y=y)


@given(VARIANTS, VARIANTS, OFFSETS, OFFSETS)
def test_overlap_is_what_shapely_finds(a, b, dx, dy):
    common = body(PACKED, a).intersection(body(PACKED, b, dx, dy))
    found = overlap(PACKED, a, b, dx, dy)
    if found:
        assert common.area > 0.0
    else:
        assert common.buffer(-SURE_MM).is_empty


@given(VARIANTS, VARIANTS, OFFSETS, OFFSETS)
def test_compiled_kernels_do_what_plain_ones_do(a, b, dx, dy):
    assert overlap(PACKED, a, b, dx, dy) == overlap.py_func(PACKED, a, b, dx, dy)
    for kernel in (depth, collision_loss):
        assert kernel(PACKED, a, b, dx, dy) == pytest.approx(kernel.py_func(PACKED, a, b, dx, dy), rel=1e-12)


@given(VARIANTS, VARIANTS, OFFSETS, OFFSETS)
def test_gap_is_the_distance_up_to_its_cap(a, b, dx, dy):
    if not overlap(PACKED, a, b, dx, dy):
        true = body(PACKED, a).boundary.distance(body(PACKED, b, dx, dy).boundary)
        assert gap(PACKED.rings, a, b, dx, dy, 5.0) == pytest.approx(min(true, 5.0), abs=20.0 * HAIR_MM)


@given(VARIANTS, VARIANTS, OFFSETS, OFFSETS, st.floats(0.0, 2.0 * math.pi))
def test_no_move_shorter_than_the_depth_frees_a_piece(a, b, dx, dy, way):
    deep = 0.999 * max(depth(PACKED, a, b, dx, dy), gap(PACKED.rings, a, b, dx, dy, 5.0))
    if overlap(PACKED, a, b, dx, dy):
        assert overlap(PACKED, a, b, dx + deep * math.cos(way), dy + deep * math.sin(way))


@pytest.mark.parametrize(
    ("dx", "dy", "meets"),
    [
        pytest.param(10.0, 0.0, False, id="edge-on-edge"),
        pytest.param(10.0, 10.0, False, id="corner-on-corner"),
        pytest.param(10.0 - 1e-6, 0.0, True, id="a-millionth-too-near"),
        pytest.param(0.0, 0.0, True, id="the-same-place"),
    ],
)
def test_squares_may_touch(dx, dy, meets):
    assert overlap(PACKED, 0, 0, dx, dy) is meets


@given(st.integers(0, 10**6))
@example(16725)  # a corner on the other's border, told apart by rounding alone: the piece was taken for free
def test_overlap_is_what_shapely_finds_corner_on_corner(number):
    """Offsets that lay a corner on a corner are those the search tries most; an integer picks pair and corners."""
    many = len(PACKED.shape)
    a, b, mine, other = number % many, number // many % many, number // many**2 % 7, number // many**2 // 7 % 7
    one, two = (np.asarray(body(PACKED, v).exterior.coords)[:-1] for v in (a, b))
    dx, dy = (float(d) for d in one[mine % len(one)] - two[other % len(two)])
    common = body(PACKED, a).intersection(body(PACKED, b, dx, dy))
    assert overlap(PACKED, a, b, dx, dy) == (not common.buffer(-SURE_MM).is_empty)


def test_a_piece_fits_into_a_window_to_the_hair():
    frame = int(PACKED.first[3])
    assert not overlap(PACKED, frame, 0, -12.0, 2.0)
    assert overlap(PACKED, frame, 0, -12.0 - 1e-6, 2.0)


def test_loss_grows_with_the_overlap():
    losses = [collision_loss(PACKED, 0, 0, 10.0 - t, 0.0) for t in (0.0, 0.5, 2.0, 5.0, 10.0)]
    assert losses == sorted(losses)
    # the root of an overlap 20 times as deep, within the crudeness of circles
    assert 2.0 < losses[-1] / losses[1] < 8.0
