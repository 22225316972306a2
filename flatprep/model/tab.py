"""A holding tab: a short stretch of a contour that is left standing."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from flatprep.model.drawing import Curve

STROKE_MM = 3.0
"""Least length of the stroke that notes a tab."""


@dataclass(frozen=True, slots=True)
class Tab:
    """A bridge of material between a part and the sheet around it, broken out by hand afterwards.

    Attributes
    ----------
    at : (float, float)
        Its middle on the part's outline, drawing coordinates, mm.
    normal : (float, float)
        Unit vector out of the part.
    width_mm : float
        Material left standing, measured along the outline.
    """

    at: tuple[float, float]
    normal: tuple[float, float]
    width_mm: float


NO_TABS: Mapping[str, Sequence[Tab]] = {}
"""No part has any."""


def tab_stroke(tab: Tab) -> Curve:
    """Return the short stroke across the outline that notes a tab, half of it on the part."""
    at, way = np.array(tab.at), np.array(tab.normal) * max(STROKE_MM, 2.0 * tab.width_mm) / 2.0
    return Curve(np.column_stack([[at - way, at + way], [0.0, 0.0]]), closed=False)
