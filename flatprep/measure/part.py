"""A part with what is measured on it, each quantity once."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field, replace
from functools import cached_property
from itertools import islice

import numpy as np

from flatprep.base.tolerances import DEFAULT, Tolerances
from flatprep.measure.boundary import Boundary, boundary, of_part
from flatprep.measure.corners import LEAST_GAP_MM, Corner, inside_corners
from flatprep.measure.facing import TooFineError
from flatprep.measure.holes import Hole, HoleShape, recognise_all
from flatprep.measure.widths import Width, widths
from flatprep.model.drawing import Part

Found = tuple[tuple[Width, ...] | None, ...]
"""Widths of each part of a drawing; None where its edges are too fine to measure."""


@dataclass(frozen=True, eq=False)
class _Together:
    """The parts of one drawing, measured in one go: a call costs more than most parts have to measure."""

    shapes: tuple[tuple[Hole, ...], ...]
    kept: dict[tuple[int, float], Found] = field(default_factory=dict)

    @cached_property
    def boundary(self) -> Boundary:
        """All edges of all parts."""
        parts = np.repeat(np.arange(len(self.shapes)), [len(own) for own in self.shapes])
        return boundary([shape.exact for own in self.shapes for shape in own], parts)

    def widths(self, side: int, most_mm: float) -> Found:
        """Webs or slots of every part; see `flatprep.measure.widths.widths`."""
        key = side, most_mm
        if key not in self.kept:
            try:
                self.kept[key] = self._measured(side, most_mm)
            except TooFineError:
                single = len(self.shapes) == 1
                apart = [None] if single else [_Together((own,)).widths(side, most_mm)[0] for own in self.shapes]
                self.kept[key] = tuple(apart)
        return self.kept[key]

    def _measured(self, side: int, most_mm: float) -> Found:
        b = self.boundary
        # holes of a known shape are measured as such
        open_form = [side > 0 or k == 0 or s.shape is HoleShape.OTHER for own in self.shapes for k, s in enumerate(own)]
        found = widths(b, side=side, rows=np.array(open_form)[b.contour], most_mm=most_mm)
        out: list[list[Width]] = [[] for _ in self.shapes]
        for width in found:
            out[int(b.part[width.rows[0]])].append(width)
        return tuple(tuple(self._own(width, k) for width in own) for k, own in enumerate(out))

    def _own(self, width: Width, part: int) -> Width:
        """Count a width's contours and rows within its part."""
        before = sum(len(own) for own in self.shapes[:part])
        row = int(np.searchsorted(self.boundary.part, part))
        (a, z), (i, j) = width.contours, width.rows
        return replace(width, contours=(a - before, z - before), rows=(i - row, j - row))


@dataclass(frozen=True, eq=False)
class MeasuredPart:
    """A part and its features; what was measured once is kept."""

    part: Part
    tol: Tolerances = DEFAULT
    number: int = 0
    others: _Together | None = None

    @property
    def name(self) -> str:
        """The part's name."""
        return self.part.name

    @cached_property
    def _together(self) -> _Together:
        return self.others or _Together(_shapes([self.part]))

    @property
    def shapes(self) -> tuple[Hole, ...]:
        """The outline, then the holes: what the contour numbers of widths and corners count."""
        return self._together.shapes[self.number]

    @property
    def outline(self) -> Hole:
        """The outer contour by its shape, as if it were a hole."""
        return self.shapes[0]

    @property
    def holes(self) -> tuple[Hole, ...]:
        """The holes by their shapes, in the part's order."""
        return self.shapes[1:]

    @cached_property
    def boundary(self) -> Boundary:
        """All edges, circles that are drawn with chords as circles; contour 0 is the outer one, then the holes."""
        return of_part(self._together.boundary, self.number)

    def webs(self, most_mm: float) -> tuple[Width, ...]:
        """Webs of at most `most_mm`; see `flatprep.measure.widths.widths`.

        Raises
        ------
        TooFineError
        """
        return self._widths(1, most_mm)

    def slots(self, most_mm: float) -> tuple[Width, ...]:
        """Slots and gaps of at most `most_mm`; holes of a recognised shape are measured as such, not here.

        Raises
        ------
        TooFineError
        """
        return self._widths(-1, most_mm)

    def inside_corners(self, tool_radius_mm: float, least_gap_mm: float) -> tuple[Corner, ...]:
        """Corners that a tool cannot fill; see `flatprep.measure.corners.inside_corners`."""
        return inside_corners(self.boundary, tool_radius_mm=tool_radius_mm, least_gap_mm=least_gap_mm)

    def unreached_corners(self, tool_radius_mm: float, slack_mm: float = 1e-3) -> tuple[Corner, ...]:
        """Corners that a tool misses by more than a joint forgives, in holes and notches that it does enter."""
        found = self.inside_corners(tool_radius_mm, LEAST_GAP_MM)
        return tuple(c for c in found if c.radius_mm < tool_radius_mm - slack_mm and self._enters(c, tool_radius_mm))

    def _enters(self, corner: Corner, radius: float) -> bool:
        hole = self.shapes[corner.contour]
        return hole.shape is HoleShape.OTHER or hole.width_mm >= 2.0 * radius - 1e-3

    def handles(self, rows: Iterable[int]) -> tuple[str, ...]:
        """Return the handles of the entities behind edges of the boundary."""
        out: list[str] = []
        for row in rows:
            shape = self.shapes[int(self.boundary.contour[row])]
            names = shape.contour.handles
            each = len(names) == len(shape.contour.xyb) and not shape.chords and shape.thinned is None
            out += [names[int(self.boundary.edge[row])]] if each else shape.handles
        return tuple(dict.fromkeys(h for h in out if h))

    def _widths(self, side: int, most_mm: float) -> tuple[Width, ...]:
        found = self._together.widths(side, most_mm)[self.number]
        if found is None:
            raise TooFineError
        return found


def measured_parts(parts: Sequence[Part], tol: Tolerances = DEFAULT) -> tuple[MeasuredPart, ...]:
    """Return the parts of a drawing, to be measured together."""
    together = _Together(_shapes(parts))
    return tuple(MeasuredPart(part, tol, k, together) for k, part in enumerate(parts))


def _shapes(parts: Sequence[Part]) -> tuple[tuple[Hole, ...], ...]:
    """Return the contours of each part by their shapes."""
    found = iter(recognise_all([contour for part in parts for contour in part.contours]))
    return tuple(tuple(islice(found, part.pierces)) for part in parts)
