"""Places to try for a piece: anywhere, near where it is, corner on corner with a neighbour."""

import numpy as np

from flatprep.nest._jit import bare
from flatprep.nest.board import Board
from flatprep.nest.outlines import Outlines, Rings

# How often a piece is drawn in search of one near by.
DRAWS = 8


@bare
def clamp(outlines: Outlines, board: Board, k: int, v: int, x: float, y: float) -> tuple[float, float]:
    """Return the place nearest to (x, y) where variant v lies within rectangle k; for variants that fit."""
    box, rect = outlines.rings.box, board.rect
    x = min(max(x, rect[k, 0] - box[v, 0]), rect[k, 2] - box[v, 2])
    y = min(max(y, rect[k, 1] - box[v, 1]), rect[k, 3] - box[v, 3])
    return x, y


@bare
def fits(outlines: Outlines, board: Board, k: int, v: int) -> bool:
    """Tell whether variant v fits into rectangle k."""
    box, rect = outlines.rings.box, board.rect
    return bool(rect[k, 2] - rect[k, 0] >= box[v, 2] - box[v, 0] and rect[k, 3] - rect[k, 1] >= box[v, 3] - box[v, 1])


@bare
def any_spot(outlines: Outlines, board: Board, k: int, v: int, rng: np.random.Generator) -> tuple[float, float]:
    """Return a random place of variant v within rectangle k; for variants that fit."""
    box, rect = outlines.rings.box, board.rect
    wide = rect[k, 2] - rect[k, 0] - (box[v, 2] - box[v, 0])
    tall = rect[k, 3] - rect[k, 1] - (box[v, 3] - box[v, 1])
    return rect[k, 0] - box[v, 0] + wide * rng.random(), rect[k, 1] - box[v, 1] + tall * rng.random()


@bare
def near_spot(outlines: Outlines, board: Board, i: int, v: int, rng: np.random.Generator) -> tuple[float, float]:
    """Return a place of variant v whose middle is anywhere in the box of piece i."""
    box = outlines.rings.box
    x = board.left[i] + rng.random() * (board.right[i] - board.left[i]) - 0.5 * (box[v, 0] + box[v, 2])
    y = board.low[i] + rng.random() * (board.high[i] - board.low[i]) - 0.5 * (box[v, 1] + box[v, 3])
    return x, y


@bare
def neighbour(board: Board, i: int, rng: np.random.Generator) -> int:
    """Return a random piece, mostly one whose box meets that of piece i."""
    j = i
    for _ in range(DRAWS):
        j = int(rng.random() * len(board.variant))
        if (
            j != i
            and board.left[j] <= board.right[i]
            and board.right[j] >= board.left[i]
            and board.low[j] <= board.high[i]
            and board.high[j] >= board.low[i]
        ):
            break
    return j


@bare
def any_edge(rings: Rings, v: int, rng: np.random.Generator) -> int:
    """Return a random edge of variant v."""
    return int(rings.at[v, 0] + int(rng.random() * (rings.at[v, 1] - rings.at[v, 0])))


@bare
def corner_spot(outlines: Outlines, board: Board, i: int, v: int, rng: np.random.Generator) -> tuple[float, float]:
    """Return a place where a corner of variant v meets a corner of another piece, mostly one near piece i."""
    j = neighbour(board, i, rng)
    w, rings = board.variant[j], outlines.rings
    mine, other = any_edge(rings, v, rng), any_edge(rings, w, rng)
    x = board.at[j, 0] + rings.edge[other, 0] - rings.edge[mine, 0]
    return x, board.at[j, 1] + rings.edge[other, 1] - rings.edge[mine, 1]
