"""What is known of two shapes at every offset: small grids, each node computed when it is first asked for.

For every pair of shapes and relative turn a grid of nodes covers the box in which the two can meet. A node holds

- its separation: where the two are free, the distance of the outlines; where they collide, minus a lower bound of
  the move that frees them. Both change by at most the distance moved (they are 1-Lipschitz), so the nearest node
  alone mostly tells for sure whether an offset is free or collides; the rest is tested exactly;
- the loss of the collision, read by bilinear interpolation.

So a look-up costs the same for any number of corners and windows, and nothing is computed before it is needed.
"""

import math
from typing import NamedTuple

import numpy as np
import numpy.typing as npt

from flatprep.geom.bulge import Floats
from flatprep.nest._jit import bare, inner
from flatprep.nest.contact import collision_loss, depth, gap, overlap
from flatprep.nest.outlines import Ints, Outlines, turned

# Nodes a side: as many as go into MB of grids near the processor, within bounds; fewer where the bounds take too much.
MOST_NODES, GOOD_NODES, LEAST_NODES = 128, 64, 12
NEAR_MB = 6.0
# All grids together, if every node were asked for; memory is taken page by page as nodes are filled.
MOST_MB = 100.0
# Separations are stored as float32: they are read short by this much of the grid's cell.
ROUNDING = 1e-3
# Offsets look at the nearest node, so none is further from it than half the diagonal of a cell, and that rounding.
FURTHEST = 0.51
LEAST_APART = 1e-30  # stands for 0, which means: not yet known
WHOLE_TURN = 360_000_000  # in millionths of a degree


class Tables(NamedTuple):
    """Grids of pairs. v counts variants, t grids, n nodes a side.

    Attributes
    ----------
    of : ndarray, shape (v, v), int32
        Grid of the pair (a, b) plus 1; minus that, where it is kept for (b, a); 0 where there is none.
    origin, cell : ndarray, shape (t, 2), float64
        First node and spacing of nodes, mm, as offsets of b from a with the turn of a undone.
    pair : ndarray, shape (t, 2), int64
        Variants a and b that stand for the grid.
    node : ndarray, shape (t, n, n, 2), float32
        Separation (mm) and loss (mm²) of node (x, y); 0: not yet known.
    """

    of: npt.NDArray[np.int32]
    origin: Floats
    cell: Floats
    pair: Ints
    node: npt.NDArray[np.float32]


def no_tables(outlines: Outlines) -> Tables:
    """Tables that send every question to the exact geometry: for pieces that turn freely."""
    v = len(outlines.shape)
    none = np.zeros((0, 2))
    return Tables(
        np.zeros((v, v), dtype=np.int32),
        none,
        none,
        np.zeros((0, 2), dtype=np.int64),
        np.zeros((0, 1, 1, 2), np.float32),
    )


def prepare_tables(outlines: Outlines, packed: int) -> Tables:
    """Empty grids for every pair of the first `packed` variants; pairs that differ by a common turn share one."""
    of, pairs = _grids_of_pairs(outlines, packed)
    n = nodes_a_side(len(pairs))
    a, b = pairs.T
    reach = _boxes_unturned(outlines, a, a), _boxes_unturned(outlines, a, b)
    low = reach[0][:, :2] - reach[1][:, 2:]
    high = reach[0][:, 2:] - reach[1][:, :2]
    return Tables(of, low, (high - low) / (n - 1), pairs, np.zeros((len(pairs), n, n, 2), dtype=np.float32))


def nodes_a_side(grids: int) -> int:
    """Return how fine so many grids may be."""
    near, most = (np.sqrt(mb * 1e6 / (8.0 * grids)) for mb in (NEAR_MB, MOST_MB))
    return int(max(min(np.clip(near, GOOD_NODES, MOST_NODES), most), LEAST_NODES))


def _grids_of_pairs(outlines: Outlines, packed: int) -> tuple[npt.NDArray[np.int32], Ints]:
    """Give a number to each pair of shapes, mirror states and relative turn (to 1e-6 degrees)."""
    v = len(outlines.shape)
    a, b = np.triu_indices(packed)
    relative = np.round((outlines.turn[b, 2] - outlines.turn[a, 2]) % 360.0 * 1e6).astype(np.int64) % WHOLE_TURN
    state = 2 * outlines.shape + outlines.mirrored
    key = (state[a] * (state.max() + 1) + state[b]) * WHOLE_TURN + relative
    _, first, grid = np.unique(key, return_index=True, return_inverse=True)
    of = np.zeros((v, v), dtype=np.int32)
    of[b, a] = -(grid + 1)
    of[a, b] = grid + 1
    return of, np.ascontiguousarray(np.column_stack([a, b])[first])


def _boxes_unturned(outlines: Outlines, a: Ints, b: Ints) -> Floats:
    """Boxes of variants b with the turns of variants a undone, shape (t, 4)."""
    rings, boxes = outlines.rings, np.empty((len(a), 4))
    for t, (va, vb) in enumerate(zip(a, b, strict=True)):
        corners = rings.edge[rings.at[vb, 0] : rings.at[vb, 1], :2]
        back = turned(corners, -outlines.turn[va, 2], mirrored=False)
        boxes[t] = *back.min(axis=0), *back.max(axis=0)
    return boxes


@bare
def node_offset(outlines: Outlines, tables: Tables, t: int, i: int, j: int) -> tuple[float, float]:
    """Return the offset (mm) of the grid's second variant from its first at a node."""
    a = tables.pair[t, 0]
    x = tables.origin[t, 0] + i * tables.cell[t, 0]
    y = tables.origin[t, 1] + j * tables.cell[t, 1]
    c, s = outlines.turn[a, 0], outlines.turn[a, 1]
    return c * x - s * y, s * x + c * y


@bare
def fill_separation(outlines: Outlines, tables: Tables, t: int, i: int, j: int) -> None:
    """Compute the separation at a node, no further than the offsets that look there need it."""
    a, b = tables.pair[t, 0], tables.pair[t, 1]
    dx, dy = node_offset(outlines, tables, t, i, j)
    needed = FURTHEST * math.hypot(tables.cell[t, 0], tables.cell[t, 1])
    if overlap(outlines, a, b, dx, dy):
        apart = -depth(outlines, a, b, dx, dy)
        if apart > -needed:
            apart = min(apart, -gap(outlines.rings, a, b, dx, dy, needed))
    else:
        apart = gap(outlines.rings, a, b, dx, dy, needed)
    tables.node[t, i, j, 0] = apart if abs(apart) > LEAST_APART else LEAST_APART


@bare
def fill_losses(outlines: Outlines, tables: Tables, t: int, i: int, j: int) -> None:
    """Compute those losses at the four nodes of a cell that are not yet known."""
    a, b = tables.pair[t, 0], tables.pair[t, 1]
    for k in range(i, i + 2):
        for m in range(j, j + 2):
            if tables.node[t, k, m, 1] == 0.0:
                dx, dy = node_offset(outlines, tables, t, k, m)
                tables.node[t, k, m, 1] = collision_loss(outlines, a, b, dx, dy)


@inner
def pair_loss(outlines: Outlines, tables: Tables, a: int, b: int, dx: float, dy: float) -> float:
    """Loss (mm²) of variant b, its origin (dx, dy) mm from that of variant a: 0 just where they do not overlap."""
    t = tables.of[a, b]
    if t == 0:
        return collision_loss(outlines, a, b, dx, dy) if overlap(outlines, a, b, dx, dy) else 0.0
    if t < 0:
        a, b, dx, dy, t = b, a, -dx, -dy, -t
    t -= 1
    c, s = outlines.turn[a, 0], outlines.turn[a, 1]
    wide, tall = tables.cell[t, 0], tables.cell[t, 1]
    u = (c * dx + s * dy - tables.origin[t, 0]) / wide
    w = (c * dy - s * dx - tables.origin[t, 1]) / tall
    n = tables.node.shape[1]
    if u <= 0.0 or w <= 0.0 or u >= n - 1 or w >= n - 1:
        return 0.0
    i, j = int(u + 0.5), int(w + 0.5)
    if tables.node[t, i, j, 0] == 0.0:
        fill_separation(outlines, tables, t, i, j)
    apart = float(tables.node[t, i, j, 0])
    off = math.sqrt((u - i) * (u - i) * wide * wide + (w - j) * (w - j) * tall * tall) + ROUNDING * wide
    if apart > off:
        return 0.0
    if apart >= -off and not overlap(outlines, a, b, dx, dy):
        return 0.0
    i, j = int(u), int(w)
    u, w = u - i, w - j
    known = tables.node[t, i, j, 1] > 0.0 and tables.node[t, i + 1, j, 1] > 0.0
    if not (known and tables.node[t, i, j + 1, 1] > 0.0 and tables.node[t, i + 1, j + 1, 1] > 0.0):
        fill_losses(outlines, tables, t, i, j)
    near = tables.node[t, i, j, 1] * (1.0 - w) + tables.node[t, i, j + 1, 1] * w
    far = tables.node[t, i + 1, j, 1] * (1.0 - w) + tables.node[t, i + 1, j + 1, 1] * w
    return float(near * (1.0 - u) + far * u)
