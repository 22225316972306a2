"""Borders of sheets, drawn around the parts: not to be cut."""

import re
from collections.abc import Sequence

import numpy as np

from flatprep.drawing.tree import Nesting, Polygons, nesting
from flatprep.geom.bulge import Floats
from flatprep.model.drawing import Contour

PIECE_MM = 30.0
"""Smaller outlines with something in them are letters and counterbores of a plate (common practice)."""
PAPER_MM = ((210, 297), (297, 420), (420, 594), (594, 841), (841, 1189))
"""A4 to A0 (ISO 216)."""
MARGIN = 0.8
"""A rectangle within paper that fills so much of it is the frame drawn on it."""
_SHEET = re.compile(
    r"\b(sheets?(?![ -]*metal)|stock|page|paper|bed|workpiece|blatt|rohling|feuille|foglio|hoja|folha|arkusz)\b",
    re.IGNORECASE,
)


def without_frames(contours: Sequence[Contour], shapes: Polygons) -> tuple[list[Contour], Nesting, list[Contour]]:
    """Part contours from the borders around them; `shapes` are their polygons.

    Returns
    -------
    contours, nesting, frames
        What is left, what lies in what of it, and the borders from the outside inwards.
    """
    left, frames = list(contours), list[Contour]()
    while True:
        nest = nesting(shapes)
        index = frame_index(left, nest, frames)
        if index is None:
            return left, nest, frames
        frames.append(left.pop(index))
        shapes = np.delete(shapes, index)


def frame_index(contours: Sequence[Contour], nest: Nesting, around: Sequence[Contour] = ()) -> int | None:
    """Index of a contour that is a drawn sheet border, None where there is none.

    It is one when it is a rectangle that holds everything else, and one of these speaks for it:

    - most of what lies in it directly are pieces, that is outlines of some size with contours of their own, two at
      least: a plate's windows are empty, and what its letters and counterbores hold is small;
    - it is paper, or the frame on it (it fills most of the border around it), and holds a part with holes;
    - it lies alone on a layer that is called after sheets, with an outline of some size in it: not a plate's own
      outline, in which there are but holes.
    """
    outermost = np.flatnonzero(nest.depth == 0)
    if len(outermost) != 1 or len(contours) < 2:
        return None
    frame = int(outermost[0])
    if not _is_rectangle(contours[frame].xyb):
        return None
    inside = [int(i) for i in np.flatnonzero(nest.parent == frame)]
    with_content = [i for i in inside if (nest.parent == i).any()]
    pieces = [i for i in with_content if _is_piece(contours[i])]
    drawn_around = len(pieces) >= 2 and 2 * len(pieces) > len(inside)
    on_paper = bool(pieces) and (_is_paper(contours[frame]) or _fills(contours[frame], around))
    named = any(_is_piece(contours[i]) for i in inside) and _named(contours, frame)
    return frame if drawn_around or on_paper or named else None


def _is_piece(contour: Contour) -> bool:
    x0, y0, x1, y1 = contour.bounds
    return max(x1 - x0, y1 - y0) >= PIECE_MM


def _is_paper(contour: Contour) -> bool:
    sides = np.hypot(*(np.roll(contour.xyb[:, :2], -1, axis=0) - contour.xyb[:, :2]).T)
    return any(abs(sides[:2].min() - a) <= 1.0 and abs(sides[:2].max() - b) <= 1.0 for a, b in PAPER_MM)


def _fills(contour: Contour, around: Sequence[Contour]) -> bool:
    return bool(around) and contour.area_mm2 > MARGIN * around[-1].area_mm2


def _named(contours: Sequence[Contour], frame: int) -> bool:
    """Tell whether a contour alone lies on a layer that is called after sheets."""
    others = {layer for k, c in enumerate(contours) if k != frame for layer in c.layers}
    return all(_SHEET.search(re.sub(r"[\d_]", " ", n)) and n not in others for n in contours[frame].layers)


def _is_rectangle(xyb: Floats) -> bool:
    """Tell whether a closed polyline has four straight sides at right angles, however it is turned."""
    if len(xyb) != 4 or xyb[:, 2].any():
        return False
    step = np.roll(xyb[:, :2], -1, axis=0) - xyb[:, :2]
    length = np.hypot(*step.T)
    across = np.abs(np.sum(step * np.roll(step, -1, axis=0), axis=1))
    return bool((across <= 1e-6 * length * length.max()).all())
