"""A better place for one piece: sample widely, keep the three best, walk downhill from them, snap to contacts."""

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import kernel
from flatprep.nest.board import Board, put, settle, weighted_loss
from flatprep.nest.outlines import Outlines
from flatprep.nest.tables import Tables

WIDE_SAMPLES = 20
NEAR_SAMPLES = 30
CORNER_SAMPLES = 12
KEPT = 3
# Steps of the walk, as shares of the piece's smaller side: first, where the three stop, where the best one stops.
FIRST_STEP, ROUGH_STEP, FINE_STEP = 0.25, 0.02, 0.0005
LONGER, SHORTER = 1.1, 0.5
HUGE = 1e300


@kernel
def clamp_to(outlines: Outlines, board: Board, k: int, v: int, spot: Floats) -> bool:
    """Move `spot` (x, y) so that variant v there lies within rectangle k; False where it is too large for it."""
    x0, x1 = board.rect[k, 0] - outlines.box[v, 0], board.rect[k, 2] - outlines.box[v, 2]
    y0, y1 = board.rect[k, 1] - outlines.box[v, 1], board.rect[k, 3] - outlines.box[v, 3]
    if x1 < x0 or y1 < y0:
        return False
    spot[0] = min(max(spot[0], x0), x1)
    spot[1] = min(max(spot[1], y0), y1)
    return True


@kernel
def any_spot(outlines: Outlines, board: Board, k: int, v: int, spot: Floats, rng: np.random.Generator) -> bool:
    """Set `spot` to a random place of variant v within rectangle k; False where it is too large for it."""
    wide = board.rect[k, 2] - board.rect[k, 0] - (outlines.box[v, 2] - outlines.box[v, 0])
    tall = board.rect[k, 3] - board.rect[k, 1] - (outlines.box[v, 3] - outlines.box[v, 1])
    if wide < 0.0 or tall < 0.0:
        return False
    spot[0] = board.rect[k, 0] - outlines.box[v, 0] + wide * rng.random()
    spot[1] = board.rect[k, 1] - outlines.box[v, 1] + tall * rng.random()
    return True


@kernel
def corner_spot(outlines: Outlines, board: Board, i: int, v: int, spot: Floats, rng: np.random.Generator) -> None:
    """Set `spot` so that a corner of variant v meets a corner of another piece near piece i."""
    for _ in range(8):
        j = int(rng.random() * len(board.variant))
        if (
            j != i
            and board.left[j] <= board.right[i]
            and board.right[j] >= board.left[i]
            and board.low[j] <= board.high[i]
            and board.high[j] >= board.low[i]
        ):
            break
    w = board.variant[j]
    mine = outlines.edge_at[v] + int(rng.random() * (outlines.edge_at[v + 1] - outlines.edge_at[v]))
    other = outlines.edge_at[w] + int(rng.random() * (outlines.edge_at[w + 1] - outlines.edge_at[w]))
    spot[0] = board.at[j, 0] + outlines.edge[other, 0] - outlines.edge[mine, 0]
    spot[1] = board.at[j, 1] + outlines.edge[other, 1] - outlines.edge[mine, 1]


@kernel
def keep_best(kept: Floats, v: int, k: int, spot: Floats, loss: float) -> None:
    """Put a candidate into `kept` (rows: loss, variant, rectangle, x, y; best first) if it beats the last row."""
    if loss >= kept[KEPT - 1, 0]:
        return
    row = KEPT - 1
    while row > 0 and kept[row - 1, 0] > loss:
        kept[row] = kept[row - 1]
        row -= 1
    kept[row, 0] = loss
    kept[row, 1] = v
    kept[row, 2] = k
    kept[row, 3] = spot[0]
    kept[row, 4] = spot[1]


@kernel
def walk(
    outlines: Outlines, tables: Tables, board: Board, i: int, kept: Floats, stop: float, rng: np.random.Generator
) -> int:
    """Walk downhill from a candidate (a row of `keep_best`), in place; return the number of places tried.

    The row's last number is its step (mm): it grows after a step that helps and is halved after one that does not.
    """
    spot = np.empty(2)
    v, k = int(kept[1]), int(kept[2])
    tried = 0
    while kept[5] > stop and kept[0] > 0.0:
        way = int(rng.random() * 4.0)
        sign = 1.0 if rng.random() < 0.5 else -1.0
        step = kept[5] * sign
        best_x, best_y, best = kept[3], kept[4], kept[0]
        for side in range(2):
            ahead = step if side == 0 else -step
            spot[0] = kept[3] + (0.0 if way == 1 else ahead)
            spot[1] = kept[4] + (0.0 if way == 0 else (-ahead if way == 3 else ahead))
            clamp_to(outlines, board, k, v, spot)
            loss = weighted_loss(outlines, tables, board, i, v, spot[0], spot[1], best)
            tried += 1
            if loss < best:
                best, best_x, best_y = loss, spot[0], spot[1]
                break
        if best < kept[0]:
            kept[0], kept[3], kept[4] = best, best_x, best_y
            kept[5] *= LONGER
        else:
            kept[5] *= SHORTER
    return tried


@kernel
def sample(
    outlines: Outlines, tables: Tables, board: Board, i: int, kept: Floats, rng: np.random.Generator
) -> int:
    """Fill `kept` with the best of random places for piece i and where it is; return the number of places tried."""
    shape = outlines.shape[board.variant[i]]
    first = outlines.first[shape]
    variants = outlines.first[shape + 1] - first
    spot = np.empty(2)
    kept[:, 0] = HUGE
    here = weighted_loss(outlines, tables, board, i, board.variant[i], board.at[i, 0], board.at[i, 1], HUGE)
    spot[0], spot[1] = board.at[i, 0], board.at[i, 1]
    keep_best(kept, board.variant[i], board.home[i], spot, here)
    for trial in range(WIDE_SAMPLES + NEAR_SAMPLES + CORNER_SAMPLES):
        v = first + int(rng.random() * variants)
        k = board.home[i]
        if trial < WIDE_SAMPLES:
            k = int(rng.random() * len(board.rect))
            if not any_spot(outlines, board, k, v, spot, rng):
                continue
        elif trial < WIDE_SAMPLES + NEAR_SAMPLES:
            if rng.random() < 0.5:
                v = board.variant[i]
            mid_x = board.left[i] + rng.random() * (board.right[i] - board.left[i])
            mid_y = board.low[i] + rng.random() * (board.high[i] - board.low[i])
            spot[0] = mid_x - 0.5 * (outlines.box[v, 0] + outlines.box[v, 2])
            spot[1] = mid_y - 0.5 * (outlines.box[v, 1] + outlines.box[v, 3])
            if not clamp_to(outlines, board, k, v, spot):
                continue
        else:
            corner_spot(outlines, board, i, v, spot, rng)
            if not clamp_to(outlines, board, k, v, spot):
                continue
        loss = weighted_loss(outlines, tables, board, i, v, spot[0], spot[1], kept[KEPT - 1, 0])
        keep_best(kept, v, k, spot, loss)
    return 1 + WIDE_SAMPLES + NEAR_SAMPLES + CORNER_SAMPLES


@kernel
def move_piece(outlines: Outlines, tables: Tables, board: Board, i: int, rng: np.random.Generator) -> int:
    """Look for a place of piece i with less weighted loss and move it there; return the number of places tried."""
    kept = np.empty((KEPT, 6))
    tried = sample(outlines, tables, board, i, kept, rng)
    here = weighted_loss(outlines, tables, board, i, board.variant[i], board.at[i, 0], board.at[i, 1], HUGE)
    side = outlines.size[outlines.shape[board.variant[i]], 3]
    best = 0
    for row in range(KEPT):
        if kept[row, 0] >= HUGE:
            continue
        kept[row, 5] = FIRST_STEP * side
        tried += walk(outlines, tables, board, i, kept[row], ROUGH_STEP * side, rng)
        if kept[row, 0] < kept[best, 0]:
            best = row
    tried += walk(outlines, tables, board, i, kept[best], FINE_STEP * side, rng)
    if kept[best, 0] < here:
        board.home[i] = int(kept[best, 2])
        put(outlines, board, i, int(kept[best, 1]), kept[best, 3], kept[best, 4])
        settle(outlines, tables, board, i)
    return tried
