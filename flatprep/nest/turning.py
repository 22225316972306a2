"""Pieces at any angle: variants whose outline is computed when they turn.

A piece that turns freely has a variant of its own, outside the tables: its collisions are tested on the outlines.
A few more variants are room to try turns in.
"""

import math
from collections.abc import Sequence

import numpy as np

from flatprep.nest._jit import bare
from flatprep.nest.outlines import BLOCK, HAIR_MM, LONGEST_MITRE, Ints, Outlines, Rings

# Variants to try turns in: two for each candidate that `moves` keeps.
SCRATCH = 6
HUGE = 1e300


def with_own_variants(outlines: Outlines, pieces: Ints, free: Sequence[bool]) -> Outlines:
    """Add a variant for each piece, and `SCRATCH` more, to be filled by `turn_into`.

    Parameters
    ----------
    outlines
        The packed variants, v of them.
    pieces : ndarray, shape (n,), int64
        Shape of each piece; piece i gets variant v + i, the scratch ones come after.
    free
        For each shape, whether it may turn freely; if not, its pieces' variants are empty.

    Returns
    -------
    Outlines
        A copy; the given one is not touched.
    """
    first = outlines.first[:-1]
    edges = np.diff(outlines.rings.at[first], axis=1).ravel() * np.array(free, dtype=np.int64)
    poles = np.diff(outlines.pole_at[first], axis=1).ravel() * np.array(free, dtype=np.int64)
    shape = np.concatenate([pieces, np.zeros(SCRATCH, dtype=np.int64)])
    edge_at = _room(edges[pieces], int(edges.max()), len(outlines.rings.edge))
    blocks = -(-edges // BLOCK)
    block_at = _room(blocks[pieces], int(blocks.max()), len(outlines.rings.block))
    pole_at = _room(poles[pieces], int(poles.max()), len(outlines.pole))
    more = len(shape)
    rings = Rings(
        np.vstack([outlines.rings.edge, np.zeros((edge_at[-1, 1] - edge_at[0, 0], 4))]),
        np.vstack([outlines.rings.at, edge_at]),
        np.vstack([outlines.rings.box, np.zeros((more, 4))]),
        np.vstack([outlines.rings.block, np.zeros((block_at[-1, 1] - block_at[0, 0], 4))]),
        np.vstack([outlines.rings.block_at, block_at]),
    )
    return outlines._replace(
        rings=rings,
        pole=np.vstack([outlines.pole, np.zeros((pole_at[-1, 1] - pole_at[0, 0], 3))]),
        pole_at=np.vstack([outlines.pole_at, pole_at]),
        turn=np.vstack([outlines.turn, np.zeros((more, 3))]),
        shape=np.concatenate([outlines.shape, shape]),
        mirrored=np.concatenate([outlines.mirrored, np.zeros(more, dtype=np.int64)]),
        base=np.concatenate([outlines.base, outlines.first[shape]]),
    )


def _room(each: Ints, most: int, start: int) -> Ints:
    """Rows for `each` and for the scratch variants, from `start` on."""
    ends = start + np.cumsum([*each.tolist(), *(most for _ in range(SCRATCH))])
    return np.column_stack([np.concatenate([[start], ends[:-1]]), ends]).astype(np.int64)


@bare
def _turn_edges(rings: Rings, base: int, target: int, c: float, s: float) -> None:
    """Fill edges and boxes of variant `target` with those of `base`, turned by an angle of cosine c and sine s."""
    edge, box, block = rings.edge, rings.box, rings.block
    at, start = rings.at[target, 0], rings.at[base, 0]
    rings.at[target, 1] = at + rings.at[base, 1] - start
    rings.block_at[target, 1] = rings.block_at[target, 0] + rings.block_at[base, 1] - rings.block_at[base, 0]
    for k in range(rings.at[base, 1] - start):
        n = rings.block_at[target, 0] + k // BLOCK
        if k % BLOCK == 0:
            block[n, 0], block[n, 1], block[n, 2], block[n, 3] = HUGE, HUGE, -HUGE, -HUGE
        for end in (0, 2):
            x, y = edge[start + k, end], edge[start + k, end + 1]
            tx, ty = c * x - s * y, s * x + c * y
            edge[at + k, end], edge[at + k, end + 1] = tx, ty
            block[n, 0], block[n, 1] = min(block[n, 0], tx), min(block[n, 1], ty)
            block[n, 2], block[n, 3] = max(block[n, 2], tx), max(block[n, 3], ty)
    box[target, 0], box[target, 1], box[target, 2], box[target, 3] = HUGE, HUGE, -HUGE, -HUGE
    out = LONGEST_MITRE * HAIR_MM  # the true outline lies this far outside at the most
    for n in range(rings.block_at[target, 0], rings.block_at[target, 1]):
        box[target, 0], box[target, 1] = min(box[target, 0], block[n, 0] - out), min(box[target, 1], block[n, 1] - out)
        box[target, 2], box[target, 3] = max(box[target, 2], block[n, 2] + out), max(box[target, 3], block[n, 3] + out)


@bare
def turn_into(outlines: Outlines, source: int, target: int, turn_deg: float) -> None:
    """Fill variant `target` with the shape of `source`, in its mirror state, at a turn (degrees)."""
    base = outlines.base[source]
    by = math.radians(turn_deg - outlines.turn[base, 2])
    c, s = math.cos(by), math.sin(by)
    _turn_edges(outlines.rings, base, target, c, s)
    at, start = outlines.pole_at[target, 0], outlines.pole_at[base, 0]
    outlines.pole_at[target, 1] = at + outlines.pole_at[base, 1] - start
    for k in range(outlines.pole_at[base, 1] - start):
        x, y = outlines.pole[start + k, 0], outlines.pole[start + k, 1]
        outlines.pole[at + k, 0], outlines.pole[at + k, 1] = c * x - s * y, s * x + c * y
        outlines.pole[at + k, 2] = outlines.pole[start + k, 2]
    outlines.turn[target, 2] = turn_deg
    outlines.shape[target] = outlines.shape[base]
    outlines.mirrored[target] = outlines.mirrored[base]
    outlines.base[target] = base
