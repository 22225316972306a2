"""Shorten the last rectangle of the field: roam far and wide first, tighten what was found last."""

from collections.abc import Callable

import numpy as np

from flatprep.nest.board import put
from flatprep.nest.engine import Engine, Spots
from flatprep.nest.moves import clamp, fits

ROAM_SHARE = 0.8
LONGEST_STEP, SHORTEST_STEP = 0.05, 0.001
ROAM_PATIENCE, ROAM_TRIES = 200, 3
TIGHT_LONGEST, TIGHT_SHORTEST = 0.0005, 0.00001
TIGHT_PATIENCE = 100
SHELF = 40


def reach_mm(engine: Engine) -> float:
    """Length the pieces take up in the last rectangle, mm."""
    board = engine.board
    last = board.home == len(board.rect) - 1
    last[board.movable[0] :] = False
    return float(board.right[last].max() - board.rect[-1, 0]) if last.any() else 0.0


def shorten(engine: Engine, length_mm: float) -> None:
    """Cut the last rectangle to a length: what lies right of a random cut moves left by the difference."""
    board = engine.board
    cut = board.rect[-1, 0] + engine.rng.random() * length_mm
    by = engine.length_mm - length_mm
    board.rect[-1, 2] = board.rect[-1, 0] + length_mm
    last = len(board.rect) - 1
    for i in range(board.movable[0]):
        if board.home[i] != last:
            continue
        x, y = board.at[i]
        if 0.5 * (board.left[i] + board.right[i]) > cut:
            x -= by
        put(engine.outlines, board, i, board.variant[i], *clamp(engine.outlines, board, last, board.variant[i], x, y))


def swap_two(engine: Engine) -> None:
    """Let two large pieces of different shapes change places, each in any of its variants."""
    board, o, rng = engine.board, engine.outlines, engine.rng
    n = board.movable[0]
    shape = o.shape[board.variant[:n]]
    large = np.argsort(-o.size[shape, 0], kind="stable")[: max(2, (n + 1) // 2)]
    i = int(rng.choice(large))
    others = large[shape[large] != shape[i]]
    if len(others) == 0:
        return
    j = int(rng.choice(others))
    middle = [(0.5 * (board.left[k] + board.right[k]), 0.5 * (board.low[k] + board.high[k])) for k in (i, j)]
    homes = board.home[i], board.home[j]
    for k, (x, y), home in ((i, middle[1], homes[1]), (j, middle[0], homes[0])):
        v = int(rng.integers(o.first[shape[k]], o.first[shape[k] + 1]))
        if fits(o, board, home, v):
            board.home[k] = home
            box = o.rings.box[v]
            put(o, board, k, v, *clamp(o, board, home, v, x - 0.5 * (box[0] + box[2]), y - 0.5 * (box[1] + box[3])))


def roam(engine: Engine, best: Spots, found: Callable[[Spots], None]) -> Spots:
    """Shorten from a layout without overlap until the time for it is gone; return the shortest layout found."""
    step = LONGEST_STEP
    shelf: list[Spots] = []
    length = best.length_mm
    engine.lay(best)
    while engine.clock.spent < engine.stop_at:
        if not shelf:
            engine.board.rect[-1, 2] = engine.board.rect[-1, 0] + best.length_mm
            engine.lay(best)
            length = best.length_mm * (1.0 - step)
            shorten(engine, length)
        else:
            pick = int(min(abs(engine.rng.normal(0.0, 0.25)), 0.999) * len(shelf))
            engine.lay(shelf[pick])
            swap_two(engine)
        engine.forget_weights()
        loss = engine.untangle(ROAM_PATIENCE, ROAM_TRIES)
        if loss <= 0.0:
            engine.board.rect[-1, 2] = engine.board.rect[-1, 0] + reach_mm(engine)
            best = engine.spots()
            found(best)
            shelf = []
        elif step > SHORTEST_STEP:
            step = max(0.5 * step, SHORTEST_STEP)
        else:
            shelf.append(engine.spots(loss))
            shelf.sort(key=lambda s: s.loss)
            del shelf[SHELF:]
    return best


def tighten(engine: Engine, best: Spots, found: Callable[[Spots], None]) -> Spots:
    """Shorten a layout by ever smaller steps until the time is gone; return the shortest layout found."""
    start = engine.clock.spent
    while engine.clock.spent < engine.stop_at:
        share = (engine.clock.spent - start) / max(engine.stop_at - start, 1e-9)
        step = TIGHT_LONGEST * (TIGHT_SHORTEST / TIGHT_LONGEST) ** share
        engine.board.rect[-1, 2] = engine.board.rect[-1, 0] + best.length_mm
        engine.lay(best)
        shorten(engine, best.length_mm * (1.0 - step))
        engine.forget_weights()
        if engine.untangle(TIGHT_PATIENCE, 1) <= 0.0:
            engine.board.rect[-1, 2] = engine.board.rect[-1, 0] + reach_mm(engine)
            best = engine.spots()
            found(best)
    return best
