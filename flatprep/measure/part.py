"""A part with what is measured on it, each quantity once."""

from collections.abc import Iterable
from dataclasses import dataclass, field
from functools import cached_property

import numpy as np

from flatprep.base.tolerances import DEFAULT, Tolerances
from flatprep.measure.boundary import Boundary, boundary
from flatprep.measure.corners import Corner, inside_corners
from flatprep.measure.facing import TooFineError
from flatprep.measure.holes import Hole, HoleShape, recognise
from flatprep.measure.widths import Width, widths
from flatprep.model.drawing import Part


@dataclass(frozen=True, eq=False)
class MeasuredPart:
    """A part and its features; what was measured once is kept."""

    part: Part
    tol: Tolerances = DEFAULT
    _widths: dict[tuple[int, float], tuple[Width, ...] | None] = field(default_factory=dict, repr=False)

    @property
    def name(self) -> str:
        """The part's name."""
        return self.part.name

    @cached_property
    def outline(self) -> Hole:
        """The outer contour by its shape, as if it were a hole."""
        return recognise(self.part.outer)

    @cached_property
    def holes(self) -> tuple[Hole, ...]:
        """The holes by their shapes, in the part's order."""
        return tuple(recognise(c) for c in self.part.holes)

    @property
    def shapes(self) -> tuple[Hole, ...]:
        """The outline, then the holes: what the contour numbers of widths and corners count."""
        return (self.outline, *self.holes)

    @cached_property
    def boundary(self) -> Boundary:
        """All edges, circles that are drawn with chords as circles; contour 0 is the outer one, then the holes."""
        return boundary([shape.exact for shape in self.shapes])

    def webs(self, most_mm: float) -> tuple[Width, ...]:
        """Webs of at most `most_mm`; see `flatprep.measure.widths.widths`.

        Raises
        ------
        TooFineError
        """
        return self._measured(1, most_mm, range(len(self.shapes)))

    def slots(self, most_mm: float) -> tuple[Width, ...]:
        """Slots and gaps of at most `most_mm`; holes of a recognised shape are measured as such, not here.

        Raises
        ------
        TooFineError
        """
        free_form = [k for k, hole in enumerate(self.shapes) if k == 0 or hole.shape is HoleShape.OTHER]
        return self._measured(-1, most_mm, free_form)

    def inside_corners(self, tool_radius_mm: float, least_gap_mm: float) -> tuple[Corner, ...]:
        """Corners that a tool cannot fill; see `flatprep.measure.corners.inside_corners`."""
        return inside_corners(self.boundary, tool_radius_mm=tool_radius_mm, least_gap_mm=least_gap_mm)

    def handles(self, rows: Iterable[int]) -> tuple[str, ...]:
        """Return the handles of the entities behind edges of the boundary."""
        out: list[str] = []
        for row in rows:
            shape = self.shapes[int(self.boundary.contour[row])]
            names = shape.contour.handles
            each = len(names) == len(shape.contour.xyb) and not shape.chords
            out += [names[int(self.boundary.edge[row])]] if each else shape.handles
        return tuple(dict.fromkeys(h for h in out if h))

    def _measured(self, side: int, most_mm: float, contours: Iterable[int]) -> tuple[Width, ...]:
        key = side, most_mm
        if key not in self._widths:
            rows = np.isin(self.boundary.contour, list(contours))
            try:
                self._widths[key] = widths(self.boundary, side=side, rows=rows, most_mm=most_mm)
            except TooFineError:
                self._widths[key] = None
        found = self._widths[key]
        if found is None:
            raise TooFineError
        return found
