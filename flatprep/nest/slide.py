"""Where a piece goes on a bed that holds others: first free places along rows, then down and left until it touches."""

from typing import NamedTuple

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import kernel
from flatprep.nest.trapezoids import MOST_LEVELS, THIN_MM, Cuts, Ints, back, past

SETTLED_MM = 1e-6
MOST_SLIDES = 12
EVEN_ROWS = 40
"""Heights spread over a container at which a piece is tried."""
SAME_ROW_MM = 1e-7


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


@kernel
def rows_for(cuts: Cuts, bed: Bed, v: int, rows: Floats, since: Floats, seen: int) -> tuple[Floats, Floats]:
    """Heights to try for variant v, and where the search along each begins.

    Parameters
    ----------
    rows, since : ndarray, shape (r,)
        Those known, empty at first: then heights spread evenly over the container are put in, lowest and highest
        among them.
    seen
        Pieces laid that the known rows have regarded. For each later one come the heights at which a level side of
        the variant meets a level edge of it, each once.
    """
    low, high = bed.room[1] - cuts.box[v, 1], bed.room[3] - cuts.box[v, 3]
    count = len(rows)
    most = MOST_LEVELS * 2 * (bed.laid[0] - seen) + max(count, EVEN_ROWS)
    every, start = np.empty(most), np.empty(most)
    for r in range(most):  # plain loops compile fast
        start[r] = since[r] if r < count else bed.room[0] - cuts.box[v, 0]
        every[r] = rows[r] if r < count else 0.0
    if count == 0:
        count = EVEN_ROWS if high > low else 1
        for r in range(count):
            every[r] = low + (high - low) * r / max(count - 1, 1)
    for side in (cuts.box[v, 1], cuts.box[v, 3]):
        if not _has_level(cuts, v, side):
            continue
        for k in range(seen, bed.laid[0]):
            for e in range(cuts.level_at[bed.who[k]], cuts.level_at[bed.who[k] + 1]):
                y = bed.at[k, 1] + cuts.level[e] - side
                if low - THIN_MM <= y <= high + THIN_MM and not _is_near(every[:count], y):
                    every[count] = y
                    count += 1
    return every[:count].copy(), start[:count].copy()


@kernel
def _has_level(cuts: Cuts, v: int, side: float) -> bool:
    """Tell whether variant v has a long level edge at the height of a side of its box."""
    return bool(_is_near(cuts.level[cuts.level_at[v] : cuts.level_at[v + 1]], side))


@kernel
def _is_near(known: Floats, y: float) -> bool:
    """Tell whether a height is among those known."""
    near = 0
    for other in known:
        near += abs(other - y) <= SAME_ROW_MM
    return near > 0
