"""Slots and notches that are drawn for the thickness of the sheet, found and made wider or narrower."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.measure.facing import TooFineError
from flatprep.measure.holes import Hole, HoleShape
from flatprep.measure.part import MeasuredPart
from flatprep.model.drawing import Part

FOR_THE_SHEET_MM = 0.25
"""A slot this near to the nominal thickness is drawn for the sheet (common practice)."""
LONG = 2.0
"""Windows for tabs are so many times longer than wide at least."""
DEEP = 1.5
"""Notches for sheets are so many times deeper than wide at least: the teeth of a finger joint are not."""
SAME_MM = 0.001
"""A slot that has the wanted width within this stays as it is."""
_SQUARE = 0.02
"""Edges whose cosine with the wall is less run across it."""
_HANGS_ON = 4.0
"""What is moved with a wall beyond it is no longer than so many widths of the slot: more is an outline."""
_VERTEX_MM = 1e-6


@dataclass(frozen=True, slots=True)
class Slot:
    """A slot with parallel walls.

    Attributes
    ----------
    width_mm : float
    at : tuple of float
        Its middle, mm.
    contour : int
        0 the outer one, then the holes.
    walls : tuple of int
        Rows of the part's boundary, an edge on each side.
    """

    width_mm: float
    at: tuple[float, float]
    contour: int
    walls: tuple[int, int]
    handles: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class SlotAsk:
    """Slots drawn for a sheet of `nominal_mm` are to be `width_mm` wide."""

    nominal_mm: float
    width_mm: float


@dataclass(frozen=True, slots=True)
class Resized:
    """A slot that got another width; or why it did not."""

    slot: Slot
    width_mm: float
    why_not: str = ""


def sheet_slots(part: MeasuredPart, nominal_mm: float) -> tuple[Slot, ...]:
    """Find the slots and notches with parallel sides that are drawn for a sheet of the nominal thickness."""
    return (*_windows(part, nominal_mm), *_gaps(part, nominal_mm))


def _windows(part: MeasuredPart, nominal_mm: float) -> Iterator[Slot]:
    for k, hole in enumerate(part.holes, start=1):
        near = abs(hole.width_mm - nominal_mm) <= FOR_THE_SHEET_MM
        if near and hole.shape is HoleShape.RECTANGLE and hole.length_mm >= LONG * hole.width_mm:
            yield Slot(hole.width_mm, hole.at, k, _long_sides(part, k, hole), hole.handles)


def _long_sides(part: MeasuredPart, contour: int, hole: Hole) -> tuple[int, int]:
    """Longest edge on each long side of a rectangle."""
    b = part.boundary
    rows = np.nonzero(b.contour == contour)[0]
    along = np.array([np.cos(hole.angle_rad), np.sin(hole.angle_rad)])
    run = (b.end[rows] - b.start[rows]) @ along
    return int(rows[np.argmax(run)]), int(rows[np.argmin(run)])


def _gaps(part: MeasuredPart, nominal_mm: float) -> Iterator[Slot]:
    try:
        gaps = part.slots(nominal_mm + FOR_THE_SHEET_MM)
    except TooFineError:
        return
    for gap in gaps:
        if abs(gap.width_mm - nominal_mm) <= FOR_THE_SHEET_MM and gap.extent_mm >= DEEP * gap.width_mm:
            yield Slot(gap.width_mm, gap.at, gap.contours[0], gap.rows, part.handles(gap.rows))


def resized(part: MeasuredPart, slots: Sequence[Slot], width_mm: float) -> tuple[Part, list[Resized]]:
    """Give slots another width, each about its own middle.

    Returns
    -------
    part, told
        The changed part (the same where nothing changes), and what was done, or why not, at each slot that does not
        have that width already.

    Notes
    -----
    Each wall moves by half the difference, and with it, as it is, what hangs on to it (reliefs, fillets), up to the
    straight edges across the slot: these only get longer or shorter.
    """
    shift = [np.zeros((len(c.xyb), 2)) for c in part.part.contours]
    told = []
    for slot in slots:
        if abs(slot.width_mm - width_mm) <= SAME_MM:
            continue
        moves = [_moved(part, slot, row, (width_mm - slot.width_mm) / 2.0) for row in slot.walls]
        why = next((move for move in moves if isinstance(move, str)), "")
        told.append(Resized(slot, width_mm, why))
        if not why:
            shift[slot.contour] += sum(move for move in moves if not isinstance(move, str))
    if all(one.why_not for one in told):
        return part.part, told
    contours = [replace(c, xyb=_shifted(c.xyb, by)) for c, by in zip(part.part.contours, shift, strict=True)]
    return replace(part.part, outer=contours[0], holes=tuple(contours[1:])), told


def _shifted(xyb: Floats, by: Floats) -> Floats:
    out = xyb.copy()
    out[:, :2] += by
    return out


def _moved(part: MeasuredPart, slot: Slot, row: int, by_mm: float) -> Floats | str:
    """By how much each vertex moves with a wall, shape (n, 2), or why it cannot; `by_mm` into the material."""
    xyb, b = part.part.contours[slot.contour].xyb, part.boundary
    n = len(xyb)
    away = np.hypot(*(xyb[:, :2] - b.start[row]).T)
    first = int(np.argmin(away))
    if away[first] > _VERTEX_MM or np.hypot(*(xyb[(first + 1) % n, :2] - b.end[row])) > _VERTEX_MM:
        return "it is drawn with too many vertices"
    along = (b.end[row] - b.start[row]) / b.length[row]
    into = np.array([-along[1], along[0]])  # material lies to the left
    ends = [_crosswise(xyb, first, step, into, _HANGS_ON * slot.width_mm) for step in (1, -1)]
    if min(ends) < 0 or sum(ends) >= n - 2:
        return "its side does not end in straight edges across it"
    rows = np.arange(first - ends[1], first + 2 + ends[0]) % n
    out = np.zeros((n, 2))
    out[rows] = by_mm * into
    return out if _keeps_its_edges(xyb, out) else "the edge beside it is too short"


def _crosswise(xyb: Floats, first: int, step: int, into: Floats, most_mm: float) -> int:
    """So many vertices past the wall move with it, until a straight edge runs across; -1 where none does."""
    n = len(xyb)
    gone = 0.0
    for count in range(n - 2):
        k = (first + step * (1 + count)) % n
        edge = xyb[(k + 1) % n, :2] - xyb[k, :2]
        size, across = float(np.hypot(*edge)), abs(float(edge @ into))
        if xyb[k, 2] == 0.0 and size > _VERTEX_MM and across >= (1.0 - _SQUARE**2) * size:
            return count
        straight_on = xyb[k, 2] == 0.0 and across <= _SQUARE * size and gone == 0.0
        gone += 0.0 if straight_on else size
        if gone > most_mm:
            return -1
    return -1


def _keeps_its_edges(xyb: Floats, by: Floats) -> bool:
    """Tell whether no edge turns round."""
    old = np.roll(xyb[:, :2], -1, axis=0) - xyb[:, :2]
    new = old + np.roll(by, -1, axis=0) - by
    return bool((np.sum(old * new, axis=1) >= 0.0).all())
