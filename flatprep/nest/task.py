"""Shapes and containers made ready for the engine: variants, the plane, a layout to begin with."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest.engine import Spots
from flatprep.nest.field import Field, field_of, places_of, variant_of
from flatprep.nest.outlines import Ints, Outlines, pack
from flatprep.nest.rows import flattest_variants, lay_in_columns
from flatprep.nest.shapes import Best, Container, Place, Shape

# Turns tried for pieces that may turn freely: so many for up to so many kinds of pieces.
FREE_TURNS = ((12, 24), (30, 16), (60, 8))
FEWEST_FREE_TURNS = 4


@dataclass(frozen=True, slots=True, eq=False)
class Task:
    """What is to be laid on what, ready for the engine; the same in every process.

    Attributes
    ----------
    shapes : tuple of Shape
    field : Field
    outlines : Outlines
        The shapes' variants, then one for each of the field's fixed shapes.
    start : Spots
        A layout without overlap.
    """

    shapes: tuple[Shape, ...]
    field: Field
    outlines: Outlines
    start: Spots

    def best(self, spots: Spots) -> Best:
        """Return a layout in the containers' own coordinates."""
        n = sum(s.count for s in self.shapes)
        places = places_of(self.outlines, self.field, spots.variant[:n], spots.home[:n], spots.at[:n])
        return Best(places, spots.rects, spots.length_mm)


def strip_task(shapes: Sequence[Shape], width_mm: float, start: Sequence[Place] | None) -> Task:
    """Make a task of a strip, 0 to `width_mm` in y, from x = 0 on, to be made as short as possible.

    Parameters
    ----------
    shapes
        Kinds of pieces.
    width_mm
        Width of the strip, mm.
    start
        A layout without overlap to begin with, or None: then boxes are laid in columns.

    Raises
    ------
    ValueError
        Some piece is wider than the strip in every turn, or a piece is missing from `start`.
    """
    long = sum(s.count * float(np.hypot(*np.ptp(s.outer, axis=0))) for s in shapes)
    ring = np.array([[0.0, 0.0], [long, 0.0], [long, width_mm], [0.0, width_mm]])
    return sheets_task(shapes, [Container(ring)], start)


def sheets_task(shapes: Sequence[Shape], containers: Sequence[Container], start: Sequence[Place] | None) -> Task:
    """Make a task of containers, of which as few as possible are used, first ones first, the last as short as possible.

    Parameters
    ----------
    shapes
        Kinds of pieces.
    containers
        Rectangles or irregular remnants.
    start
        A layout without overlap in any of them, or None: then boxes are laid in columns, in rectangles only.

    Raises
    ------
    ValueError
        No layout to begin with: the pieces do not fit, or one is missing from `start`.
    """
    field = field_of(containers)
    free = _turns_of_free(shapes, start or ())
    turns = [free[s] if shape.turns_deg is None else tuple(shape.turns_deg) for s, shape in enumerate(shapes)]
    outlines = pack([*shapes, *field.fixed], [*turns, *((0.0,) for _ in field.fixed)])
    kinds = np.repeat(np.arange(len(shapes)), [s.count for s in shapes])
    spots = _given(outlines, field, kinds, start) if start else _in_columns(outlines, field, kinds)
    return Task(tuple(shapes), field, outlines, spots)


def _turns_of_free(shapes: Sequence[Shape], start: Sequence[Place]) -> dict[int, tuple[float, ...]]:
    """Turns (degrees) to try for each shape that may turn freely: evenly spread, and those it has at the start."""
    free = [s for s, shape in enumerate(shapes) if shape.turns_deg is None]
    many = next((turns for kinds, turns in FREE_TURNS if len(free) <= kinds), FEWEST_FREE_TURNS)
    even = [360.0 * k / many for k in range(many)]
    had: dict[int, set[float]] = {s: set(even) for s in free}
    for place in start:
        if place.shape in had:
            had[place.shape].add(place.turn_deg % 360.0)
    return {s: tuple(sorted(turns)) for s, turns in had.items()}


def _given(outlines: Outlines, field: Field, kinds: Ints, start: Sequence[Place]) -> Spots:
    """Return the layout of the given places, ordered by shape."""
    places = sorted(start, key=lambda p: p.shape)
    if [p.shape for p in places] != kinds.tolist():
        raise ValueError("the start does not hold every piece once")
    variants = [variant_of(outlines, p) for p in places]
    home = np.array([p.container for p in places], dtype=np.int64)
    at = np.array([(p.x, p.y) for p in places]) + field.shift[home]
    return _spots(outlines, field, np.array(variants, dtype=np.int64), home, at)


def _in_columns(outlines: Outlines, field: Field, kinds: Ints) -> Spots:
    """Return boxes in columns; only in containers that are rectangles."""
    variants = flattest_variants(outlines, kinds)
    laid = None if field.fixed else lay_in_columns(outlines.rings.box[variants], list(field.rect))
    if laid is None:
        raise ValueError("the pieces do not fit into the containers as boxes in columns")
    return _spots(outlines, field, variants, *laid)


def _spots(outlines: Outlines, field: Field, variants: Ints, home: Ints, at: Floats) -> Spots:
    """Layout with the field's fixed pieces added at the end."""
    fixed = len(field.fixed)
    last = int(home.max())
    reach = (at[:, 0] + outlines.rings.box[variants, 2])[home == last].max() - field.rect[last, 0]
    own = np.arange(len(outlines.shape) - fixed, len(outlines.shape))
    return Spots(
        np.concatenate([variants, own]),
        np.concatenate([home, np.full(fixed, -1)]),
        np.vstack([at, np.zeros((fixed, 2))]),
        last + 1,
        float(reach),
    )
