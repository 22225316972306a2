"""Shapes and containers made ready for the engine: variants, the plane, a layout to begin with."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest.construct import least_box_turn
from flatprep.nest.engine import Spots
from flatprep.nest.field import Field, field_of, variant_of
from flatprep.nest.outlines import HAIR_MM, LONGEST_MITRE, Ints, Outlines, pack, signed_area, turned
from flatprep.nest.rows import flattest_variants, lay_in_columns
from flatprep.nest.shapes import Best, Container, Place, Shape

# Turns tried for pieces that may turn freely: so many for up to so many kinds of pieces.
FREE_TURNS = ((12, 24), (30, 16), (60, 8))
FEWEST_FREE_TURNS = 4
# Turns this near are the same.
SAME_DEG = 1e-9


@dataclass(frozen=True, slots=True, eq=False)
class Task:
    """What is to be laid on what, ready for the engine; the same in every process.

    Attributes
    ----------
    shapes : tuple of Shape
    field : Field
    outlines : Outlines
        The shapes' variants, then one for each of the field's fixed shapes.
    free : tuple of bool
        For each of these shapes, whether it may turn to any angle.
    start : Spots
        A layout without overlap.
    area_mm2 : float
        Material of all pieces.
    """

    shapes: tuple[Shape, ...]
    field: Field
    outlines: Outlines
    free: tuple[bool, ...]
    start: Spots
    area_mm2: float

    def best(self, spots: Spots) -> Best:
        """Return a layout in the containers' own coordinates."""
        o, n = self.outlines, sum(s.count for s in self.shapes)
        own = spots.at[:n] - self.field.shift[spots.home[:n]]
        free = np.array(self.free)[o.shape[spots.variant[:n]]]
        turn = np.where(free, spots.turn[:n] % 360.0, spots.turn[:n])  # a listed turn stays the listed number
        places = (
            Place(int(o.shape[v]), int(k), float(t), bool(o.mirrored[v]), float(x), float(y))
            for v, k, t, (x, y) in zip(spots.variant[:n], spots.home[:n], turn, own, strict=True)
        )
        return Best(tuple(places), spots.rects, spots.length_mm)


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
    many = _many_turns(sum(s.turns_deg is None for s in shapes))
    turns = [_even_turns(s.outer, many) if s.turns_deg is None else tuple(s.turns_deg) for s in shapes]
    outlines = pack([*shapes, *field.fixed], [*turns, *((0.0,) for _ in field.fixed)])
    kinds = np.repeat(np.arange(len(shapes)), [s.count for s in shapes])
    free = (*(s.turns_deg is None for s in shapes), *(False for _ in field.fixed))
    spots = _given(outlines, field, kinds, start, free) if start else _in_columns(outlines, field, kinds)
    area = sum(s.count * (abs(signed_area(s.outer)) - sum(abs(signed_area(h)) for h in s.holes)) for s in shapes)
    return Task(tuple(shapes), field, outlines, free, spots, area)


def _many_turns(kinds: int) -> int:
    """Return how many turns to pack of shapes that may turn freely: fewer where there are many kinds."""
    return next((turns for most, turns in FREE_TURNS if kinds <= most), FEWEST_FREE_TURNS)


def _even_turns(outer: Floats, many: int) -> tuple[float, ...]:
    """Spread turns (degrees) evenly, the four that make the shape's box least first."""
    first = least_box_turn(outer) % 90.0
    return tuple((first + 90.0 * q + 360.0 * k / many) % 360.0 for k in range(many // 4) for q in range(4))


def _given(outlines: Outlines, field: Field, kinds: Ints, start: Sequence[Place], free: Sequence[bool]) -> Spots:
    """Return the layout of the given places, ordered by shape."""
    places = sorted(start, key=lambda p: p.shape)
    if [p.shape for p in places] != kinds.tolist():
        raise ValueError("the start does not hold every piece once")
    variants = np.array([variant_of(outlines, p) for p in places], dtype=np.int64)
    home = np.array([p.container for p in places], dtype=np.int64)
    at = np.array([(p.x, p.y) for p in places]) + field.shift[home]
    packed = outlines.turn[variants, 2]
    off = (np.array([p.turn_deg for p in places]) - packed + 180.0) % 360.0 - 180.0
    off[np.abs(off) < SAME_DEG] = 0.0
    if off[~np.array(free)[kinds]].any():
        raise ValueError("a piece of the start is turned as it may not be")
    turn = np.where(off == 0.0, packed, [p.turn_deg for p in places])
    return _spots(outlines, field, variants, home, turn, at)


def _in_columns(outlines: Outlines, field: Field, kinds: Ints) -> Spots:
    """Return boxes in columns; only in containers that are rectangles."""
    variants = flattest_variants(outlines, kinds, float((field.rect[:, 3] - field.rect[:, 1]).max()))
    laid = None if field.fixed else lay_in_columns(outlines.rings.box[variants], list(field.rect))
    if laid is None:
        raise ValueError("the pieces do not fit into the containers as boxes in columns")
    home, at = laid
    return _spots(outlines, field, variants, home, outlines.turn[variants, 2], at)


def _spots(outlines: Outlines, field: Field, variants: Ints, home: Ints, turn: Floats, at: Floats) -> Spots:
    """Layout with the field's fixed pieces added at the end."""
    fixed = len(field.fixed)
    last = int(home.max())
    rings = outlines.rings
    right = [
        x + turned(rings.edge[slice(*rings.at[v]), :2], t - outlines.turn[v, 2], mirrored=False)[:, 0].max()
        for v, t, x, k in zip(variants, turn, at[:, 0], home, strict=True)
        if k == last
    ]
    reach = max(right) + LONGEST_MITRE * HAIR_MM - field.rect[last, 0]
    own = np.arange(len(outlines.shape) - fixed, len(outlines.shape))
    return Spots(
        np.concatenate([variants, own]),
        np.concatenate([home, np.full(fixed, -1)]),
        np.concatenate([turn, np.zeros(fixed)]),
        np.vstack([at, np.zeros((fixed, 2))]),
        last + 1,
        float(reach),
    )
