"""Which holes of a part a piece of bench work is meant for."""

from dataclasses import dataclass
from math import hypot

import shapely

from flatprep.base.errors import JobError
from flatprep.base.tolerances import DEFAULT
from flatprep.bench.part import BenchPart
from flatprep.geom import bulge
from flatprep.geom.bulge import Floats
from flatprep.job.values import Point, Work
from flatprep.measure.holes import Hole, HoleShape
from flatprep.model.drawing import Part

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
        return self.hole.width_mm if self.hole else None


def targets(bench: BenchPart, work: Work) -> tuple[Target, ...]:
    """Return the places that a piece of work is meant for; may be none for a diameter that the part does not have.

    Raises
    ------
    JobError
        When a place lies off the part, or in a hole but not at its centre.
    """
    if work.hole_mm is not None:
        return tuple(Target(h.at, h) for h in bench.holes if _fits(h, work, work.hole_mm))
    return tuple(_at(bench, work, point) for point in work.at)


def _fits(hole: Hole, work: Work, diameter_mm: float) -> bool:
    shape = HoleShape.HEXAGON if work.kind == "nut_pocket" and hole.shape is HoleShape.HEXAGON else HoleShape.CIRCLE
    return hole.shape is shape and abs(hole.width_mm - diameter_mm) <= SAME_DIA_MM


def _at(bench: BenchPart, work: Work, point: Point) -> Target:
    near = min(bench.holes, key=lambda h: _apart(h.at, point), default=None)
    if near is not None and _apart(near.at, point) <= OFF_CENTRE_MM:
        return Target(near.at, near)
    ring = shapely.Polygon(*_rings(bench.part))
    if ring.contains(shapely.Point(point)):
        return Target(point, None)
    shown = f"({point[0]:g}, {point[1]:g})"
    hint = f"the nearest hole is at ({near.at[0]:.3f}, {near.at[1]:.3f})" if near else "the drawing has no hole"
    raise JobError(f"{work.where}: at = {shown}: no hole has its centre there, and it is not on the material", hint)


def _rings(part: Part) -> tuple[Floats, list[Floats]]:
    outer, *holes = (bulge.points_along(c.xyb, closed=True, chord_mm=DEFAULT.chord_mm)[:, :2] for c in part.contours)
    return outer, holes


def _apart(a: Point, b: Point) -> float:
    return hypot(a[0] - b[0], a[1] - b[1])


def check_counts(group: list[tuple[BenchPart, tuple[tuple[Target, ...], ...]]]) -> None:
    """Hold what was found in all parts of a drawing against what the job says.

    Parameters
    ----------
    group
        The parts of one drawing, each with the targets of each piece of work, in the job's order.

    Raises
    ------
    JobError
        When a diameter matches no hole, or not as many as `count` says.
    """
    for index, work in enumerate(group[0][0].work):
        found = sum(len(matched[index]) for _, matched in group)
        if found == 0 and work.hole_mm is not None:
            raise JobError(
                f"{work.where}: hole = {work.hole_mm:g}: no hole is drawn with that diameter",
                "the drawing has " + _listed([h for bench, _ in group for h in bench.holes]),
            )
        if work.count is not None and found != work.count:
            what = "places are given" if work.at else f"holes of {work.hole_mm:g} mm are drawn"
            raise JobError(f"{work.where}: count = {work.count}: {found} {what}", "correct count, or the drawing")


def _listed(holes: list[Hole]) -> str:
    sizes = sorted({round(h.width_mm, 3) for h in holes if h.shape in (HoleShape.CIRCLE, HoleShape.HEXAGON)})
    count = {size: sum(abs(h.width_mm - size) < 1e-3 for h in holes) for size in sizes}
    listed = ", ".join(f"{count[size]} x {size:g} mm" for size in sizes)
    return listed or "no round hole"
