"""The search's working state: one board, layouts to go back to, tries to untangle it."""

from dataclasses import dataclass

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest.board import Board, new_board, put, settle_all
from flatprep.nest.clock import Clock
from flatprep.nest.field import Field
from flatprep.nest.outlines import Ints, Outlines
from flatprep.nest.tables import Tables, no_tables
from flatprep.nest.untangle import copy_places, lay_again, sweeps


@dataclass(frozen=True, slots=True, eq=False)
class Spots:
    """Where every piece is: what is kept of a board, and what processes tell each other.

    Attributes
    ----------
    variant, home : ndarray, shape (n,), int64
        Variant and rectangle of each piece, fixed ones included.
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
    at: Floats
    rects: int
    length_mm: float
    loss: float = 0.0

    @property
    def cost(self) -> tuple[int, float]:
        """What is minimised."""
        return self.rects, self.length_mm


class Engine:
    """A board under search. Not a value: the search works on it in place.

    Parameters
    ----------
    outlines, tables
        Variants of all shapes, the field's fixed ones last, and the grids of their pairs.
    field
        The containers.
    variants : ndarray, shape (n,), int64
        Variant of each piece to begin with, fixed ones last.
    clock, rng
        What may be spent, and the source of chance.
    """

    def __init__(
        self, outlines: Outlines, tables: Tables, field: Field, variants: Ints, clock: Clock, rng: np.random.Generator
    ) -> None:
        self.outlines, self.tables, self.field = outlines, tables, field
        self.clock, self.rng = clock, rng
        self.stop_at = 1.0
        self.board = new_board(variants, field.rect, len(field.fixed))
        self._kept = new_board(variants, field.rect, len(field.fixed))
        self._exact = no_tables(outlines)
        for i in range(int(self.board.movable[0]), len(variants)):
            put(outlines, self.board, i, int(variants[i]), 0.0, 0.0)

    @property
    def time_left(self) -> bool:
        """Tell whether the present phase may go on."""
        return self.clock.spent < self.stop_at

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
        self.board = self.board._replace(rect=rect)

    def lay(self, spots: Spots) -> None:
        """Set field and pieces to what was kept; losses are left as they are."""
        self.use(spots.rects, spots.length_mm)
        for i in range(int(self.board.movable[0])):
            self.board.home[i] = spots.home[i]
            put(self.outlines, self.board, i, int(spots.variant[i]), float(spots.at[i, 0]), float(spots.at[i, 1]))

    def spots(self, loss: float = 0.0) -> Spots:
        """Return field and pieces as they are; without loss, the last rectangle is cut to where they reach."""
        b = self.board
        if loss > 0.0:
            return Spots(b.variant.copy(), b.home.copy(), b.at.copy(), len(b.rect), self.length_mm, loss)
        self._drop_empty()
        return Spots(b.variant.copy(), b.home.copy(), b.at.copy(), len(self.board.rect), self.reach_mm)

    def _drop_empty(self) -> None:
        """Give up rectangles at the end that hold nothing."""
        while len(self.board.rect) > 1 and self.reach_mm == 0.0:
            self.board = self.board._replace(rect=self.board.rect[:-1].copy())

    def is_free(self) -> bool:
        """Tell by the exact geometry, without tables, whether no piece overlaps another."""
        return float(settle_all(self.outlines, self._exact, self.board)) == 0.0

    def untangle(self, patience: int, tries: int) -> float:
        """Try to remove all overlap; leaves the board in the state of least loss and returns that loss, mm².

        Parameters
        ----------
        patience
            Sweeps without a gain after which a try is given up.
        tries
            How often to start again from the state of least loss, weights kept.
        """
        self.board.weight[:] = 1.0
        first = float(settle_all(self.outlines, self.tables, self.board))
        loss = np.array([first, first])
        copy_places(self.board, self._kept)
        for _ in range(tries):
            count = np.array([0, patience], dtype=np.int64)
            while loss[0] > 0.0 and count[0] < count[1] and self.time_left:
                self.clock.spend(sweeps(self.outlines, self.tables, self.board, self._kept, count, loss, self.rng))
            loss[1] = loss[0]
            lay_again(self.outlines, self.tables, self._kept, self.board)
            if loss[0] <= 0.0 or not self.time_left:
                break
        return float(loss[0])
