"""Why a piece found no place, in words that tell what would help."""

import numpy as np

from flatprep.geom.bulge import Similarity
from flatprep.model.layout import Unplaced
from flatprep.nest.allowed import turns_on
from flatprep.nest.construct import Bin, Layer
from flatprep.nest.group import Group
from flatprep.nest.problem import Item
from flatprep.nest.shapes import Container, Shape

EVERY_DEG = 2.0
"""Turns tried for a piece that is tight."""


def extra_turn(shape: Shape, turns: tuple[float, ...] | None, container: Container) -> tuple[float, ...] | None:
    """Return turns with that at which the box of a freely turning shape goes best into that of the container."""
    room = np.ptp(container.outer, axis=0)
    if turns is not None:
        return turns
    best, angle = -np.inf, 0.0
    for turn in np.arange(0.0, 180.0, EVERY_DEG):
        size = np.ptp(Similarity(turn_deg=float(turn)).points(shape.outer), axis=0)
        spare = float(np.min(room - size))
        if spare > best:
            best, angle = spare, float(turn)
    return (0.0, 90.0, 180.0, 270.0, angle, (angle + 180.0) % 360.0)


def why_unplaced(group: Group, shape: int, count: int) -> list[Unplaced]:
    """Entries for pieces of a shape that are left out: what would have to change for them to fit."""
    return [Unplaced(item.name, many, _why(group, shape, item)) for item, many in group.without_place(shape, count)]


def _why(group: Group, shape: int, item: Item) -> str:
    names = ", ".join(dict.fromkeys(s.name for s in group.stock))
    if not group.stock:
        return "margin and keep-outs leave nothing of any sheet"
    mine = group.shapes[shape]
    allowed = [b for b, s in zip(group.bins, group.stock, strict=True) if turns_on(item, s) != ()]
    if _fits(Shape(mine.outer, (), None, mine.mirror), allowed, [b.turns[shape] for b in allowed]):
        return f"no room left on {names}"
    flipped = (not mine.mirror[0],)
    if not item.may_flip and _fits(Shape(mine.outer, (), None, flipped), allowed, [b.turns[shape] for b in allowed]):
        return f"fits {names} only turned over, which may_flip = true would allow"
    if _fits(Shape(mine.outer, (), None, mine.mirror), group.bins, [None] * len(group.bins)):
        return f"fits {names} only at a turn that its turns or its grain do not allow"
    width, height = item.part.size_mm
    return f"{width:.2f} x {height:.2f} mm with spacing and margin is larger than {names}"


def _fits(shape: Shape, bins: tuple[Bin, ...] | list[Bin], turns: list[tuple[float, ...] | None]) -> bool:
    kinds = [Bin(b.container, (extra_turn(shape, t, b.container),)) for b, t in zip(bins, turns, strict=True)]
    layer = Layer([shape], kinds, coarse=False)
    return any(layer.fits_alone(0, k) for k in range(len(kinds)))
