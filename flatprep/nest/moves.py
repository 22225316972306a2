"""A better place for one piece: sample widely, keep the three best, walk downhill from them, snap to contacts."""

import math
from typing import NamedTuple

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import bare
from flatprep.nest.board import Ground, put, settle, weighted_loss
from flatprep.nest.outlines import Outlines
from flatprep.nest.snap import Contacts, room_for_contacts, snap
from flatprep.nest.spots import any_edge, any_spot, clamp, corner_spot, fits, near_spot, neighbour
from flatprep.nest.turning import SCRATCH, turn_into

# Over one container; over several twice as many.
WIDE_SAMPLES = 20
NEAR_SAMPLES = 30
CORNER_SAMPLES = 12
KEPT = SCRATCH // 2
# Steps of the walk, as shares of the piece's smaller side: first, where the three stop, where the best one stops.
FIRST_STEP, ROUGH_STEP, FINE_STEP = 0.25, 0.02, 0.0005
LONGER, SHORTER = 1.1, 0.5
# Contacts are looked for so far around a place, as a share of the same.
SNAP_REACH = 0.06
# Share of the steps that turn a piece, where it may turn; share of those that lay an edge along another.
TURN_SHARE, ALONG_SHARE = 0.35, 0.4
HUGE = 1e300


class Room(NamedTuple):
    """Room to work in.

    Attributes
    ----------
    kept : ndarray, shape (KEPT, 6), float64
        Candidates, best first: loss (mm²), variant, rectangle, x, y, step (mm).
    contacts : Contacts
    """

    kept: Floats
    contacts: Contacts


def new_room() -> Room:
    """Return room for any number of moves."""
    return Room(np.zeros((KEPT, 6)), room_for_contacts())


@bare
def keep_best(kept: Floats, v: int, k: int, x: float, y: float, loss: float) -> None:
    """Put a candidate into `Room.kept` if it beats the last row."""
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
    e = any_edge(outlines.rings, v, rng)
    edge = outlines.rings.edge
    ux, uy = edge[e, 2] - edge[e, 0], edge[e, 3] - edge[e, 1]
    length = math.sqrt(ux * ux + uy * uy)
    return ux / length, uy / length


@bare
def along_another(ground: Ground, i: int, v: int, rng: np.random.Generator) -> float:
    """Return a small turn (degrees) that lays an edge of variant v along one of a neighbour, or along an axis."""
    rings = ground.outlines.rings
    e = any_edge(rings, v, rng)
    mine = math.atan2(rings.edge[e, 3] - rings.edge[e, 1], rings.edge[e, 2] - rings.edge[e, 0])
    other, whole = 0.0, 0.5 * math.pi
    if rng.random() < 0.7:
        f = any_edge(rings, ground.board.variant[neighbour(ground.board, i, rng)], rng)
        other = math.atan2(rings.edge[f, 3] - rings.edge[f, 1], rings.edge[f, 2] - rings.edge[f, 0])
        whole = math.pi
    off = (other - mine) / whole
    return math.degrees((off - math.floor(off + 0.5)) * whole)


@bare
def turn_step(ground: Ground, i: int, kept: Floats, row: int, rng: np.random.Generator) -> bool:
    """Try to turn a candidate, about its largest inner circle; tell whether that was better.

    The candidate is in one of its row's two scratch variants; the other one takes the try.
    """
    o = ground.outlines
    v, k, step = int(kept[row, 1]), int(kept[row, 2]), kept[row, 5]
    first = len(o.shape) - SCRATCH + 2 * row
    target = first + 1 if v == first else first
    by = math.degrees(step / (0.5 * o.size[o.shape[v], 1])) * (2.0 * rng.random() - 1.0)
    if rng.random() < ALONG_SHARE:
        by = along_another(ground, i, v, rng)
    turn_into(o, v, target, o.turn[v, 2] + by)
    if not fits(o, ground.board, k, target):
        return False
    old, new = o.pole_at[v, 0], o.pole_at[target, 0]
    x = kept[row, 3] + o.pole[old, 0] - o.pole[new, 0]
    y = kept[row, 4] + o.pole[old, 1] - o.pole[new, 1]
    x, y = clamp(o, ground.board, k, target, x, y)
    loss = weighted_loss(ground, i, target, x, y, kept[row, 0])
    if loss >= kept[row, 0]:
        return False
    kept[row, 0], kept[row, 1], kept[row, 3], kept[row, 4] = loss, target, x, y
    return True


@bare
def shift_step(ground: Ground, i: int, kept: Floats, row: int, rng: np.random.Generator) -> bool:
    """Try to move a candidate by its step, forth or back in a random direction; tell whether that was better."""
    v, k = int(kept[row, 1]), int(kept[row, 2])
    way_x, way_y = any_way(ground.outlines, v, rng)
    ahead = kept[row, 5] if rng.random() < 0.5 else -kept[row, 5]
    for _ in range(2):
        x, y = kept[row, 3] + ahead * way_x, kept[row, 4] + ahead * way_y
        x, y = clamp(ground.outlines, ground.board, k, v, x, y)
        loss = weighted_loss(ground, i, v, x, y, kept[row, 0])
        if loss < kept[row, 0]:
            kept[row, 0], kept[row, 3], kept[row, 4] = loss, x, y
            return True
        ahead = -ahead
    return False


@bare
def walk(ground: Ground, i: int, kept: Floats, row: int, stop: float, rng: np.random.Generator) -> int:
    """Walk downhill from a candidate (a row of `Room.kept`), in place; return the number of places tried.

    The step grows after a move that helps and is halved after one that does not, until it is below `stop` (mm).
    """
    outlines = ground.outlines
    turning = ground.board.turning[outlines.shape[int(kept[row, 1])]] == 1
    first = len(outlines.shape) - SCRATCH + 2 * row
    if turning and int(kept[row, 1]) < first:
        turn_into(outlines, int(kept[row, 1]), first, outlines.turn[int(kept[row, 1]), 2])
        kept[row, 1] = first
    tried = 0
    while kept[row, 5] > stop and kept[row, 0] > 0.0:
        if turning and rng.random() < TURN_SHARE:
            gained = turn_step(ground, i, kept, row, rng)
            tried += 1
        else:
            gained = shift_step(ground, i, kept, row, rng)
            tried += 2
        kept[row, 5] *= LONGER if gained else SHORTER
    return tried


@bare
def sample(ground: Ground, i: int, kept: Floats, rng: np.random.Generator) -> int:
    """Fill `Room.kept` with the best of random places for piece i; return the number of places tried."""
    outlines, board = ground.outlines, ground.board
    shape = outlines.shape[board.variant[i]]
    first = outlines.first[shape]
    variants = board.usable[shape]
    tried = 0
    wide = WIDE_SAMPLES * min(len(board.rect), 2)
    for trial in range(wide + NEAR_SAMPLES + CORNER_SAMPLES):
        v = first + int(rng.random() * variants)
        k = board.home[i]
        if trial < wide:
            k = int(rng.random() * len(board.rect))
        elif rng.random() < 0.5:
            v = board.variant[i]
        if not fits(outlines, board, k, v):
            continue
        if trial < wide:
            x, y = any_spot(outlines, board, k, v, rng)
        elif trial < wide + NEAR_SAMPLES:
            x, y = near_spot(outlines, board, i, v, rng)
        else:
            x, y = corner_spot(outlines, board, i, v, rng)
        x, y = clamp(outlines, board, k, v, x, y)
        tried += 1
        keep_best(kept, v, k, x, y, weighted_loss(ground, i, v, x, y, kept[KEPT - 1, 0]))
    return tried


@bare
def move_piece(ground: Ground, i: int, room: Room, rng: np.random.Generator) -> int:
    """Look for a place of piece i with less weighted loss and move it there; return the number of places tried."""
    outlines, board, kept = ground.outlines, ground.board, room.kept
    v, x, y = board.variant[i], board.at[i, 0], board.at[i, 1]
    here = weighted_loss(ground, i, v, x, y, HUGE)
    for row in range(KEPT):
        kept[row, 0] = HUGE
    keep_best(kept, v, board.home[i], x, y, here)
    tried = sample(ground, i, kept, rng) + 1
    side = outlines.size[outlines.shape[v], 3]
    for row in range(KEPT):
        if kept[row, 0] < HUGE:
            kept[row, 5] = FIRST_STEP * side
            tried += walk(ground, i, kept, row, ROUGH_STEP * side, rng)
    best = best_row(kept)
    if kept[best, 0] > 0.0:
        room.contacts.within[0] = SNAP_REACH * side
        tried += snap(ground, i, kept, best, room.contacts, rng)
        tried += walk(ground, i, kept, best, FINE_STEP * side, rng)
    if kept[best, 0] < here:
        take(ground, i, kept, best)
    return tried


@bare
def best_row(kept: Floats) -> int:
    """Row of least loss; a function of its own, else all that takes a row is compiled twice, once for the number 0."""
    best = 0
    for row in range(1, KEPT):
        if kept[row, 0] < kept[best, 0]:
            best = row
    return best


@bare
def take(ground: Ground, i: int, kept: Floats, row: int) -> None:
    """Lay piece i as a row of `Room.kept` says; a turned one in the variant of its own."""
    outlines, board = ground.outlines, ground.board
    v = int(kept[row, 1])
    own = len(outlines.shape) - SCRATCH - len(board.variant) + i
    if v > own:
        turn_into(outlines, v, own, outlines.turn[v, 2])
        v = own
    board.home[i] = int(kept[row, 2])
    put(outlines, board, i, v, kept[row, 3], kept[row, 4])
    settle(ground, i)
