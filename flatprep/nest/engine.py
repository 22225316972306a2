"""The search's working state: one board, layouts to go back to, tries to untangle it."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from enum import Enum
from itertools import pairwise

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest.board import Board, Ground, new_board, put, settle_all
from flatprep.nest.clock import Clock
from flatprep.nest.field import Field
from flatprep.nest.outlines import Ints, Outlines
from flatprep.nest.tables import no_tables, prepare_tables
from flatprep.nest.turning import turn_into, with_own_variants
from flatprep.nest.untangle import new_try, remember, sweeps

# Places tried in one call of the kernel, some 0.02 s, so that signals are served; fewer where corners are many.
CALL = 20_000
FEW_CORNERS = 8
QUARTERS = 4


def to_the_end(_tried: int, _loss: float) -> bool:
    """Go on with every try."""
    return True


@dataclass(frozen=True, slots=True, eq=False)
class Spots:
    """Where every piece is: what is kept of a board, and what processes tell each other.

    Attributes
    ----------
    variant, home : ndarray, shape (n,), int64
        Packed variant and rectangle of each piece, fixed ones included.
    turn : ndarray, shape (n,), float64
        Turn of each piece, degrees; another than its variant's where it turned freely.
    at : ndarray, shape (n, 2), float64
        Origins in the plane of the field, mm.
    rects : int
        Rectangles in use: the first ones of the field.
    length_mm : float
        Length of the last of them.
    loss : float
        Sum of losses, mm²; 0 for a layout without overlap.
    """

    variant: Ints
    home: Ints
    turn: Floats
    at: Floats
    rects: int
    length_mm: float
    loss: float = 0.0

    @property
    def cost(self) -> tuple[int, float]:
        """What is minimised."""
        return self.rects, self.length_mm


class Turning(Enum):
    """What pieces that may turn to any angle make of it, from fast to thorough."""

    QUARTERS = "by quarter turns from the turn of the least box"
    PACKED = "to any of the packed turns"
    FREELY = "to any angle"


class Engine:
    """A board under search. Not a value: the search works on it in place.

    Parameters
    ----------
    outlines
        Packed variants of all shapes, the field's fixed ones last.
    free
        For each of these shapes, whether it may turn to any angle.
    field
        The containers.
    start
        The layout to begin with.
    clock, rng
        What may be spent, and the source of chance.
    """

    def __init__(
        self,
        outlines: Outlines,
        free: Sequence[bool],
        field: Field,
        start: Spots,
        clock: Clock,
        rng: np.random.Generator,
    ) -> None:
        self.field, self.clock, self.rng = field, clock, rng
        self.stop_at = 1.0
        self._free = np.array(free, dtype=np.int64)
        self._packed = len(outlines.shape)
        self.outlines = with_own_variants(outlines, outlines.shape[start.variant], free)
        board = new_board(start.variant, field.rect, len(free), len(field.fixed))
        self.ground = Ground(self.outlines, prepare_tables(self.outlines, self._packed), board)
        self._exact = no_tables(self.outlines)
        corners = len(outlines.rings.edge) / self._packed
        self._try = new_try(len(start.variant), int(CALL / max(1.0, corners / FEW_CORNERS)))
        for i in range(int(board.movable[0]), len(start.variant)):
            put(self.outlines, board, i, int(start.variant[i]), 0.0, 0.0)
        self.lay(start)
        self.turn(Turning.PACKED)

    @property
    def board(self) -> Board:
        """The pieces."""
        return self.ground.board

    @property
    def may_turn(self) -> bool:
        """Tell whether any piece may turn to any angle."""
        return bool(self._free.any())

    def turn(self, how: Turning) -> None:
        """From now on let pieces that may turn freely turn so."""
        packed = np.diff(self.outlines.first)
        states = np.array([len(set(self.outlines.mirrored[a:b])) for a, b in pairwise(self.outlines.first)])
        few = np.where(self._free == 1, np.minimum(QUARTERS * states, packed), packed)
        self.board.usable[:] = few if how is Turning.QUARTERS else packed
        self.board.turning[:] = self._free if how is Turning.FREELY else 0

    @property
    def time_left(self) -> bool:
        """Tell whether the present phase may go on."""
        return self.clock.spent < self.stop_at and not self.clock.stopped()

    @property
    def length_mm(self) -> float:
        """Length of the last rectangle in use."""
        return float(self.board.rect[-1, 2] - self.board.rect[-1, 0])

    @property
    def reach_mm(self) -> float:
        """Length the pieces take up in the last rectangle in use; 0 where none is in it."""
        board = self.board
        last = board.home == len(board.rect) - 1
        last[board.movable[0] :] = False
        return float(board.right[last].max() - board.rect[-1, 0]) if last.any() else 0.0

    def use(self, rects: int, length_mm: float) -> None:
        """Set the field: the first `rects` rectangles, the last one cut to a length."""
        rect = self.field.rect[:rects].copy()
        rect[-1, 2] = rect[-1, 0] + length_mm
        self.ground = self.ground._replace(board=self.board._replace(rect=rect))

    def lay(self, spots: Spots) -> None:
        """Set field and pieces to what was kept; losses are left as they are."""
        self.use(spots.rects, spots.length_mm)
        self._lay(spots.variant, spots.home, spots.turn, spots.at)

    def _lay(self, variant: Ints, home: Ints, turn: Floats, at: Floats) -> None:
        for i in range(int(self.board.movable[0])):
            v, angle = int(variant[i]), float(turn[i])
            if v >= self._packed or angle != self.outlines.turn[v, 2]:
                turn_into(self.outlines, v, self._packed + i, angle)
                v = self._packed + i
            self.board.home[i] = home[i]
            put(self.outlines, self.board, i, v, float(at[i, 0]), float(at[i, 1]))

    def spots(self, loss: float = 0.0) -> Spots:
        """Return field and pieces as they are; without loss, the last rectangle is cut to where they reach."""
        if loss <= 0.0:
            while len(self.board.rect) > 1 and self.reach_mm == 0.0:  # the last one is empty
                self.use(len(self.board.rect) - 1, 0.0)
            self.use(len(self.board.rect), self.reach_mm)
        b, o = self.board, self.outlines
        turn = o.turn[b.variant, 2]
        return Spots(o.base[b.variant], b.home.copy(), turn, b.at.copy(), len(b.rect), self.length_mm, loss)

    def is_free(self) -> bool:
        """Tell by the exact geometry, without tables, whether no piece overlaps another."""
        return float(settle_all(self.ground._replace(tables=self._exact))) == 0.0

    def untangle(self, patience: int, tries: int, go_on: Callable[[int, float], bool] = to_the_end) -> float:
        """Try to remove all overlap; leaves the board in the state of least loss and returns that loss, mm².

        Parameters
        ----------
        patience
            Sweeps without a gain after which a try is given up.
        tries
            How often to start again from the state of least loss, weights kept.
        go_on
            Asked now and then with the positions tried and the least loss (mm²) so far: False ends it.
        """
        attempt = self._try
        self.board.weight[:] = 1.0
        attempt.loss[:] = float(settle_all(self.ground))
        self.clock.spend(len(attempt.variant))
        remember(self.ground, attempt)
        tried, going = 0, True
        for _ in range(tries):
            attempt.sweeps[:2] = 0, patience
            while attempt.loss[0] > 0.0 and attempt.sweeps[0] < patience and going and self.time_left:
                places = sweeps(self.ground, attempt, self.rng)
                self.clock.spend(places)
                tried += places
                going = attempt.loss[0] <= 0.0 or go_on(tried, float(attempt.loss[0]))
            attempt.loss[1] = attempt.loss[0]
            self._lay(attempt.variant, attempt.home, attempt.turn, attempt.at)
            settle_all(self.ground)
            if attempt.loss[0] <= 0.0 or not going or not self.time_left:
                break
        return float(attempt.loss[0])
