"""A remnant's drawing as the border of stock: one outline and its holes, flattened on the safe side."""

from flatprep.base.errors import DrawingError
from flatprep.geom.bulge import Floats, reverse
from flatprep.geom.outward import outside_points
from flatprep.geom.polygons import is_simple
from flatprep.model.drawing import Contour, Drawing

BORDER_CHORD_MM = 0.01
"""Largest distance of the polygon from the drawn border; it never lies outside it."""


def outline_of(drawing: Drawing) -> tuple[Floats, tuple[Floats, ...]]:
    """Return the border of a remnant and its holes, each shape (n, 2), mm, in the drawing's own coordinates.

    Raises
    ------
    DrawingError
        When the drawing holds no closed outline, several of them, one that does not close or one that crosses itself.
    """
    for fault in drawing.faults:
        if fault.kind in ("open-contour", "self-crossing"):
            at = f" at ({fault.at[0]:.2f}, {fault.at[1]:.2f})" if fault.at else ""
            how = "crosses itself" if fault.kind == "self-crossing" else "does not close"
            raise DrawingError(f"{drawing.file}: the remnant's outline {how}{at}", "draw one closed outline")
    outermost = [part for part in drawing.parts if part.depth == 0]
    if not outermost:
        raise DrawingError(
            f"{drawing.file}: no closed outline in it", "draw the remnant's border as one closed outline"
        )
    if len(drawing.parts) > 1:
        remedy = "draw one remnant a file; what lies in its hole belongs elsewhere"
        raise DrawingError(f"{drawing.file}: {len(drawing.parts)} outlines where one remnant is meant", remedy)
    part = outermost[0]
    if not all(is_simple(c.xyb, chord_mm=BORDER_CHORD_MM) for c in part.contours):
        raise DrawingError(f"{drawing.file}: the remnant's outline crosses itself", "draw one closed outline")
    return _inside(part.outer), tuple(_inside(hole) for hole in part.holes)


def _inside(contour: Contour) -> Floats:
    """Polygon of a contour that cuts no void short: all that it leaves as material is material."""
    void = outside_points(reverse(contour.xyb, closed=True), BORDER_CHORD_MM)
    return void[::-1].copy()
