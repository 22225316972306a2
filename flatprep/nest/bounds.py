"""What no layout can be shorter than."""

from dataclasses import dataclass

import numpy as np

from flatprep.nest.engine import Engine
from flatprep.nest.field import Field


@dataclass(frozen=True, slots=True)
class Bounds:
    """Bounds of the length that pieces take up in the last container used.

    Attributes
    ----------
    field : Field
    area_mm2 : float
        Material of all pieces.
    narrowest_mm, widest_mm : float
        Least and greatest, over the pieces, of the length of a piece turned as favourably as can be.
    """

    field: Field
    area_mm2: float
    narrowest_mm: float
    widest_mm: float

    @classmethod
    def of(cls, engine: Engine, area_mm2: float) -> "Bounds":
        """Measure an engine's pieces."""
        o, board = engine.outlines, engine.board
        wide = o.rings.box[:, 2] - o.rings.box[:, 0]
        least = np.array([wide[a:b].min() for a, b in zip(o.first[:-1], o.first[1:], strict=True)])
        each = least[o.shape[board.variant[: board.movable[0]]]]
        return cls(engine.field, area_mm2, float(each.min()), float(each.max()))

    def least_mm(self, rects: int) -> float:
        """Least length in the last of so many containers; 0 or less where that one may be given up."""
        _, y0, _, y1 = self.field.rect[rects - 1]
        by_area = (self.area_mm2 - float(self.field.area[: rects - 1].sum())) / float(y1 - y0)
        return max(by_area, self.widest_mm) if rects == 1 else by_area
