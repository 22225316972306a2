"""Bring a piece into contact: places near by where it touches two neighbours, or one and the border, at once.

Two outlines touch where a corner of one lies on an edge of the other. Near a place such an edge allows a line of
moves; where two lines cross, the piece touches twice. These crossings are the corners of the free region's border,
which chance finds only where there is slack, and a jigsaw has none.
"""

import math
from typing import NamedTuple

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import bare
from flatprep.nest.board import Ground, weighted_loss
from flatprep.nest.outlines import HAIR_MM, Ints, Rings

MOST_LINES = 14
# Lines as near as this (mm) and as parallel as this are one.
SAME_MM, SAME_WAY = 1e-6, 1e-9
# Lines that cross at a smaller sine than this cross too far away to matter.
LEAST_SINE = 0.05


class Contacts(NamedTuple):
    """Moves t (mm) of a piece that bring it into contact: lines n · t = d.

    Attributes
    ----------
    line : ndarray, shape (MOST_LINES, 3), float64
        Unit normal n and d, mm.
    many : ndarray, shape (2,), int64
        Number of lines kept, and of lines found: of too many, chance keeps some.
    within : ndarray, shape (2,), float64
        How far around the piece contacts are looked for, mm; and 1.0, or -1.0 while the moves of the other piece are
        added, turned round.
    """

    line: Floats
    many: Ints
    within: Floats


def room_for_contacts() -> Contacts:
    """Return empty contacts, to be used again and again."""
    return Contacts(np.zeros((MOST_LINES, 3)), np.zeros(2, dtype=np.int64), np.ones(2))


@bare
def add_line(contacts: Contacts, nx: float, ny: float, off: float, rng: np.random.Generator) -> None:
    """Add the line of moves t with (nx, ny) · t = off, unless it is there; where no room is left, maybe for another.

    Each line found has the same chance to be kept (reservoir sampling, Vitter 1985).
    """
    lines, many = contacts.line, contacts.many[0]
    for k in range(many):
        cross = lines[k, 0] * ny - lines[k, 1] * nx
        same = lines[k, 0] * nx + lines[k, 1] * ny > 0.0
        if abs(cross) < SAME_WAY and abs(lines[k, 2] - (off if same else -off)) < SAME_MM:
            return
    contacts.many[1] += 1
    row = many if many < MOST_LINES else int(rng.random() * contacts.many[1])
    if row < MOST_LINES:
        lines[row, 0], lines[row, 1], lines[row, 2] = nx, ny, off
        contacts.many[0] = max(many, row + 1)


@bare
def corner_lines(
    rings: Rings, a: int, b: int, shift: tuple[float, float], contacts: Contacts, rng: np.random.Generator
) -> None:
    """Add the moves of b, its origin shifted from that of a (mm), that bring its corners onto edges of a."""
    edge, box = rings.edge, rings.box
    dx, dy = shift
    reach, sign = contacts.within[0], contacts.within[1]
    for j in range(rings.at[b, 0], rings.at[b, 1]):
        px, py = edge[j, 0] + dx, edge[j, 1] + dy
        if px < box[a, 0] - reach or px > box[a, 2] + reach or py < box[a, 1] - reach or py > box[a, 3] + reach:
            continue
        for i in range(rings.at[a, 0], rings.at[a, 1]):
            ux, uy = edge[i, 2] - edge[i, 0], edge[i, 3] - edge[i, 1]
            wx, wy = px - edge[i, 0], py - edge[i, 1]
            length = math.sqrt(ux * ux + uy * uy)
            inside = (ux * wy - uy * wx) / length
            if abs(inside) > reach:
                continue
            along = (ux * wx + uy * wy) / length
            if along < -reach or along > length + reach:
                continue
            add_line(contacts, -uy / length, ux / length, -sign * (inside + 2.0 * HAIR_MM), rng)


@bare
def contact_lines(ground: Ground, i: int, kept: Floats, row: int, contacts: Contacts, rng: np.random.Generator) -> None:
    """Collect the moves that bring piece i, laid as a row of `moves.keep_best` says, into contact."""
    board, rings = ground.board, ground.outlines.rings
    box, rect, reach = rings.box, board.rect, contacts.within[0]
    v, k, x, y = int(kept[row, 1]), int(kept[row, 2]), kept[row, 3], kept[row, 4]
    left, low = x + box[v, 0], y + box[v, 1]
    right, high = x + box[v, 2], y + box[v, 3]
    contacts.many[0] = contacts.many[1] = 0
    for off in (rect[k, 0] - left, rect[k, 2] - right):
        if abs(off) <= reach:
            add_line(contacts, 1.0, 0.0, off, rng)
    for off in (rect[k, 1] - low, rect[k, 3] - high):
        if abs(off) <= reach:
            add_line(contacts, 0.0, 1.0, off, rng)
    for j in range(len(board.variant)):
        if (
            board.left[j] < right + reach
            and board.right[j] > left - reach
            and board.low[j] < high + reach
            and board.high[j] > low - reach
            and j != i
        ):
            w, dx, dy = board.variant[j], board.at[j, 0] - x, board.at[j, 1] - y
            contacts.within[1] = -1.0
            corner_lines(rings, v, w, (dx, dy), contacts, rng)
            contacts.within[1] = 1.0
            corner_lines(rings, w, v, (-dx, -dy), contacts, rng)


@bare
def snap(ground: Ground, i: int, kept: Floats, row: int, contacts: Contacts, rng: np.random.Generator) -> int:
    """Try the crossings of contact lines near a row of `moves.keep_best`, in place; return the places tried."""
    contact_lines(ground, i, kept, row, contacts, rng)
    lines, reach = contacts.line, contacts.within[0]
    v, k, x, y = int(kept[row, 1]), int(kept[row, 2]), kept[row, 3], kept[row, 4]
    tried = 0
    for a in range(contacts.many[0]):
        for b in range(a):
            sine = lines[a, 0] * lines[b, 1] - lines[a, 1] * lines[b, 0]
            if abs(sine) < LEAST_SINE:
                continue
            tx = (lines[a, 2] * lines[b, 1] - lines[b, 2] * lines[a, 1]) / sine
            ty = (lines[a, 0] * lines[b, 2] - lines[b, 0] * lines[a, 2]) / sine
            if tx * tx + ty * ty > 4.0 * reach * reach or not is_within(ground, k, v, x + tx, y + ty):
                continue
            loss = weighted_loss(ground, i, v, x + tx, y + ty, kept[row, 0])
            tried += 1
            if loss < kept[row, 0]:
                kept[row, 0], kept[row, 3], kept[row, 4] = loss, x + tx, y + ty
    return tried


@bare
def is_within(ground: Ground, k: int, v: int, x: float, y: float) -> bool:
    """Tell whether variant v at (x, y) lies within rectangle k, give or take a hair."""
    box, rect = ground.outlines.rings.box, ground.board.rect
    return bool(
        x + box[v, 0] >= rect[k, 0] - HAIR_MM
        and x + box[v, 2] <= rect[k, 2] + HAIR_MM
        and y + box[v, 1] >= rect[k, 1] - HAIR_MM
        and y + box[v, 3] <= rect[k, 3] + HAIR_MM
    )
