"""One piece moved: candidates kept in order, never to a worse place, always within the field; weights after a sweep."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.nest.board import Ground, new_board, put, settle_all, weighted_loss
from flatprep.nest.moves import HUGE, KEPT, keep_best, move_piece, new_room
from flatprep.nest.outlines import pack
from flatprep.nest.spots import clamp, fits
from flatprep.nest.tables import no_tables, prepare_tables
from flatprep.nest.turning import with_own_variants
from flatprep.nest.untangle import reweigh
from tests.nest.outlines import QUARTERS, shapes

FIELD = np.array([[0.0, 0.0, 60.0, 45.0], [90.0, 0.0, 150.0, 45.0]])


def crowded(seed: int, *, tables: bool = True, turning: bool = False) -> Ground:
    """Two of each shape anywhere in the field, overlapping."""
    kinds = shapes()
    rng = np.random.default_rng(seed)
    packed = pack(kinds, [QUARTERS] * len(kinds))
    pieces = np.repeat(np.arange(len(kinds)), 2)
    outlines = with_own_variants(packed, pieces, [turning] * len(kinds))
    board = new_board(packed.first[pieces], FIELD, len(kinds))
    board.usable[:] = np.diff(packed.first)
    board.turning[:] = int(turning)
    grids = prepare_tables(outlines, len(packed.shape)) if tables else no_tables(outlines)
    ground = Ground(outlines, grids, board)
    for i in range(len(pieces)):
        k = int(rng.integers(len(FIELD)))
        board.home[i] = k
        x, y = rng.uniform(FIELD[k, :2], FIELD[k, 2:])
        v = int(board.variant[i])
        put(outlines, board, i, v, *clamp(outlines, board, k, v, x, y))
    settle_all(ground)
    return ground


@given(st.lists(st.floats(0.0, 100.0), min_size=KEPT, max_size=20))
def test_the_best_candidates_are_kept_in_order(losses):
    kept = new_room().kept
    kept[:, 0] = HUGE
    for number, loss in enumerate(losses):
        keep_best(kept, number, 0, 0.0, 0.0, loss)
    assert kept[:, 0].tolist() == sorted(losses)[:KEPT]
    assert [losses[int(v)] for v in kept[:, 1]] == kept[:, 0].tolist()


@pytest.mark.parametrize("turning", [False, True])
@given(seed=st.integers(0, 1000))
def test_a_move_never_makes_it_worse_and_stays_in_the_field(seed, turning):
    ground = crowded(seed, turning=turning)
    board, rng, room = ground.board, np.random.default_rng(seed), new_room()
    for i in range(len(board.variant)):
        before = float((board.loss[i] * board.weight[i]).sum())
        tried = move_piece(ground, i, room, rng)
        assert tried > KEPT
        assert (board.loss[i] * board.weight[i]).sum() <= before * (1.0 + 1e-12)
        k = board.home[i]
        assert board.left[i] >= FIELD[k, 0] - 1e-6
        assert board.right[i] <= FIELD[k, 2] + 1e-6
        assert board.low[i] >= FIELD[k, 1] - 1e-6
        assert board.high[i] <= FIELD[k, 3] + 1e-6


def test_losses_are_symmetric_and_told_alike_by_all_ways():
    ground = crowded(5)
    board = ground.board
    assert (board.loss > 0.0).any()
    assert np.allclose(board.loss, board.loss.T, rtol=1e-6)
    for i in range(len(board.variant)):
        x, y = board.at[i]
        alone = weighted_loss(ground, i, int(board.variant[i]), float(x), float(y), HUGE)
        assert alone == pytest.approx(board.loss[i].sum(), rel=1e-6)
    exact = crowded(5, tables=False)
    assert ((exact.board.loss > 0.0) == (board.loss > 0.0)).all()


def test_weights_grow_with_the_loss_and_fade_to_one():
    board = crowded(5).board
    worst = np.unravel_index(int(board.loss.argmax()), board.loss.shape)
    free = board.loss == 0.0
    board.weight[free] = 1.01
    total = reweigh(board)
    assert total == pytest.approx(np.triu(board.loss).sum(), rel=1e-6)
    assert board.weight[worst] == pytest.approx(1.5)
    colliding = board.weight[~free]
    assert colliding.min() >= 1.2
    assert board.weight[free].tolist() == [1.0] * int(free.sum())


def test_what_is_too_large_does_not_fit():
    ground = crowded(1)
    frame = int(ground.outlines.first[3])
    assert fits(ground.outlines, ground.board, 0, frame)
    ground.board.rect[0, 3] = 39.9
    assert not fits(ground.outlines, ground.board, 0, frame)
