"""Remove all overlap from a board: move colliding pieces in turn, weigh what keeps colliding ever more."""

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import bare, kernel
from flatprep.nest.board import Board, is_colliding, put, settle_all
from flatprep.nest.moves import KEPT, move_piece
from flatprep.nest.outlines import Ints, Outlines
from flatprep.nest.snap import MOST_LINES
from flatprep.nest.tables import Tables

# Weights of colliding pairs grow by up to this much a sweep, the others shrink towards 1.
LEAST_GROWTH, MORE_GROWTH, DECAY = 1.2, 0.3, 0.97
# A gain in loss counts from this share on.
GAIN = 0.02
# Positions tried in one call of the kernel: some 0.05 s, so that signals are served.
CALL = 40_000


@bare
def reweigh(board: Board) -> float:
    """Update the weights after a sweep and return the sum of losses, mm²."""
    n, movable = len(board.variant), board.movable[0]
    worst, total = 0.0, 0.0
    for i in range(movable):
        for j in range(n):
            if j < i or j >= movable:
                total += board.loss[i, j]
                worst = max(worst, board.loss[i, j])
    if worst == 0.0:
        return 0.0
    for i in range(movable):
        for j in range(n):
            if board.loss[i, j] > 0.0:
                board.weight[i, j] *= LEAST_GROWTH + MORE_GROWTH * board.loss[i, j] / worst
            else:
                board.weight[i, j] = max(1.0, board.weight[i, j] * DECAY)
    return total


@bare
def sweep(
    outlines: Outlines, tables: Tables, board: Board, order: Ints, kept: Floats, lines: Floats, rng: np.random.Generator
) -> int:
    """Visit every colliding piece once, in random order; return the number of places tried."""
    many = 0
    for i in range(board.movable[0]):
        if is_colliding(board, i):
            order[many] = i
            many += 1
    for i in range(many - 1, 0, -1):
        j = int(rng.random() * (i + 1))
        order[i], order[j] = order[j], order[i]
    tried = 0
    for i in range(many):
        if is_colliding(board, order[i]):
            tried += move_piece(outlines, tables, board, order[i], kept, lines, rng)
    return tried


@kernel
def sweeps(
    outlines: Outlines, tables: Tables, board: Board, kept: Board, count: Ints, loss: Floats, rng: np.random.Generator
) -> int:
    """Sweep until nothing collides, patience is out or the call has lasted long enough.

    Parameters
    ----------
    kept : Board
        Takes the places of the state with the least loss.
    count : ndarray, shape (2,), int64
        Sweeps since the last gain, updated; sweeps without a gain after which to stop.
    loss : ndarray, shape (2,), float64
        Least loss so far and the loss that the last gain reached, mm², updated.

    Returns
    -------
    int
        Places tried.
    """
    order = np.empty(len(board.variant), dtype=np.int64)
    room = np.empty((KEPT, 6))
    lines = np.empty((MOST_LINES, 3))
    tried = 0
    while tried < CALL and loss[0] > 0.0 and count[0] < count[1]:
        tried += sweep(outlines, tables, board, order, room, lines, rng)
        total = reweigh(board)
        count[0] += 1
        if total < loss[0]:
            loss[0] = total
            copy_places(board, kept)
            if total < (1.0 - GAIN) * loss[1]:
                loss[1] = total
                count[0] = 0
    return tried


@kernel
def copy_places(source: Board, target: Board) -> None:
    """Copy where the pieces are; not losses, weights and field."""
    target.variant[:] = source.variant
    target.home[:] = source.home
    target.at[:] = source.at


@kernel
def lay_again(outlines: Outlines, tables: Tables, kept: Board, board: Board) -> float:
    """Put the board back to kept places; return its loss, mm²."""
    for i in range(len(kept.variant)):
        board.home[i] = kept.home[i]
        put(outlines, board, i, kept.variant[i], kept.at[i, 0], kept.at[i, 1])
    return settle_all(outlines, tables, board)
