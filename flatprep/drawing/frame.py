"""A sheet's own border, drawn around the parts: not to be cut."""

from collections.abc import Sequence

import numpy as np

from flatprep.drawing.tree import Nesting
from flatprep.geom.bulge import Floats
from flatprep.model.drawing import Contour


def frame_index(contours: Sequence[Contour], nest: Nesting) -> int | None:
    """Index of a contour that is a drawn sheet border, None where there is none.

    It is one when it is a rectangle that holds everything else, and most of what lies in it directly are
    outlines with contours of their own, two at least: a plate's windows are empty.
    """
    outermost = np.flatnonzero(nest.depth == 0)
    if len(outermost) != 1 or len(contours) < 5:
        return None
    frame = int(outermost[0])
    if not _is_rectangle(contours[frame].xyb):
        return None
    inside = [int(i) for i in np.flatnonzero(nest.parent == frame)]
    with_content = [i for i in inside if (nest.parent == i).any()]
    return frame if len(with_content) >= 2 and 2 * len(with_content) > len(inside) else None


def _is_rectangle(xyb: Floats) -> bool:
    """Tell whether a closed polyline has four straight sides at right angles, however it is turned."""
    if len(xyb) != 4 or xyb[:, 2].any():
        return False
    step = np.roll(xyb[:, :2], -1, axis=0) - xyb[:, :2]
    length = np.hypot(*step.T)
    across = np.abs(np.sum(step * np.roll(step, -1, axis=0), axis=1))
    return bool((across <= 1e-6 * length * length.max()).all())
