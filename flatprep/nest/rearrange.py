"""Lead a layout that cannot be untangled elsewhere: two large pieces change over, or those of one neighbourhood do."""

import numpy as np

from flatprep.nest.board import put
from flatprep.nest.engine import Engine
from flatprep.nest.spots import clamp, fits

NEAR_SHARE = 0.5
"""How often a neighbourhood is shuffled, else two large pieces change over."""
FEWEST_NEAR, MOST_NEAR = 3, 5
"""Pieces of a neighbourhood."""


def rearrange(engine: Engine) -> None:
    """Change the layout on the board about, by chance far and wide or in one place; overlap is left to be removed."""
    if engine.rng.random() < NEAR_SHARE:
        shuffle_near(engine)
    else:
        swap_two(engine)


def swap_two(engine: Engine) -> None:
    """Let two large pieces of different shapes change places, each in any of its variants."""
    board, o, rng = engine.board, engine.outlines, engine.rng
    n = int(board.movable[0])
    shape = o.shape[board.variant[:n]]
    large = np.argsort(-o.size[shape, 0], kind="stable")[: max(2, (n + 1) // 2)]
    i = int(rng.choice(large))
    others = large[shape[large] != shape[i]]
    if len(others):
        _change_places(engine, [i, int(rng.choice(others))], [1, 0])


def shuffle_near(engine: Engine) -> None:
    """Let a piece and the nearest ones around it change places at random, each in any of its variants."""
    board, rng = engine.board, engine.rng
    n = int(board.movable[0])
    x, y = board.left[:n] + board.right[:n], board.low[:n] + board.high[:n]
    one = int(rng.integers(n))
    near = np.argsort((x - x[one]) ** 2 + (y - y[one]) ** 2, kind="stable")[: rng.integers(FEWEST_NEAR, MOST_NEAR + 1)]
    _change_places(engine, near.tolist(), rng.permutation(len(near)).tolist())


def _change_places(engine: Engine, pieces: list[int], order: list[int]) -> None:
    """Lay each piece where the one is that `order` says, middle of box on middle of box, if it fits that container."""
    board, o, rng = engine.board, engine.outlines, engine.rng
    boxes = [(board.left[i] + board.right[i], board.low[i] + board.high[i], board.home[i]) for i in pieces]
    for i, (x, y, home) in zip(pieces, [boxes[k] for k in order], strict=True):
        shape = o.shape[board.variant[i]]
        v = int(o.first[shape] + rng.integers(board.usable[shape]))
        if fits(o, board, int(home), v):
            board.home[i] = home
            box = o.rings.box[v]
            put(o, board, i, v, *clamp(o, board, home, v, 0.5 * (x - box[0] - box[2]), 0.5 * (y - box[1] - box[3])))
