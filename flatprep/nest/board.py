"""Where every piece is during the search, and how heavily each pair's collision weighs."""

from typing import NamedTuple

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import bare
from flatprep.nest.outlines import Ints, Outlines
from flatprep.nest.tables import Tables, pair_loss


class Board(NamedTuple):
    """The pieces, n of them; fixed ones (the surroundings of a remnant) come last.

    Attributes
    ----------
    variant, home : ndarray, shape (n,), int64
        Variant each piece is laid in, and the field's rectangle it is in.
    at : ndarray, shape (n, 2), float64
        Origin of each piece, mm.
    left, right, low, high : ndarray, shape (n,), float64
        Box of each piece, mm.
    loss, weight : ndarray, shape (n, n), float64
        Loss of each pair (mm², 0: no overlap) and its weight (1 or more); symmetric.
    rect : ndarray, shape (k, 4), float64
        The field: rectangles x0, y0, x1, y1 that hold pieces, mm.
    movable : ndarray, shape (1,), int64
        Number of pieces that may move.
    usable : ndarray, shape (s,), int64
        Number of each shape's packed variants, the first ones, that may at present be chosen.
    turning : ndarray, shape (s,), int64
        1 for shapes whose pieces may at present turn to any angle, else 0.
    """

    variant: Ints
    home: Ints
    at: Floats
    left: Floats
    right: Floats
    low: Floats
    high: Floats
    loss: Floats
    weight: Floats
    rect: Floats
    movable: Ints
    usable: Ints
    turning: Ints


class Ground(NamedTuple):
    """All that the kernels of the search read and write."""

    outlines: Outlines
    tables: Tables
    board: Board


def new_board(variants: Ints, rect: Floats, shapes: int, fixed: int = 0) -> Board:
    """Board of pieces that lie nowhere yet."""
    n = len(variants)
    return Board(
        variant=variants.copy(),
        home=np.zeros(n, dtype=np.int64),
        at=np.zeros((n, 2)),
        left=np.zeros(n),
        right=np.zeros(n),
        low=np.zeros(n),
        high=np.zeros(n),
        loss=np.zeros((n, n)),
        weight=np.ones((n, n)),
        rect=rect.copy(),
        movable=np.array([n - fixed], dtype=np.int64),
        usable=np.ones(shapes, dtype=np.int64),
        turning=np.zeros(shapes, dtype=np.int64),
    )


@bare
def put(outlines: Outlines, board: Board, i: int, v: int, x: float, y: float) -> None:
    """Lay piece i in variant v at (x, y); losses are left as they are."""
    board.variant[i] = v
    board.at[i, 0] = x
    board.at[i, 1] = y
    board.left[i] = x + outlines.rings.box[v, 0]
    board.low[i] = y + outlines.rings.box[v, 1]
    board.right[i] = x + outlines.rings.box[v, 2]
    board.high[i] = y + outlines.rings.box[v, 3]


@bare
def weighted_loss(ground: Ground, i: int, v: int, x: float, y: float, limit: float) -> float:
    """Weighted loss (mm²) of piece i in variant v at (x, y); may stop as soon as it is above `limit`."""
    outlines, tables, board = ground.outlines, ground.tables, ground.board
    left, low = x + outlines.rings.box[v, 0], y + outlines.rings.box[v, 1]
    right, high = x + outlines.rings.box[v, 2], y + outlines.rings.box[v, 3]
    total = 0.0
    for j in range(len(board.variant)):
        if board.left[j] < right and board.right[j] > left and board.low[j] < high and board.high[j] > low and j != i:
            loss = pair_loss(outlines, tables, v, board.variant[j], board.at[j, 0] - x, board.at[j, 1] - y)
            if loss > 0.0:
                total += loss * board.weight[i, j]
                if total > limit:
                    break
    return total


@bare
def settle(ground: Ground, i: int) -> None:
    """Compute the losses of piece i with all others anew."""
    outlines, tables, board = ground.outlines, ground.tables, ground.board
    x, y, v = board.at[i, 0], board.at[i, 1], board.variant[i]
    for j in range(len(board.variant)):
        loss = 0.0
        if (
            board.left[j] < board.right[i]
            and board.right[j] > board.left[i]
            and board.low[j] < board.high[i]
            and board.high[j] > board.low[i]
            and j != i
        ):
            loss = pair_loss(outlines, tables, v, board.variant[j], board.at[j, 0] - x, board.at[j, 1] - y)
        board.loss[i, j] = loss
        board.loss[j, i] = loss


@bare
def settle_all(ground: Ground) -> float:
    """Compute every loss anew and return their sum, mm²."""
    board = ground.board
    total = 0.0
    for i in range(board.movable[0]):
        settle(ground, i)
    for i in range(board.movable[0]):
        for j in range(i):
            total += board.loss[i, j]
        for j in range(board.movable[0], len(board.variant)):
            total += board.loss[i, j]
    return total


@bare
def is_colliding(board: Board, i: int) -> bool:
    """Tell whether piece i overlaps another."""
    worst = 0.0
    for j in range(len(board.variant)):
        worst = max(worst, board.loss[i, j])
    return worst > 0.0
