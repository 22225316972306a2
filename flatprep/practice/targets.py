"""Which holes of a part a piece of bench work is meant for."""

from collections.abc import Iterable
from dataclasses import dataclass
from math import hypot

from flatprep.job.values import Point, Work
from flatprep.measure.holes import Hole, HoleShape

SAME_DIA_MM = 0.02
"""A drawn diameter this near to the one asked for is meant: covers inches rounded to thousandths, and chord circles."""
OFF_CENTRE_MM = 0.1


@dataclass(frozen=True, slots=True)
class Target:
    """A place that is worked on, and the hole drawn there, if there is one."""

    at: Point
    hole: Hole | None

    @property
    def drawn_mm(self) -> float | None:
        """Drawn diameter (a hexagon's across flats), None where there is no hole."""
        return round(self.hole.width_mm, 6) if self.hole else None


def targets_of(holes: Iterable[Hole], work: Work) -> tuple[Target, ...]:
    """Return the places of a piece of work: every hole of its diameter, or each of its points with the hole there."""
    known = tuple(holes)
    if work.hole_mm is not None:
        return tuple(Target(h.at, h) for h in known if _fits(h, work, work.hole_mm))
    return tuple(_at(known, point) for point in work.at)


def _fits(hole: Hole, work: Work, diameter_mm: float) -> bool:
    hexagon = work.kind == "nut_pocket" and hole.shape is HoleShape.HEXAGON
    return (hexagon or hole.shape is HoleShape.CIRCLE) and abs(hole.width_mm - diameter_mm) <= SAME_DIA_MM


def _at(holes: tuple[Hole, ...], point: Point) -> Target:
    near = nearest_hole(holes, point)
    if near is not None and apart_mm(near.at, point) <= OFF_CENTRE_MM:
        return Target(near.at, near)
    return Target(point, None)


def nearest_hole(holes: Iterable[Hole], point: Point) -> Hole | None:
    """Return the hole whose centre is nearest to a point, or None where there is no hole."""
    return min(holes, key=lambda h: apart_mm(h.at, point), default=None)


def apart_mm(a: Point, b: Point) -> float:
    """Return the distance of two points."""
    return hypot(a[0] - b[0], a[1] - b[1])
