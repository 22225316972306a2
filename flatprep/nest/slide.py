"""Where a piece goes on a bed that holds others: first free places along rows, then down and left until it touches."""

from typing import NamedTuple

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import kernel
from flatprep.nest.trapezoids import THIN_MM, Cuts, Ints, back, past

SETTLED_MM = 1e-6
MOST_SLIDES = 12


class Bed(NamedTuple):
    """What lies in a container.

    Attributes
    ----------
    who : ndarray, shape (n,), int64
        Variants laid.
    at : ndarray, shape (n, 2)
        Where their origins are, mm.
    laid : ndarray, shape (1,), int64
        The first so many of them count.
    room : ndarray, shape (4,)
        Box of the container, mm.
    """

    who: Ints
    at: Floats
    laid: Ints
    room: Floats


@kernel
def first_free(cuts: Cuts, bed: Bed, v: int, x: float, y: float, most: float) -> float:
    """Least x, from `x` on, at which variant v at height y is free of what is laid; past `most` it may be taken."""
    box, who, at = cuts.box, bed.who, bed.at
    moved = True
    while moved and x <= most:
        moved = False
        for k in range(bed.laid[0]):
            a = who[k]
            if y + box[v, 1] >= at[k, 1] + box[a, 3] - THIN_MM or y + box[v, 3] <= at[k, 1] + box[a, 1] + THIN_MM:
                continue
            if x + box[v, 0] >= at[k, 0] + box[a, 2] - THIN_MM or x + box[v, 2] <= at[k, 0] + box[a, 0] + THIN_MM:
                continue
            of_a, of_v = (cuts.row_at[a], cuts.row_at[a + 1]), (cuts.row_at[v], cuts.row_at[v + 1])
            off = past(cuts.row, of_a, of_v, y - at[k, 1], x - at[k, 0])
            if off > x - at[k, 0] + THIN_MM:
                x = at[k, 0] + off
                moved = True
    return x


@kernel
def best_row(cuts: Cuts, bed: Bed, v: int, rows: Floats, since: Floats, reach: float) -> tuple[float, int]:
    """Row in which variant v reaches least far along x.

    Parameters
    ----------
    rows : ndarray, shape (r,)
        Heights to try; those that leave the container are passed over.
    since : ndarray, shape (r,)
        Where the search along each row goes on; brought up to date: what is laid only ever grows.
    reach
        Only places that reach less far count.

    Returns
    -------
    (float, int)
        x and the row; row -1 where there is no place.
    """
    box, room = cuts.box, bed.room
    best, found = 0.0, -1
    for r in range(len(rows)):
        y = rows[r]
        if y + box[v, 1] < room[1] - THIN_MM or y + box[v, 3] > room[3] + THIN_MM:
            continue
        most = min(room[2] + THIN_MM, reach) - box[v, 2]
        if since[r] > most:
            continue
        since[r] = first_free(cuts, bed, v, since[r], y, most)
        if since[r] <= most and (since[r] + box[v, 2] < reach - SETTLED_MM or (found >= 0 and y < rows[found])):
            best, found = since[r], r
            reach = min(reach, since[r] + box[v, 2])
    return best, found


@kernel
def settle(cuts: Cuts, bed: Bed, v: int, place: Floats) -> None:
    """Slide variant v from a free place down and left, in turns, until it touches both ways."""
    for _ in range(MOST_SLIDES):
        x, y = place[0], place[1]
        place[1] = min(y, _lowest(cuts, bed, v, x, y))
        place[0] = min(x, _leftmost(cuts, bed, v, x, place[1]))
        if max(x - place[0], y - place[1]) <= SETTLED_MM:
            break


@kernel
def _lowest(cuts: Cuts, bed: Bed, v: int, x: float, y: float) -> float:
    """Least height that variant v slides down to from (x, y)."""
    box, who, at = cuts.box, bed.who, bed.at
    low: float = bed.room[1] - box[v, 1]
    for k in range(bed.laid[0]):
        a = who[k]
        if x + box[v, 0] < at[k, 0] + box[a, 2] - THIN_MM and x + box[v, 2] > at[k, 0] + box[a, 0] + THIN_MM:
            of_a, of_v = (cuts.column_at[a], cuts.column_at[a + 1]), (cuts.column_at[v], cuts.column_at[v + 1])
            low = max(low, at[k, 1] + back(cuts.column, of_a, of_v, x - at[k, 0], y - at[k, 1]))
    return low


@kernel
def _leftmost(cuts: Cuts, bed: Bed, v: int, x: float, y: float) -> float:
    """Least x that variant v slides back to from (x, y)."""
    box, who, at = cuts.box, bed.who, bed.at
    left: float = bed.room[0] - box[v, 0]
    for k in range(bed.laid[0]):
        a = who[k]
        if y + box[v, 1] < at[k, 1] + box[a, 3] - THIN_MM and y + box[v, 3] > at[k, 1] + box[a, 1] + THIN_MM:
            of_a, of_v = (cuts.row_at[a], cuts.row_at[a + 1]), (cuts.row_at[v], cuts.row_at[v + 1])
            left = max(left, at[k, 0] + back(cuts.row, of_a, of_v, y - at[k, 1], x - at[k, 0]))
    return left


def contact_rows(cuts: Cuts, v: int, bed: Bed, seen: int) -> Floats:
    """Heights at which a level side of variant v meets a level edge of a piece laid after the first `seen`."""
    levels = [
        y + cuts.level[cuts.level_at[w] : cuts.level_at[w + 1]]
        for w, y in zip(bed.who[seen : bed.laid[0]], bed.at[seen : bed.laid[0], 1], strict=True)
    ]
    level = np.concatenate([np.zeros(0), *levels])
    mine = cuts.level[cuts.level_at[v] : cuts.level_at[v + 1]]
    sides = [side for side in (cuts.box[v, 1], cuts.box[v, 3]) if (np.abs(mine - side) <= SETTLED_MM).any()]
    rows = np.concatenate([np.zeros(0), *(level - side for side in sides)])
    inside = (rows >= bed.room[1] - cuts.box[v, 1] - THIN_MM) & (rows <= bed.room[3] - cuts.box[v, 3] + THIN_MM)
    return np.asarray(rows[inside], dtype=np.float64)


def grid_rows(cuts: Cuts, v: int, room: Floats, count: int) -> Floats:
    """Heights spread over what the container leaves variant v, the lowest and the highest among them."""
    low, high = float(room[1] - cuts.box[v, 1]), float(room[3] - cuts.box[v, 3])
    return np.linspace(low, high, count) if high > low else np.array([low])
