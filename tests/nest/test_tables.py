"""Tables tell free from colliding just as the exact geometry does, at every turn."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.nest.board import pair_loss
from flatprep.nest.contact import collision_loss, overlap
from flatprep.nest.outlines import pack
from flatprep.nest.tables import LEAST_NODES, no_tables, nodes_a_side, prepare_tables
from tests.nest.outlines import shapes

KINDS = shapes()
ANGLES = (0.0, 30.0, 90.0, 210.0)
PACKED = pack(KINDS, [ANGLES] * len(KINDS))
TABLES = prepare_tables(PACKED, len(PACKED.shape))
EXACT = no_tables(PACKED)
VARIANTS = st.integers(0, len(PACKED.shape) - 1)


@given(VARIANTS, VARIANTS, st.floats(-45.0, 45.0), st.floats(-45.0, 45.0))
def test_tables_and_exact_geometry_agree_on_what_collides(a, b, dx, dy):
    by_table = look_up(TABLES, a, b, dx, dy)
    assert (by_table > 0.0) == overlap(PACKED, a, b, dx, dy)
    assert (look_up(EXACT, a, b, dx, dy) > 0.0) == (by_table > 0.0)


@given(VARIANTS, VARIANTS, st.floats(-8.0, 8.0), st.floats(-8.0, 8.0))
def test_loss_between_nodes_is_near_the_computed_one(a, b, dx, dy):
    loss = look_up(TABLES, a, b, dx, dy)
    if loss > 0.0:
        assert loss == pytest.approx(collision_loss(PACKED, a, b, dx, dy), rel=0.15)


def look_up(tables, a, b, dx, dy):
    """`pair_loss` is copied into its callers, so it is asked through plain Python here."""
    return pair_loss.py_func(PACKED, tables, a, b, dx, dy)


def test_pairs_that_differ_by_a_common_turn_share_a_grid():
    square, elbow = int(PACKED.first[0]), int(PACKED.first[2])
    relative = {}
    for i in range(len(ANGLES)):
        for j in range(len(ANGLES)):
            key = round((ANGLES[j] - ANGLES[i]) % 360.0)
            relative.setdefault(key, set()).add(int(TABLES.of[square + i, elbow + j]))
    assert all(len(grids) == 1 for grids in relative.values())
    assert len(set.union(*relative.values())) == len(relative)


def test_nothing_is_computed_before_it_is_asked_for():
    fresh = prepare_tables(PACKED, len(PACKED.shape))
    assert not fresh.node.any()
    pair_loss.py_func(PACKED, fresh, 0, 0, 9.0, 0.0)
    assert np.count_nonzero(fresh.node[..., 0]) == 1
    assert np.count_nonzero(fresh.node[..., 1]) == 4


def test_many_kinds_share_the_memory():
    many = pack(KINDS * 8, [ANGLES] * len(KINDS) * 8)
    tables = prepare_tables(many, len(many.shape))
    assert tables.node.shape[1] >= LEAST_NODES
    assert tables.node.nbytes <= 100e6 * 1.01


@pytest.mark.parametrize(("grids", "nodes"), [(1, 128), (100, 86), (1000, 64), (10_000, 35), (1_000_000, 12)])
def test_few_grids_are_fine(grids, nodes):
    # bounds 128, 64 and 12 nodes; 6 MB, then 100 MB of 8 bytes a node in between
    assert nodes_a_side(grids) == nodes
