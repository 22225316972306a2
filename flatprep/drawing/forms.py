"""Other forms of a sheet for cutters that want them: contours alone, old DXF, kerf already allowed for, shared cuts."""

from dataclasses import dataclass
from enum import StrEnum

import numpy as np
import shapely

from flatprep.base.errors import OutputError
from flatprep.geom.bulge import circle, reverse, signed_area
from flatprep.geom.polygons import ring
from flatprep.model.drawing import Contour, Part

KERF_CHORD_MM = 0.005


class Form(StrEnum):
    """What can be asked for beside the usual sheet."""

    CUT_ONLY = "cut-only"
    R12 = "r12"
    KERF = "kerf"
    SHARED = "shared"


@dataclass(frozen=True, slots=True)
class SheetForm:
    """How a sheet is written.

    Attributes
    ----------
    version : str
        DXF version: ``R2010``, or ``R12`` with POLYLINE in place of LWPOLYLINE.
    cut_only : bool
        Layer CUT and nothing else.
    """

    version: str = "R2010"
    cut_only: bool = False


USUAL = SheetForm()
FORMS = {
    Form.CUT_ONLY: SheetForm(cut_only=True),
    Form.R12: SheetForm(version="R12"),
    Form.KERF: SheetForm(cut_only=True),
    Form.SHARED: SheetForm(cut_only=True),
}


def with_kerf(part: Part, kerf_mm: float) -> Part:
    """Return the part with its contours moved by half the kerf into the waste: what the middle of the cut follows.

    Circles stay circles; other contours become chords within 0.005 mm of the true offset.

    Raises
    ------
    OutputError
        When a contour vanishes or falls apart: it cannot be cut with this kerf.
    """
    outer = _moved(part, part.outer, kerf_mm / 2.0)
    return Part(
        part.name, outer, tuple(_moved(part, h, -kerf_mm / 2.0) for h in part.holes), part.marks, part.bends, part.depth
    )


def _moved(part: Part, contour: Contour, by_mm: float) -> Contour:
    left = signed_area(contour.xyb) > 0
    if contour.circle is not None:
        x, y, radius = contour.circle
        if radius + by_mm <= 0:
            raise _too_small(part, x, y, by_mm)
        whole = circle(x, y, radius + by_mm)
        xyb = whole if left else reverse(whole, closed=True)
    else:
        shape = shapely.Polygon(ring(contour.xyb, KERF_CHORD_MM)).buffer(by_mm, quad_segs=32)
        if shape.geom_type != "Polygon" or shape.is_empty:
            x0, y0, x1, y1 = contour.bounds
            raise _too_small(part, (x0 + x1) / 2, (y0 + y1) / 2, by_mm)
        points = np.asarray(shape.exterior.coords)[:-1]
        xyb = np.column_stack([points, np.zeros(len(points))])
        xyb = xyb if (signed_area(xyb) > 0) == left else reverse(xyb, closed=True)
    return Contour(xyb, contour.handles[:1] * len(xyb), contour.layers)


def _too_small(part: Part, x: float, y: float, by_mm: float) -> OutputError:
    return OutputError(
        f"{part.name}: the contour at ({x:.2f}, {y:.2f}) does not survive a kerf of {2 * abs(by_mm):g} mm",
        "enlarge it, or leave --also kerf and --also shared out",
    )
