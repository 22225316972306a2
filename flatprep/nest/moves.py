"""A better place for one piece: sample widely, keep the three best, walk downhill from them, snap to contacts."""

import math

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import bare
from flatprep.nest.board import Board, put, settle, weighted_loss
from flatprep.nest.outlines import Outlines
from flatprep.nest.snap import snap
from flatprep.nest.tables import Tables

WIDE_SAMPLES = 20
NEAR_SAMPLES = 30
CORNER_SAMPLES = 12
KEPT = 3
# Steps of the walk, as shares of the piece's smaller side: first, where the three stop, where the best one stops.
FIRST_STEP, ROUGH_STEP, FINE_STEP = 0.25, 0.02, 0.0005
# Contacts are looked for so far around a place, as a share of the same.
SNAP_REACH = 0.06
LONGER, SHORTER = 1.1, 0.5
HUGE = 1e300


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
    return rect[k, 2] - rect[k, 0] >= box[v, 2] - box[v, 0] and rect[k, 3] - rect[k, 1] >= box[v, 3] - box[v, 1]


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
def corner_spot(outlines: Outlines, board: Board, i: int, v: int, rng: np.random.Generator) -> tuple[float, float]:
    """Return a place where a corner of variant v meets a corner of another piece, mostly one near piece i."""
    j = i
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
    w, rings = board.variant[j], outlines.rings
    mine = rings.at[v] + int(rng.random() * (rings.at[v + 1] - rings.at[v]))
    other = rings.at[w] + int(rng.random() * (rings.at[w + 1] - rings.at[w]))
    x = board.at[j, 0] + rings.edge[other, 0] - rings.edge[mine, 0]
    return x, board.at[j, 1] + rings.edge[other, 1] - rings.edge[mine, 1]


@bare
def keep_best(kept: Floats, v: int, k: int, x: float, y: float, loss: float) -> None:
    """Put a candidate into `kept` (rows: loss, variant, rectangle, x, y; best first) if it beats the last row."""
    if loss >= kept[KEPT - 1, 0]:
        return
    row = KEPT - 1
    while row > 0 and kept[row - 1, 0] > loss:
        for c in range(5):
            kept[row, c] = kept[row - 1, c]
        row -= 1
    kept[row, 0], kept[row, 1], kept[row, 2], kept[row, 3], kept[row, 4] = loss, v, k, x, y


@bare
def any_way(outlines: Outlines, v: int, rng: np.random.Generator) -> tuple[float, float]:
    """Return a direction to walk in: an axis, a diagonal, or along one of the piece's own edges, to slide on."""
    way = int(rng.random() * 8.0)
    if way == 0:
        return 1.0, 0.0
    if way == 1:
        return 0.0, 1.0
    if way < 4:
        return 1.0, (1.0 if way == 2 else -1.0)
    rings = outlines.rings
    e = rings.at[v] + int(rng.random() * (rings.at[v + 1] - rings.at[v]))
    ux, uy = rings.edge[e, 2] - rings.edge[e, 0], rings.edge[e, 3] - rings.edge[e, 1]
    length = math.sqrt(ux * ux + uy * uy)
    return ux / length, uy / length


@bare
def walk(
    outlines: Outlines, tables: Tables, board: Board, i: int, kept: Floats, row: int, stop: float, rng: np.random.Generator
) -> int:
    """Walk downhill from a candidate (a row of `keep_best`), in place; return the number of places tried.

    The row's last number is its step (mm): it grows after a step that helps and is halved after one that does not.
    """
    v, k = int(kept[row, 1]), int(kept[row, 2])
    best, best_x, best_y, step = kept[row, 0], kept[row, 3], kept[row, 4], kept[row, 5]
    tried = 0
    while step > stop and best > 0.0:
        way_x, way_y = any_way(outlines, v, rng)
        ahead = step if rng.random() < 0.5 else -step
        gained = False
        for _ in range(2):
            x, y = clamp(outlines, board, k, v, best_x + ahead * way_x, best_y + ahead * way_y)
            loss = weighted_loss(outlines, tables, board, i, v, x, y, best)
            tried += 1
            if loss < best:
                best, best_x, best_y = loss, x, y
                gained = True
                break
            ahead = -ahead
        step *= LONGER if gained else SHORTER
    kept[row, 0], kept[row, 3], kept[row, 4], kept[row, 5] = best, best_x, best_y, step
    return tried


@bare
def sample(outlines: Outlines, tables: Tables, board: Board, i: int, kept: Floats, rng: np.random.Generator) -> int:
    """Fill `kept` with the best of random places for piece i; return the number of places tried."""
    shape = outlines.shape[board.variant[i]]
    first = outlines.first[shape]
    variants = outlines.first[shape + 1] - first
    tried = 0
    for trial in range(WIDE_SAMPLES + NEAR_SAMPLES + CORNER_SAMPLES):
        v = first + int(rng.random() * variants)
        k = board.home[i]
        if trial < WIDE_SAMPLES:
            k = int(rng.random() * len(board.rect))
        elif rng.random() < 0.5:
            v = board.variant[i]
        if not fits(outlines, board, k, v):
            continue
        if trial < WIDE_SAMPLES:
            x, y = any_spot(outlines, board, k, v, rng)
        elif trial < WIDE_SAMPLES + NEAR_SAMPLES:
            x, y = near_spot(outlines, board, i, v, rng)
        else:
            x, y = corner_spot(outlines, board, i, v, rng)
        x, y = clamp(outlines, board, k, v, x, y)
        tried += 1
        keep_best(kept, v, k, x, y, weighted_loss(outlines, tables, board, i, v, x, y, kept[KEPT - 1, 0]))
    return tried


@bare
def move_piece(
    outlines: Outlines, tables: Tables, board: Board, i: int, kept: Floats, lines: Floats, rng: np.random.Generator
) -> int:
    """Look for a place of piece i with less weighted loss and move it there; return the number of places tried.

    `kept` and `lines` are room to work in, shapes (KEPT, 6) and (MOST_LINES, 3).
    """
    v, x, y = board.variant[i], board.at[i, 0], board.at[i, 1]
    here = weighted_loss(outlines, tables, board, i, v, x, y, HUGE)
    for row in range(KEPT):
        kept[row, 0] = HUGE
    keep_best(kept, v, board.home[i], x, y, here)
    tried = sample(outlines, tables, board, i, kept, rng) + 1
    side = outlines.size[outlines.shape[v], 3]
    best = 0
    for row in range(KEPT):
        if kept[row, 0] < HUGE:
            kept[row, 5] = FIRST_STEP * side
            tried += walk(outlines, tables, board, i, kept, row, ROUGH_STEP * side, rng)
            if kept[row, 0] < kept[best, 0]:
                best = row
    if kept[best, 0] > 0.0:
        tried += snap(outlines, tables, board, i, kept, best, SNAP_REACH * side, lines)
    tried += walk(outlines, tables, board, i, kept, best, FINE_STEP * side, rng)
    if kept[best, 0] < here:
        board.home[i] = int(kept[best, 2])
        put(outlines, board, i, int(kept[best, 1]), kept[best, 3], kept[best, 4])
        settle(outlines, tables, board, i)
    return tried
