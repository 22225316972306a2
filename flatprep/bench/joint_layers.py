"""The layers of a joint: each with the hole it offers, finished as the bench work leaves it."""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace
from pathlib import Path

import shapely

from flatprep.base.errors import JobError
from flatprep.base.tolerances import DEFAULT
from flatprep.bench.match import targets
from flatprep.bench.ops import Ask
from flatprep.bench.part import BenchPart
from flatprep.bench.plan import operations
from flatprep.geom import bulge
from flatprep.job.values import JointLayer, Point, Work
from flatprep.measure.holes import HoleShape
from flatprep.model.work import Outcome, StepKind
from flatprep.practice.targets import Target, apart_mm, targets_of

_HOLE_MAKERS = (StepKind.TAP, StepKind.REAM, StepKind.BORE, StepKind.DRILL, StepKind.INSPECT, StepKind.THREAD_INSERT)


@dataclass(frozen=True, slots=True)
class Layer:
    """One layer of a joint.

    Attributes
    ----------
    label : str
        Part or spacer, for messages.
    thickness_mm : float
    hole_mm : (float, float) or None
        Least and greatest finished diameter; None where nothing is known.
    thread : str
        Name of the thread that is cut here; empty where none is.
    sink : str
        Name of the countersink or counterbore here; empty where none is.
    sunk_mm : float
        Depth of a counterbore: by so much the head sits lower.
    own : tuple of Path
        Folders of the user's own profiles.
    edge_mm, neighbour_mm : float or None
        From the hole's centre to the part's nearest edge, and to the nearest rim of another hole.
    """

    label: str
    thickness_mm: float
    hole_mm: tuple[float, float] | None = None
    thread: str = ""
    sink: str = ""
    sunk_mm: float = 0.0
    threaded: bool = False
    edge_mm: float | None = None
    neighbour_mm: float | None = None
    bench: BenchPart | None = None
    own: tuple[Path, ...] = ()


def judged(*, fits: bool) -> Outcome:
    """Return ``good`` or ``bad``."""
    return Outcome.GOOD if fits else Outcome.BAD


def layers(asked: Iterable[JointLayer], parts: Mapping[str, BenchPart]) -> tuple[Layer, ...]:
    """Return the layers of a joint.

    Raises
    ------
    JobError
        When a part, its thickness or its hole is not there; the message names file and key.
    """
    own = own_of(parts)
    found = (_spacer(one) if one.part is None else _plate(one, parts) for one in asked)
    return tuple(replace(layer, own=own) for layer in found)


def own_of(parts: Mapping[str, BenchPart]) -> tuple[Path, ...]:
    """Return the folders of own profiles, which all parts of a job share."""
    return next((bench.own for bench in parts.values()), ())


def _spacer(one: JointLayer) -> Layer:
    if one.thickness_mm is None:
        raise JobError(f"{one.where}: thickness is missing", "a spacer needs its thickness")
    hole = None if one.hole_mm is None else (one.hole_mm, one.hole_mm)
    return Layer(one.spacer, one.thickness_mm, hole, threaded=one.threaded)


def _plate(one: JointLayer, parts: Mapping[str, BenchPart]) -> Layer:
    bench = parts.get(one.part or "")
    if bench is None:
        raise JobError(f'{one.where}: part = "{one.part}": its drawing gives no part', "mend the drawing first")
    thickness = one.thickness_mm or bench.thickness_mm
    if thickness is None:
        raise JobError(f'{one.where}: part = "{one.part}": its thickness is not known', "add thickness to the part")
    found = _holes(one, bench)
    if not found:
        return Layer(bench.name, thickness, threaded=one.threaded, bench=bench)
    return _with_work(one, bench, thickness, found)


def _holes(one: JointLayer, bench: BenchPart) -> list[Target]:
    if one.at is None and one.hole_mm is None:
        return []
    ask = Work("drill", "", hole_mm=one.hole_mm, at=(one.at,) if one.at else (), where=one.where)
    found = [target for target in targets(bench, ask) if target.hole is not None]
    if not found:
        what = f"at = {list(one.at)}" if one.at else f"hole = {one.hole_mm:g}"
        sizes = sorted({f"{h.width_mm:.4g}" for h in bench.holes if h.shape is HoleShape.CIRCLE})
        raise JobError(f"{one.where}: {what}: {bench.name} has no such hole", f"it has holes of {', '.join(sizes)} mm")
    return found


def _with_work(one: JointLayer, bench: BenchPart, thickness_mm: float, found: list[Target]) -> Layer:
    target, drawn = found[0], found[0].drawn_mm or 0.0
    hole, thread, sink, sunk = (drawn, drawn), "", "", 0.0
    for work in bench.work:
        if not any(t.at == target.at for t in targets_of(bench.holes, work)):
            continue
        for op in operations(Ask(bench, work, (target,), drawn)):
            if op.kind in (StepKind.COUNTERSINK, StepKind.COUNTERBORE):
                sink, sunk = op.size, (op.depth_mm or 0.0) if op.kind is StepKind.COUNTERBORE else 0.0
            elif op.kind is StepKind.TAP:
                thread = op.size
            elif op.kind in _HOLE_MAKERS and op.tool_dia_mm is not None:
                wider = max(op.tool_dia_mm, drawn)
                hole = op.limits_mm or (wider, wider)
    edge, neighbour = _around(bench, found)
    return Layer(bench.name, thickness_mm, hole, thread, sink, sunk, one.threaded, edge, neighbour, bench)


def _around(bench: BenchPart, found: list[Target]) -> tuple[float, float | None]:
    """Return the least distances to the outline and to another hole's rim, over all holes that the joint uses."""
    ring = bulge.points_along(bench.part.outer.xyb, closed=True, chord_mm=DEFAULT.chord_mm)[:, :2]
    outline = shapely.Polygon(ring).exterior
    edge = min(float(outline.distance(shapely.Point(target.at))) for target in found)
    rims = [_rim_mm(t.at, hole.at, hole.width_mm) for t in found for hole in bench.holes if hole is not t.hole]
    return edge, min(rims, default=None)


def _rim_mm(centre: Point, other: Point, width_mm: float) -> float:
    return max(apart_mm(centre, other) - width_mm / 2.0, 0.0)
