"""Mass and how it is spread, on the exact outline."""

from collections.abc import Sequence
from math import atan2, degrees, hypot, pi, sqrt

import numpy as np

from flatprep.geom.moments import region_moments
from flatprep.model.drawing import Part
from flatprep.model.estimate import MassProperties
from flatprep.model.work import Step, StepKind

_ROUND_TOOLS = (StepKind.DRILL, StepKind.REAM, StepKind.BORE, StepKind.TAP)
_SINKS = (StepKind.COUNTERSINK, StepKind.COUNTERBORE)


def mass_kg(area_mm2: float, thickness_mm: float, density_kg_m3: float, removed_mm3: float = 0.0) -> float:
    """Mass of a flat part: m = (A t - removed) ρ · 1e-9."""
    return (area_mm2 * thickness_mm - removed_mm3) * density_kg_m3 * 1e-9


def mass_properties(part: Part, mass: float | None) -> MassProperties:
    """Return the second moments about the centroid, the radius of gyration and the moment of inertia for spinning.

    Parameters
    ----------
    part
        Bench work is not taken off.
    mass
        kg, or None.

    Notes
    -----
    Exact on lines and arcs (`flatprep.geom.moments`), taken about the middle of the part's box, so that a
    drawing far from its origin costs no digits. Principal axes: tan 2α = -2 Ixy / (Ixx - Iyy).
    """
    x0, y0, x1, y1 = part.outer.bounds
    ox, oy = (x0 + x1) / 2.0, (y0 + y1) / 2.0
    shift = np.array([ox, oy, 0.0])
    local = region_moments(part.outer.xyb - shift, [hole.xyb - shift for hole in part.holes])
    cx, cy = local.centroid
    iyy, ixx, ixy = local.about_centroid()
    middle, radius = (ixx + iyy) / 2.0, hypot((ixx - iyy) / 2.0, ixy)
    polar = ixx + iyy
    return MassProperties(
        centroid_mm=(cx + ox, cy + oy),
        ixx_mm4=ixx,
        iyy_mm4=iyy,
        ixy_mm4=ixy,
        polar_mm4=polar,
        principal_mm4=(middle + radius, middle - radius),
        principal_deg=_axis_deg(ixx - iyy, ixy) if radius > 1e-9 * middle else 0.0,
        gyration_mm=sqrt(polar / local.area),
        spin_kg_mm2=None if mass is None else mass * polar / local.area,
    )


def _axis_deg(difference: float, ixy: float) -> float:
    angle = degrees(atan2(-2.0 * ixy, difference)) / 2.0
    return angle + 180.0 if angle <= -90.0 + 1e-9 else angle


def bench_removed_mm3(part: Part, steps: Sequence[Step], thickness_mm: float) -> float:
    """Volume that bench work takes off beyond the drawn outline, mm³, as far as its steps say sizes and places.

    Parameters
    ----------
    part
        With its holes as drawn: a drawn hole counts as open already.
    steps
        Drilled, reamed, bored and tapped (by their drill) holes count with the largest tool at each place;
        countersinks and counterbores with their diameter and depth.
    thickness_mm
        Of the sheet.
    """
    opened: dict[tuple[float, float], float] = {}
    for step in steps:
        for at in step.at if step.kind in _ROUND_TOOLS and step.tool_dia_mm else ():
            opened[at] = max(opened.get(at, 0.0), step.tool_dia_mm or 0.0)
    total = 0.0
    for at, tool in opened.items():
        total += _disc(max(tool, drawn := _drawn_mm(part, at))) * thickness_mm - _disc(drawn) * thickness_mm
    for step in steps:
        for at in step.at if step.kind in _SINKS and step.tool_dia_mm else ():
            hole = max(opened.get(at, 0.0), _drawn_mm(part, at))
            total += _sink_mm3(step, hole, thickness_mm)
    return total


def _disc(diameter: float) -> float:
    return pi / 4.0 * diameter * diameter


def _sink_mm3(step: Step, hole_mm: float, thickness_mm: float) -> float:
    """Ring between a countersink (a cone; 90 degrees where no depth is given) or counterbore and the hole."""
    wide = step.tool_dia_mm or 0.0
    if wide <= hole_mm:
        return 0.0
    if step.kind is StepKind.COUNTERBORE:
        return (_disc(wide) - _disc(hole_mm)) * min(step.depth_mm or 0.0, thickness_mm)
    depth = min(step.depth_mm or (wide - hole_mm) / 2.0, thickness_mm)
    return pi / 12.0 * depth * (wide * wide + wide * hole_mm + hole_mm * hole_mm) - _disc(hole_mm) * depth


def _drawn_mm(part: Part, at: tuple[float, float]) -> float:
    """Return the diameter of the drawn round hole around a place, 0 where there is none."""
    for hole in part.holes:
        circle = hole.circle
        if circle and hypot(circle[0] - at[0], circle[1] - at[1]) < 0.05:
            return 2.0 * circle[2]
    return 0.0
