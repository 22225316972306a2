"""What no layout can be shorter than."""

from dataclasses import dataclass

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest.engine import Engine
from flatprep.nest.field import Field


@dataclass(frozen=True, slots=True, eq=False)
class Bounds:
    """Bounds of the length that pieces take up in the last container used.

    Attributes
    ----------
    field : Field
    area_mm2 : float
        Material of all pieces.
    narrowest_mm : float
        Least length along x of any piece in any of its packed turns.
    needed_mm : ndarray, shape (k,)
        For each number of containers less one: length that the last of them must have for pieces that fit into none
        of the others; infinite where one fits nowhere in a packed turn.
    """

    field: Field
    area_mm2: float
    narrowest_mm: float
    needed_mm: Floats

    @classmethod
    def of(cls, engine: Engine, area_mm2: float) -> "Bounds":
        """Measure an engine's pieces."""
        o, board, rect = engine.outlines, engine.board, engine.field.rect
        box = o.rings.box[:, 2:] - o.rings.box[:, :2]
        laid = np.unique(o.shape[board.variant[: board.movable[0]]])
        sizes = [box[o.first[s] : o.first[s + 1]] for s in laid]
        needed = np.array([[_least_length(size, r) for size in sizes] for r in rect])
        fits = needed < np.inf
        elsewhere = (np.cumsum(fits, axis=0) - fits) > 0
        last = np.where(elsewhere, 0.0, needed).max(axis=1)
        return cls(engine.field, area_mm2, float(min(size[:, 0].min() for size in sizes)), last)

    def least_mm(self, rects: int) -> float:
        """Least length in the last of so many containers; 0 or less where that one may be given up."""
        _, y0, _, y1 = self.field.rect[rects - 1]
        by_area = (self.area_mm2 - float(self.field.area[: rects - 1].sum())) / float(y1 - y0)
        return max(by_area, float(self.needed_mm[rects - 1]))


def _least_length(sizes: Floats, rect: Floats) -> float:
    """Least length of boxes (rows: along x, along y) that fit into a rectangle x0, y0, x1, y1."""
    fit = (sizes[:, 0] <= rect[2] - rect[0]) & (sizes[:, 1] <= rect[3] - rect[1])
    return float(sizes[fit, 0].min()) if fit.any() else float("inf")
