"""Shorten the last rectangle of the field until it is gone: roam far and wide first, tighten what was found last."""

from collections.abc import Callable

from flatprep.nest.board import put
from flatprep.nest.bounds import Bounds
from flatprep.nest.engine import Engine, Spots, Turning
from flatprep.nest.line import Line
from flatprep.nest.prospects import Prospects
from flatprep.nest.rearrange import rearrange
from flatprep.nest.shelf import Shelf
from flatprep.nest.spots import any_spot, clamp, fits

ROAM_SHARE = 0.8
# Until when (share of the time) to roam, and how pieces that may turn freely turn meanwhile: few turns are searched
# faster than many, and packed ones faster than any angle.
FIXED_STAGES = ((Turning.PACKED, ROAM_SHARE),)
FREE_STAGES = ((Turning.QUARTERS, 0.35), (Turning.PACKED, 0.55), (Turning.FREELY, ROAM_SHARE))
LONGEST_STEP, LATER_STEP, SHORTEST_STEP = 0.05, 0.004, 0.001
ROAM_PATIENCE, ROAM_TRIES = 200, 3
TIGHT_LONGEST, TIGHT_SHORTEST = 0.0005, 0.00001
TIGHT_PATIENCE = 100
# How often a process whose line is stuck goes on from the best layout of all, where it has none as good.
BEST_SHARE = 0.5
# A layout this near the bound cannot be made shorter.
NOTHING_MM = 1e-5


def shorten(engine: Engine, rects: int, length_mm: float) -> None:
    """Cut the field: pieces right of a random cut in the last rectangle move left, what has no room goes elsewhere."""
    board, rng = engine.board, engine.rng
    by = engine.length_mm - length_mm if rects == len(board.rect) else 0.0
    engine.use(rects, length_mm)
    board = engine.board
    cut = board.rect[-1, 0] + rng.random() * length_mm
    for i in range(int(board.movable[0])):
        k, v = int(board.home[i]), int(board.variant[i])
        if k >= rects or not fits(engine.outlines, board, k, v):
            send_elsewhere(engine, i)
        elif k == rects - 1:
            x, y = board.at[i]
            x -= by if 0.5 * (board.left[i] + board.right[i]) > cut else 0.0
            put(engine.outlines, board, i, v, *clamp(engine.outlines, board, k, v, x, y))


def send_elsewhere(engine: Engine, i: int) -> None:
    """Lay a piece anywhere in any rectangle that can hold it; in that it fits best where none can, by a rounding."""
    board, o = engine.board, engine.outlines
    shape = o.shape[board.variant[i]]
    every = [(k, v) for k in range(len(board.rect)) for v in range(int(o.first[shape]), int(o.first[shape + 1]))]
    choice = [(k, v) for k, v in every if fits(o, board, k, v)] or [min(every, key=lambda kv: lack(engine, *kv))]
    k, v = choice[int(engine.rng.integers(len(choice)))]
    board.home[i] = k
    put(o, board, i, v, *any_spot(o, board, k, v, engine.rng))


def lack(engine: Engine, k: int, v: int) -> float:
    """By how much variant v is too long or too wide for rectangle k, mm."""
    box, rect = engine.outlines.rings.box[v], engine.board.rect[k]
    return float(max(box[2] - box[0] - (rect[2] - rect[0]), box[3] - box[1] - (rect[3] - rect[1])))


class Squeeze:
    """The search for the shortest layout on one engine.

    Parameters
    ----------
    engine
        Its state.
    best
        A layout without overlap.
    bounds
        What no layout can be shorter than.
    found
        Told of each better one.
    exchange
        Called now and then with the best; returns a better one of another process, or the same.
    """

    def __init__(
        self,
        engine: Engine,
        best: Spots,
        bounds: Bounds,
        found: Callable[[Spots], None],
        exchange: Callable[[Spots], Spots],
    ) -> None:
        self.engine, self.best, self._bounds = engine, best, bounds
        self._found, self._exchange = found, exchange

    def run(self) -> Spots:
        """Roam, then tighten, until the time is gone; return the best layout."""
        step = LONGEST_STEP
        for how, until in FREE_STAGES if self.engine.may_turn else FIXED_STAGES:
            self.engine.turn(how)
            self.engine.stop_at = until
            self.roam(step)
            step = LATER_STEP
        self.engine.stop_at = 1.0
        self.tighten()
        return self.best

    def _untangled(self) -> Spots | None:
        """Return the layout on the board, noted where it is the best one; None where some pieces do overlap."""
        spots = self.engine.spots()
        if not self.engine.is_free():
            return None
        if spots.cost < self.best.cost:
            self.best = spots
            self._found(spots)
        return spots

    def _shorter(self, spots: Spots, step: float) -> tuple[int, float]:
        """Return the field that is a step (share of the length of all sheets in use) shorter than a layout's."""
        rects, length = spots.rects, spots.length_mm
        least = self._bounds.least_mm(rects)
        if rects == 1:
            return 1, max(length * (1.0 - step), least)
        whole = self.engine.field.rect[rects - 1]
        length -= step * rects * float(whole[2] - whole[0])
        if least > 0.0 or length >= self._bounds.narrowest_mm:
            return rects, max(length, least)
        before = self.engine.field.rect[rects - 2]
        return rects - 1, float(before[2] - before[0])

    @property
    def _going_on(self) -> bool:
        """Tell whether there is time, and anything to gain."""
        least = self._bounds.least_mm(self.best.rects)
        return self.engine.time_left and self.best.length_mm > least + NOTHING_MM

    def roam(self, step: float) -> None:
        """Shorten by steps that halve with each failure; at the least step, change failed layouts about.

        Where that leads no further, go on from a longer layout that led here, or from the best one of all.
        """
        engine = self.engine
        shelf, prospects = Shelf(), Prospects()
        line = Line(self.best, engine.clock.evaluations)
        while self._going_on:
            self.best = self._exchange(self.best)
            if line.is_stuck(engine.clock.evaluations):
                shelf, step = Shelf(), LATER_STEP
                line = self._line_after(line)
                engine.lay(line.last)
                rearrange(engine)
            elif len(shelf):
                engine.lay(shelf.pick(engine.rng))
                rearrange(engine)
            else:
                engine.lay(line.last)
                shorten(engine, *self._shorter(line.last, step))
            prospects.begin(shelf)
            loss = engine.untangle(ROAM_PATIENCE, ROAM_TRIES, prospects.go_on)
            if loss <= 0.0:
                if (spots := self._untangled()) is not None:
                    line.add(spots, engine.clock.evaluations)
                shelf = Shelf()
            elif step > SHORTEST_STEP:
                step = max(0.5 * step, SHORTEST_STEP)
            elif not prospects.given_up:
                shelf.add(engine.spots(loss))

    def _line_after(self, line: Line) -> Line:
        """Return what to go on from where a line is stuck."""
        positions = self.engine.clock.evaluations
        if self.best.cost < line.last.cost and self.engine.rng.random() < BEST_SHARE:
            return Line(self.best, positions)
        line.go_back(positions)
        return line

    def tighten(self) -> None:
        """Shorten the best layout by ever smaller steps."""
        engine, start = self.engine, self.engine.clock.spent
        while self._going_on:
            self.best = self._exchange(self.best)
            share = (engine.clock.spent - start) / max(engine.stop_at - start, 1e-9)
            engine.lay(self.best)
            shorten(engine, *self._shorter(self.best, TIGHT_LONGEST * (TIGHT_SHORTEST / TIGHT_LONGEST) ** share))
            if engine.untangle(TIGHT_PATIENCE, 1) <= 0.0:
                self._untangled()
