"""Cut lines of a sheet with gaps in them: stretches that are left standing, or are cut with another part."""

from collections.abc import Iterator, Mapping, Sequence

from flatprep.drawing.order import cutting_order
from flatprep.geom.stretch import Span, nearest, without
from flatprep.model.drawing import Contour, Curve, Part
from flatprep.model.layout import SheetLayout
from flatprep.model.tab import Tab


def tabbed(
    sheet: SheetLayout, paths: Mapping[str, Part], tabs: Mapping[str, Sequence[Tab]], kerf_mm: Mapping[str, float]
) -> Iterator[Curve]:
    """Yield the cut lines of a sheet in their order, outlines open where a tab stands.

    Parameters
    ----------
    paths
        The parts with their contours where the middle of the cut runs (`flatprep.drawing.forms.with_kerf`).
    tabs
        By part; their places are those of the true outline.
    kerf_mm
        By part: the cut's round ends take half of it at either side of a tab, so the gap is that much longer.
    """
    gaps = {name: tab_gaps(paths[name].outer, some, kerf_mm[name]) for name, some in tabs.items() if some}
    for index in cutting_order(sheet, paths):
        placement = sheet.placements[index]
        part, motion = paths[placement.part], placement.motion
        for hole in part.holes:
            yield Curve(motion.polyline(hole.xyb), closed=True)
        for line in opened(part.outer, gaps.get(placement.part, ())):
            yield Curve(motion.polyline(line.xyb), closed=line.closed)


def tab_gaps(outline: Contour, tabs: Sequence[Tab], kerf_mm: float) -> list[Span]:
    """Return the stretches of an outline that its tabs leave uncut, mm along it."""
    half = [(tab.width_mm + kerf_mm) / 2.0 for tab in tabs]
    middle = [nearest(outline.xyb, tab.at) for tab in tabs]
    return [(s - h, s + h) for s, h in zip(middle, half, strict=True)]


def opened(contour: Contour, gaps: Sequence[Span]) -> list[Curve]:
    """Return a contour without some stretches: itself, closed, where there are none."""
    if not gaps:
        return [Curve(contour.xyb, closed=True)]
    return [Curve(xyb, closed=False) for xyb in without(contour.xyb, gaps)]
