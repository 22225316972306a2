"""The search's working state: one board, the layout it may go back to, and the tries to untangle it."""

from dataclasses import dataclass, field

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest.board import Board, new_board, put, settle_all
from flatprep.nest.clock import Clock
from flatprep.nest.outlines import Ints, Outlines
from flatprep.nest.tables import Tables
from flatprep.nest.untangle import copy_places, lay_again, sweeps


@dataclass(frozen=True, slots=True, eq=False)
class Spots:
    """Where every piece is: what is kept of a board.

    Attributes
    ----------
    variant, home : ndarray, shape (n,), int64
    at : ndarray, shape (n, 2), float64
        mm.
    length_mm : float
        Length of the last rectangle of the field it was found in.
    loss : float
        Sum of losses, mm²; 0 for a layout without overlap.
    """

    variant: Ints
    home: Ints
    at: Floats
    length_mm: float
    loss: float = 0.0


@dataclass(slots=True, eq=False)
class Engine:
    """A board under search. Not a value: everything below works on it in place."""

    outlines: Outlines
    tables: Tables
    board: Board
    kept: Board
    rng: np.random.Generator
    clock: Clock
    stop_at: float = 1.0
    order: Ints = field(default_factory=lambda: np.zeros(0, dtype=np.int64))

    @property
    def length_mm(self) -> float:
        """Length of the last rectangle."""
        return float(self.board.rect[-1, 2] - self.board.rect[-1, 0])

    def spots(self, loss: float = 0.0) -> Spots:
        """Return where the pieces are."""
        b = self.board
        return Spots(b.variant.copy(), b.home.copy(), b.at.copy(), self.length_mm, loss)

    def lay(self, spots: Spots) -> float:
        """Lay the pieces as they were; return the loss (mm²) they have there."""
        for i, (v, k, (x, y)) in enumerate(zip(spots.variant, spots.home, spots.at, strict=True)):
            self.board.home[i] = k
            put(self.outlines, self.board, i, v, x, y)
        return float(settle_all(self.outlines, self.tables, self.board))

    def forget_weights(self) -> None:
        """Let every pair weigh 1 again."""
        self.board.weight[:] = 1.0

    def untangle(self, patience: int, tries: int) -> float:
        """Try to remove all overlap; leaves the board in the state of least loss and returns that loss, mm².

        Parameters
        ----------
        patience
            Sweeps without a gain after which a try is given up.
        tries
            How often to start again from the state of least loss, weights kept.
        """
        first = float(settle_all(self.outlines, self.tables, self.board))
        loss = np.array([first, first])
        copy_places(self.board, self.kept)
        for _ in range(tries):
            count = np.array([0, patience], dtype=np.int64)
            before = loss[0]
            while loss[0] > 0.0 and count[0] < count[1] and self.clock.spent < self.stop_at:
                self.clock.spend(sweeps(self.outlines, self.tables, self.board, self.kept, count, loss, self.rng))
            if loss[0] <= 0.0 or self.clock.spent >= self.stop_at:
                break
            if loss[0] < before:
                loss[1] = loss[0]
            lay_again(self.outlines, self.tables, self.kept, self.board)
        lay_again(self.outlines, self.tables, self.kept, self.board)
        return float(loss[0])


def new_engine(
    outlines: Outlines, tables: Tables, variants: Ints, rect: Floats, clock: Clock, rng: np.random.Generator
) -> Engine:
    """Engine on a board of the given pieces and rectangles."""
    return Engine(outlines, tables, new_board(variants, rect), new_board(variants, rect), rng, clock)
