"""The plates of a coupon: notches along the upper edge, bores in rows below, each with its size beside it."""

from collections.abc import Sequence
from dataclasses import dataclass, field
from itertools import zip_longest

import numpy as np

from flatprep.geom import bulge
from flatprep.geom.bulge import Floats
from flatprep.model.coupon import Trial, TrialKind
from flatprep.model.drawing import Contour, Part, Text

MOST_MM = 280.0
"""No plate is longer, one that a single row fills aside."""
DEPTH_MM = 12.0
"""Least depth of a notch."""
CHAMFER_MM = 5.0
"""The corner that is cut off: the smallest sizes are next to it."""
TEXT_MM = 2.0
GAP_MM = 1.2
"""Between a label and what it names."""
WIDE = 0.9
"""Width of a letter over its height, on the safe side."""

Point = tuple[float, float]


@dataclass(frozen=True, slots=True)
class Room:
    """What must be kept.

    Attributes
    ----------
    web_mm
        Between two edges.
    part_mm
        Longer side of a plate, at the least.
    spacing_mm
        Between two plates.
    """

    web_mm: float
    part_mm: float
    spacing_mm: float


@dataclass(slots=True)
class _Plate:
    """A plate as it grows; y runs down from its upper edge."""

    notches: list[tuple[float, float, float]] = field(default_factory=list)
    """Left side, width, depth."""
    holes: list[tuple[float, float, float]] = field(default_factory=list)
    """Centre, diameter."""
    labels: list[tuple[str, Point]] = field(default_factory=list)
    length: float = 0.0
    depth: float = 0.0


def plates(
    trials: Sequence[Trial], room: Room, *, name: str, inch: bool, layer: str
) -> tuple[tuple[Part, ...], tuple[Text, ...]]:
    """Return what is cut and what is written beside it, one plate under the other, below the origin.

    Parameters
    ----------
    trials
    room
    name
        Of the parts.
    inch
        Sizes are written in inches.
    layer
        Of the labels.
    """
    slots = _rows([t for t in trials if t.kind is TrialKind.SLOT], room)
    bores = _rows([t for t in trials if t.kind is TrialKind.BORE], room)
    parts: list[Part] = []
    texts: list[Text] = []
    y = 0.0
    for number, (notched, bored) in enumerate(zip_longest(slots, bores), start=1):
        plate = _plate(notched or (), bored or (), room, inch=inch)
        title = name if len(parts) == 0 and max(len(slots), len(bores)) == 1 else f"{name}-{number}"
        parts.append(Part(title, _outline(plate, y), tuple(_hole(x, y - down, d) for x, down, d in plate.holes)))
        texts += [Text(words, (x, y - down), layer, "", TEXT_MM) for words, (x, down) in plate.labels]
        y -= plate.depth + room.spacing_mm
    return tuple(parts), tuple(texts)


def _rows(trials: Sequence[Trial], room: Room) -> list[list[Trial]]:
    """Trials that go side by side on one plate."""
    rows: list[list[Trial]] = []
    length = 0.0
    for trial in trials:
        own = _row_mm(trial, room)
        if not rows or length + own > MOST_MM:
            rows.append([])
            length = CHAMFER_MM
        rows[-1].append(trial)
        length += own
    return rows


def _row_mm(trial: Trial, room: Room) -> float:
    return sum(_pitch(size, room) for size in trial.sizes_mm) + room.web_mm


def _pitch(size_mm: float, room: Room) -> float:
    """From one size to the next: both web and label need their room."""
    return size_mm + max(room.web_mm, TEXT_MM * WIDE * 5 - size_mm)


def _plate(notched: Sequence[Trial], bored: Sequence[Trial], room: Room, *, inch: bool) -> _Plate:
    plate = _Plate(depth=CHAMFER_MM + room.web_mm)
    x = CHAMFER_MM + room.web_mm
    for trial in notched:
        x = _notches(plate, trial, x, room, inch=inch)
    plate.length = x
    down, x = plate.depth, CHAMFER_MM + room.web_mm
    for trial in bored:
        x = _bores(plate, trial, (x, down), room, inch=inch)
    plate.length = max(plate.length, x, room.part_mm)
    plate.depth = max(plate.depth, room.web_mm + TEXT_MM)
    return plate


def _notches(plate: _Plate, trial: Trial, x: float, room: Room, *, inch: bool) -> float:
    """Add a row of notches; their ground is round, so that every process cuts them; returns where the next begins."""
    depth = max(DEPTH_MM, 2.0 * trial.wanted_mm)
    under = depth + max(trial.sizes_mm) / 2.0 + GAP_MM + TEXT_MM
    plate.labels.append((f"slot {_figure(trial.wanted_mm, inch=inch)}", (x, under + GAP_MM + TEXT_MM)))
    for size in trial.sizes_mm:
        plate.notches.append((x, size, depth))
        plate.labels.append((_figure(size, inch=inch), (x, under)))
        x += _pitch(size, room)
    plate.depth = max(plate.depth, under + 2.0 * (GAP_MM + TEXT_MM) + room.web_mm)
    return x + room.web_mm


def _bores(plate: _Plate, trial: Trial, at: Point, room: Room, *, inch: bool) -> float:
    """Add a row of bores; returns where the next one begins."""
    x, down = at
    largest = max(trial.sizes_mm)
    under = down + largest + GAP_MM + TEXT_MM
    plate.labels.append((f"bore {_figure(trial.wanted_mm, inch=inch)}", (x, under + GAP_MM + TEXT_MM)))
    for size in trial.sizes_mm:
        plate.holes.append((x + size / 2.0, down + largest / 2.0, size))
        plate.labels.append((_figure(size, inch=inch), (x, under)))
        x += _pitch(size, room)
    plate.depth = max(plate.depth, under + 2.0 * (GAP_MM + TEXT_MM) + room.web_mm)
    return x + room.web_mm


def _figure(mm: float, *, inch: bool) -> str:
    return f"{mm / 25.4:.3f}" if inch else f"{mm:.2f}"


def _outline(plate: _Plate, y: float) -> Contour:
    """Outline, anticlockwise from the lower left corner; the upper left one is cut off."""
    low = y - plate.depth
    rows = [(0.0, low, 0.0), (plate.length, low, 0.0), (plate.length, y, 0.0)]
    for x, size, depth in reversed(plate.notches):
        rows += [(x + size, y, 0.0), (x + size, y - depth, -1.0), (x, y - depth, 0.0), (x, y, 0.0)]
    rows += [(CHAMFER_MM, y, 0.0), (0.0, y - CHAMFER_MM, 0.0)]
    return _named(np.array(rows))


def _hole(x: float, y: float, diameter: float) -> Contour:
    return _named(bulge.reverse(bulge.circle(x, y, diameter / 2.0), closed=True))


def _named(xyb: Floats) -> Contour:
    return Contour(xyb, ("",) * len(xyb))
