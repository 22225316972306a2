"""The holes of a part that bench work is meant for, held against what the job says of them."""

import shapely

from flatprep.base.errors import JobError
from flatprep.base.tolerances import DEFAULT
from flatprep.bench.part import BenchPart
from flatprep.geom import bulge
from flatprep.geom.bulge import Floats
from flatprep.job.values import Point, Work
from flatprep.measure.holes import Hole, HoleShape
from flatprep.model.drawing import Part
from flatprep.practice.targets import Target, nearest_hole, targets_of

Found = tuple[tuple[Target, ...], ...]
"""The places of each piece of work of a part."""


def places_of(bench: BenchPart) -> Found:
    """Return the places of each piece of the job's work on a part; see `targets`."""
    return tuple(targets(bench, work) for work in bench.work)


def targets(bench: BenchPart, work: Work) -> tuple[Target, ...]:
    """Return the places that a piece of work is meant for; may be none for a diameter that the part does not have.

    Raises
    ------
    JobError
        When a place is not on the material and no hole has its centre there.
    """
    found = targets_of(bench.holes, work)
    for target in found:
        if target.hole is None and not _on_material(bench.part, target.at):
            near = nearest_hole(bench.holes, target.at)
            hint = f"the nearest hole is at ({near.at[0]:.3f}, {near.at[1]:.3f})" if near else "the drawing has no hole"
            shown = f"({target.at[0]:g}, {target.at[1]:g})"
            raise JobError(f"{work.where}: at = {shown}: no hole has its centre there, and it is not on the part", hint)
    return found


def _on_material(part: Part, point: Point) -> bool:
    return bool(shapely.Polygon(*_rings(part)).contains(shapely.Point(point)))


def _rings(part: Part) -> tuple[Floats, list[Floats]]:
    outer, *holes = (bulge.points_along(c.xyb, closed=True, chord_mm=DEFAULT.chord_mm)[:, :2] for c in part.contours)
    return outer, holes


def check_counts(group: list[tuple[BenchPart, Found]]) -> None:
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
            what = "places given" if work.at else f"holes of {work.hole_mm:g} mm drawn"
            raise JobError(f"{work.where}: count = {work.count}: {what}: {found}", "correct count, or the drawing")


def _listed(holes: list[Hole]) -> str:
    sizes = sorted({round(h.width_mm, 3) for h in holes if h.shape in (HoleShape.CIRCLE, HoleShape.HEXAGON)})
    count = {size: sum(abs(h.width_mm - size) < 1e-3 for h in holes) for size in sizes}
    listed = ", ".join(f"{count[size]} x {size:g} mm" for size in sizes)
    return listed or "no round hole"
