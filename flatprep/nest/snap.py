"""Bring a piece into contact: places near by where it touches two neighbours, or one and the border, at once.

Two outlines touch where a corner of one lies on an edge of the other. Near a place such an edge allows a line of
moves; where two lines cross, the piece touches twice. These crossings are the corners of the free region's border,
which chance finds only where there is slack, and a jigsaw has none.
"""

import math

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import bare
from flatprep.nest.board import Board, weighted_loss
from flatprep.nest.outlines import HAIR_MM, Outlines, Rings
from flatprep.nest.tables import Tables

MOST_LINES = 14
# Lines as near as this (mm) and as parallel as this are one.
SAME_MM, SAME_WAY = 1e-6, 1e-9
# Lines that cross at a smaller sine than this cross too far away to matter.
LEAST_SINE = 0.05


@bare
def add_line(lines: Floats, many: int, nx: float, ny: float, off: float) -> int:
    """Add the line of moves t with (nx, ny) · t = off, unless it is there or there is no room; return how many."""
    for k in range(many):
        cross = lines[k, 0] * ny - lines[k, 1] * nx
        same = lines[k, 0] * nx + lines[k, 1] * ny > 0.0
        if abs(cross) < SAME_WAY and abs(lines[k, 2] - (off if same else -off)) < SAME_MM:
            return many
    if many == MOST_LINES:
        return many
    lines[many, 0], lines[many, 1], lines[many, 2] = nx, ny, off
    return many + 1


@bare
def corner_lines(
    rings: Rings, a: int, b: int, dx: float, dy: float, reach: float, sign: float, lines: Floats, many: int
) -> int:
    """Add the moves that bring corners of b, at (dx, dy) from a, onto edges of a; `sign` is -1 where a moves, not b."""
    edge, box = rings.edge, rings.box
    for j in range(rings.at[b], rings.at[b + 1]):
        px, py = edge[j, 0] + dx, edge[j, 1] + dy
        if (
            px < box[a, 0] - reach
            or px > box[a, 2] + reach
            or py < box[a, 1] - reach
            or py > box[a, 3] + reach
        ):
            continue
        for i in range(rings.at[a], rings.at[a + 1]):
            ux, uy = edge[i, 2] - edge[i, 0], edge[i, 3] - edge[i, 1]
            wx, wy = px - edge[i, 0], py - edge[i, 1]
            length = math.sqrt(ux * ux + uy * uy)
            inside = (ux * wy - uy * wx) / length
            if abs(inside) > reach:
                continue
            along = (ux * wx + uy * wy) / length
            if along < -reach or along > length + reach:
                continue
            many = add_line(lines, many, -uy / length, ux / length, -sign * (inside + 2.0 * HAIR_MM))
    return many


@bare
def contact_lines(
    outlines: Outlines, board: Board, i: int, v: int, k: int, x: float, y: float, reach: float, lines: Floats
) -> int:
    """Collect the moves that bring piece i, in variant v at (x, y) in rectangle k, into contact; return how many."""
    box, rings = outlines.rings.box, outlines.rings
    left, low = x + box[v, 0], y + box[v, 1]
    right, high = x + box[v, 2], y + box[v, 3]
    many = 0
    if abs(board.rect[k, 0] - left) <= reach:
        many = add_line(lines, many, 1.0, 0.0, board.rect[k, 0] - left)
    if abs(board.rect[k, 2] - right) <= reach:
        many = add_line(lines, many, 1.0, 0.0, board.rect[k, 2] - right)
    if abs(board.rect[k, 1] - low) <= reach:
        many = add_line(lines, many, 0.0, 1.0, board.rect[k, 1] - low)
    if abs(board.rect[k, 3] - high) <= reach:
        many = add_line(lines, many, 0.0, 1.0, board.rect[k, 3] - high)
    for j in range(len(board.variant)):
        if (
            board.left[j] < right + reach
            and board.right[j] > left - reach
            and board.low[j] < high + reach
            and board.high[j] > low - reach
            and j != i
        ):
            w, dx, dy = board.variant[j], board.at[j, 0] - x, board.at[j, 1] - y
            many = corner_lines(rings, v, w, dx, dy, reach, -1.0, lines, many)
            many = corner_lines(rings, w, v, -dx, -dy, reach, 1.0, lines, many)
            if many == MOST_LINES:
                break
    return many


@bare
def snap(
    outlines: Outlines, tables: Tables, board: Board, i: int, kept: Floats, row: int, reach: float, lines: Floats
) -> int:
    """Try the crossings of contact lines near a candidate (a row of `keep_best`), in place; return the places tried."""
    v, k, x, y = int(kept[row, 1]), int(kept[row, 2]), kept[row, 3], kept[row, 4]
    many = contact_lines(outlines, board, i, v, k, x, y, reach, lines)
    tried = 0
    for a in range(many):
        for b in range(a):
            sine = lines[a, 0] * lines[b, 1] - lines[a, 1] * lines[b, 0]
            if abs(sine) < LEAST_SINE:
                continue
            tx = (lines[a, 2] * lines[b, 1] - lines[b, 2] * lines[a, 1]) / sine
            ty = (lines[a, 0] * lines[b, 2] - lines[b, 0] * lines[a, 2]) / sine
            if tx * tx + ty * ty > 4.0 * reach * reach or not _is_within(outlines, board, k, v, x + tx, y + ty):
                continue
            loss = weighted_loss(outlines, tables, board, i, v, x + tx, y + ty, kept[row, 0])
            tried += 1
            if loss < kept[row, 0]:
                kept[row, 0], kept[row, 3], kept[row, 4] = loss, x + tx, y + ty
                if loss == 0.0:
                    return tried
    return tried


@bare
def _is_within(outlines: Outlines, board: Board, k: int, v: int, x: float, y: float) -> bool:
    box, rect = outlines.rings.box, board.rect
    return (
        x + box[v, 0] >= rect[k, 0]
        and x + box[v, 2] <= rect[k, 2]
        and y + box[v, 1] >= rect[k, 1]
        and y + box[v, 3] <= rect[k, 3]
    )
