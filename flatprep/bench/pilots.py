"""The holes that are cut: as drawn, at the advised smaller diameter, or only centre-marked."""

from dataclasses import dataclass, replace

import numpy as np

from flatprep.bench.hole_plans import hole_plans
from flatprep.bench.part import BenchPart
from flatprep.geom import bulge
from flatprep.job.values import Pilots, Point
from flatprep.model.drawing import Contour, Curve, Part

MARK_LAYER = "MARK"
MARK_MM = 2.0
"""Length of each stroke of the cross that marks a centre."""


@dataclass(frozen=True, slots=True)
class PilotChange:
    """A part with its holes as they will be cut.

    Attributes
    ----------
    part : Part
        The same object where nothing changes.
    changes : tuple of str
        What was changed, in words.
    marks : tuple of (float, float)
        Centres that are marked instead of cut, mm.
    """

    part: Part
    changes: tuple[str, ...] = ()
    marks: tuple[Point, ...] = ()


def apply_pilots(bench: BenchPart) -> PilotChange:
    """Carry a job's `pilots` out on a part.

    Raises
    ------
    JobError
        When the work of the part is wrong (`flatprep.bench.checklist`).
    """
    if bench.pilots is Pilots.AS_DRAWN or not bench.work:
        return PilotChange(bench.part)
    holes: list[Contour | None] = list(bench.part.holes)
    changes: list[str] = []
    marks: list[Point] = []
    for planned in hole_plans(bench):
        for contour, at in planned.holes:
            index = next(k for k, hole in enumerate(holes) if hole is contour)
            new = None if bench.pilots is Pilots.MARK else planned.cut_mm
            if new is None:
                marks.append(at)
                holes[index] = None
                changes.append(_said(planned.drawn_mm, at, f"centre-marked for {planned.purpose}"))
            elif abs(new - planned.drawn_mm) > 1e-6:
                holes[index] = _circle(contour, at, new)
                changes.append(_said(planned.drawn_mm, at, f"cut at {new:.4g} mm for {planned.purpose}"))
    if not changes:
        return PilotChange(bench.part)
    kept = tuple(hole for hole in holes if hole is not None)
    crosses = tuple(curve for at in marks for curve in _cross(at))
    part = replace(bench.part, holes=kept, marks=(*bench.part.marks, *crosses))
    return PilotChange(part, tuple(changes), tuple(marks))


def _said(drawn_mm: float, at: Point, what: str) -> str:
    return f"hole of {drawn_mm:.4g} mm at ({at[0]:.3f}, {at[1]:.3f}) {what}"


def _circle(contour: Contour, at: Point, diameter_mm: float) -> Contour:
    xyb = bulge.reverse(bulge.circle(at[0], at[1], diameter_mm / 2.0), closed=True)  # holes run clockwise
    handle = contour.distinct_handles[:1] or ("",)
    return Contour(xyb, handle * len(xyb), contour.layers)


def _cross(at: Point) -> tuple[Curve, ...]:
    half = MARK_MM / 2.0
    strokes = (((at[0] - half, at[1]), (at[0] + half, at[1])), ((at[0], at[1] - half), (at[0], at[1] + half)))
    return tuple(Curve(np.array([(*a, 0.0), (*b, 0.0)]), closed=False, layer=MARK_LAYER) for a, b in strokes)
