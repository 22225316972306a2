"""Remove all overlap from a board: move colliding pieces in turn, weigh what keeps colliding ever more."""

from typing import NamedTuple

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import bare, kernel
from flatprep.nest.board import Board, Ground, is_colliding
from flatprep.nest.moves import Room, move_piece, new_room
from flatprep.nest.outlines import Ints

# Weights of colliding pairs grow by up to this much a sweep, the others shrink towards 1.
LEAST_GROWTH, MORE_GROWTH, DECAY = 1.2, 0.3, 0.97
# A gain in loss counts from this share on.
GAIN = 0.02


class Try(NamedTuple):
    """A try to remove all overlap, and the state of least loss it has seen.

    Attributes
    ----------
    variant, home : ndarray, shape (n,), int64
    at : ndarray, shape (n, 2), float64
    turn : ndarray, shape (n,), float64
        As of `Board`, and the turn of each piece (degrees), at the least loss.
    loss : ndarray, shape (2,), float64
        Least loss, and the loss that the last gain reached, mm².
    sweeps : ndarray, shape (3,), int64
        Sweeps since the last gain; sweeps without one after which to stop; places to try in one call of the kernel.
    order : ndarray, shape (n,), int64
    room : Room
        Room to work in.
    """

    variant: Ints
    home: Ints
    at: Floats
    turn: Floats
    loss: Floats
    sweeps: Ints
    order: Ints
    room: Room


def new_try(pieces: int, call: int) -> Try:
    """Return room for tries with so many pieces, and so many places in a call of the kernel."""
    return Try(
        variant=np.zeros(pieces, dtype=np.int64),
        home=np.zeros(pieces, dtype=np.int64),
        at=np.zeros((pieces, 2)),
        turn=np.zeros(pieces),
        loss=np.zeros(2),
        sweeps=np.array([0, 0, call], dtype=np.int64),
        order=np.zeros(pieces, dtype=np.int64),
        room=new_room(),
    )


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
def sweep(ground: Ground, attempt: Try, rng: np.random.Generator) -> int:
    """Visit every colliding piece once, in random order; return the number of places tried."""
    board, order = ground.board, attempt.order
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
            tried += move_piece(ground, order[i], attempt.room, rng)
    return tried


@bare
def remember(ground: Ground, attempt: Try) -> None:
    """Keep the state of the board as the one of least loss."""
    board = ground.board
    for i in range(len(board.variant)):
        attempt.variant[i] = board.variant[i]
        attempt.home[i] = board.home[i]
        attempt.at[i, 0], attempt.at[i, 1] = board.at[i, 0], board.at[i, 1]
        attempt.turn[i] = ground.outlines.turn[board.variant[i], 2]


@kernel
def sweeps(ground: Ground, attempt: Try, rng: np.random.Generator) -> int:
    """Sweep until nothing collides, patience is out or the call has lasted long enough; return the places tried."""
    tried = 0
    while tried < attempt.sweeps[2] and attempt.loss[0] > 0.0 and attempt.sweeps[0] < attempt.sweeps[1]:
        tried += sweep(ground, attempt, rng)
        total = reweigh(ground.board)
        attempt.sweeps[0] += 1
        if total < attempt.loss[0]:
            attempt.loss[0] = total
            remember(ground, attempt)
            if total < (1.0 - GAIN) * attempt.loss[1]:
                attempt.loss[1] = total
                attempt.sweeps[0] = 0
    return tried
