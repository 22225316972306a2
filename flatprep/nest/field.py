"""The ground the pieces lie on: containers side by side, what surrounds an irregular one, places in and out of it."""

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest.outlines import Ints, Outlines, signed_area
from flatprep.nest.shapes import Container, Place, Shape

# Containers stand apart by this share of the longest side, so that the frame of one reaches into no other.
APART = 0.5
FRAME = 0.2


class Field(NamedTuple):
    """Containers in one plane.

    Attributes
    ----------
    rect : ndarray, shape (k, 4)
        Their boxes x0, y0, x1, y1 in the plane, mm.
    shift : ndarray, shape (k, 2)
        What was added to a container's own coordinates, mm.
    area : ndarray, shape (k,)
        Room in each, mm².
    fixed : tuple of Shape
        Frames around irregular containers and their holes, at rest in the plane.
    """

    rect: Floats
    shift: Floats
    area: Floats
    fixed: tuple[Shape, ...]


def field_of(containers: Sequence[Container]) -> Field:
    """Set containers side by side along x."""
    boxes = np.array([[*c.outer.min(axis=0), *c.outer.max(axis=0)] for c in containers])
    sides = boxes[:, 2:] - boxes[:, :2]
    longest = float(sides.max())
    steps = np.concatenate([[0.0], np.cumsum(sides[:-1, 0] + APART * longest)])
    shift = np.column_stack([steps, np.zeros(len(boxes))]) - boxes[:, :2]
    shift[0] = 0.0 if len(boxes) == 1 else shift[0]
    fixed = [s for c, by, box in zip(containers, shift, boxes, strict=True) for s in _surroundings(c, by, box, longest)]
    area = [abs(signed_area(c.outer)) - sum(abs(signed_area(h)) for h in c.holes) for c in containers]
    return Field(boxes + np.hstack([shift, shift]), shift, np.array(area), tuple(fixed))


def _surroundings(container: Container, shift: Floats, box: Floats, longest: float) -> list[Shape]:
    """Return a frame where the container is no rectangle, and a plug for each hole."""
    found = [Shape(outer=h + shift) for h in container.holes]
    whole = float(np.prod(box[2:] - box[:2]))
    if abs(signed_area(container.outer)) < whole * (1.0 - 1e-9):
        x0, y0, x1, y1 = box + np.array([-FRAME, -FRAME, FRAME, FRAME]) * longest
        frame = np.array([[x0, y0], [x1, y0], [x1, y1], [x0, y1]])
        found.append(Shape(outer=frame + shift, holes=(container.outer + shift,)))
    return found


def places_of(outlines: Outlines, field: Field, variant: Ints, home: Ints, at: Floats) -> tuple[Place, ...]:
    """Places, in their containers' own coordinates, of pieces in the plane."""
    own = at - field.shift[home]
    return tuple(
        Place(
            int(outlines.shape[v]), int(k), float(outlines.turn[v, 2]), bool(outlines.mirrored[v]), float(x), float(y)
        )
        for v, k, (x, y) in zip(variant, home, own, strict=True)
    )


def variant_of(outlines: Outlines, place: Place) -> int:
    """Return the variant nearest to a place's turn, in its mirror state."""
    choice = np.arange(outlines.first[place.shape], outlines.first[place.shape + 1])
    choice = choice[outlines.mirrored[choice] == int(place.mirrored)]
    off = np.abs((outlines.turn[choice, 2] - place.turn_deg + 180.0) % 360.0 - 180.0)
    return int(choice[np.argmin(off)])
