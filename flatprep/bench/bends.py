"""Bends of a part: the lines, the figures for the brake, and what lies near them."""

from dataclasses import dataclass
from math import hypot

import numpy as np

from flatprep.base.errors import FlatprepError, JobError
from flatprep.bench.ops import Op, Rank, spoilt
from flatprep.bench.part import BenchPart
from flatprep.job.values import BendAsk, Point
from flatprep.model.work import StepKind
from flatprep.practice.bends import FILE, Bend, bend, clear_of_bend_mm, measured_k_factor
from flatprep.profile.hardware.rules import section

Line = tuple[Point, Point]


@dataclass(frozen=True, slots=True)
class BendLines:
    """The lines that one bend of the job stands for; `figures` None where no radius or thickness is known."""

    ask: BendAsk
    lines: tuple[Line, ...]
    figures: Bend | None


def bend_lines(bench: BenchPart) -> tuple[BendLines, ...]:
    """Return the bends of a part.

    Raises
    ------
    JobError
        When a bend's figures cannot be worked out.
    """
    return tuple(BendLines(ask, _lines(bench, ask), _figures(bench, ask)) for ask in bench.bends)


def _lines(bench: BenchPart, ask: BendAsk) -> tuple[Line, ...]:
    if ask.line is not None:
        return (ask.line,)
    ends = [(c.xyb[0, :2], c.xyb[-1, :2]) for c in bench.part.bends if c.layer == ask.layer]
    return tuple(((float(a[0]), float(a[1])), (float(b[0]), float(b[1]))) for a, b in ends)


def _figures(bench: BenchPart, ask: BendAsk) -> Bend | None:
    if not ask.radius_mm or bench.thickness_mm is None:
        return None
    try:
        return bend(bench.thickness_mm, ask.radius_mm, ask.angle_deg, own=bench.own)
    except FlatprepError as err:
        raise JobError(f"{ask.where}: angle = {ask.angle_deg:g}: {err.message}", err.remedy) from None


def check_bends(group: list[tuple[BenchPart, tuple[BendLines, ...]]]) -> None:
    """Hold the bends of all parts of a drawing against the drawing.

    Raises
    ------
    JobError
        When a layer holds no line that lies on a part, or a line lies off the material.
    """
    for index, ask in enumerate(group[0][0].bends):
        if ask.layer is not None and not any(bends[index].lines for _, bends in group):
            layers = sorted({c.layer for bench, _ in group for c in bench.part.bends})
            hint = "bend lines are drawn on " + ", ".join(layers) if layers else "the drawing has no bend line"
            raise JobError(f'{ask.where}: layer = "{ask.layer}": holds no bend line on the part', hint)
        if ask.line is not None and not any(_on_part(bench, ask.line) for bench, _ in group):
            (x0, y0), (x1, y1) = ask.line
            raise JobError(
                f"{ask.where}: line = [[{x0:g}, {y0:g}], [{x1:g}, {y1:g}]]: does not lie on the part",
                "give two points of the drawing, mm",
            )


def _on_part(bench: BenchPart, line: Line) -> bool:
    """Tell whether the middle of a line lies in the part's box: a bend runs across the part, often over its edges."""
    x0, y0, x1, y1 = bench.part.outer.bounds
    x, y = _middle(line)
    return x0 <= x <= x1 and y0 <= y <= y1


def _middle(line: Line) -> Point:
    return (line[0][0] + line[1][0]) / 2.0, (line[0][1] + line[1][1]) / 2.0


def bend_ops(bench: BenchPart, bends: tuple[BendLines, ...]) -> list[Op]:
    """Return one bending operation for each bend of the job."""
    return [_in_alloy(bench, found.ask, _bend_op(bench, found)) for found in bends if found.lines]


def _bend_op(bench: BenchPart, found: BendLines) -> Op:
    places = tuple(_middle(line) for line in found.lines)
    return Op(StepKind.BEND, Rank.BEND, places, _size(found.ask), note=_note(bench, found), count=len(places))


def _in_alloy(bench: BenchPart, ask: BendAsk, op: Op) -> Op:
    """Return the bend, marked as not possible where the alloy cracks at that radius or does not bend cold at all."""
    material = bench.material
    rule = material.bend if material else None
    if material is None or rule is None:
        return op
    if not rule.bendable:
        return spoilt(op, f"{material.name} does not bend cold")
    limit = rule.limit(bench.thickness_mm) if bench.thickness_mm else None
    if limit is None or ask.radius_mm is None:
        return op
    if ask.radius_mm < limit.error - 1e-3:
        return spoilt(
            op, f"an inside radius of {ask.radius_mm:g} mm is under the least of {limit.error:.4g} mm: it cracks"
        )
    tight = limit.warn is not None and ask.radius_mm < limit.warn - 1e-3
    return op.with_note(f"tight: {limit.warn:.4g} mm is safer in this alloy") if tight else op


def _size(ask: BendAsk) -> str:
    radius = f" r {ask.radius_mm:g}" if ask.radius_mm is not None else ""
    return f"{ask.angle_deg:g}°{radius}" + (f" {ask.direction}" if ask.direction else "")


def _note(bench: BenchPart, found: BendLines) -> str:
    notes = []
    if found.figures is None:
        missing = "inside radius" if not found.ask.radius_mm else "thickness"
        notes.append(f"{missing} not named: ask, or bend a coupon")
    else:
        f = found.figures
        notes.append(
            f"allowance {f.allowance_mm:.2f} mm, deduction {f.deduction_mm:.2f} mm by DIN 6935, "
            f"k {f.k:.3g} (K {f.k_factor:.3g})"
        )
        measured = measured_k_factor(bench.family or "", bench.own)
        if measured:
            notes.append(f"handbooks measured K {measured[0]:g} to {measured[1]:g}: bend a coupon first")
    spring = section("springback", bench.own, FILE).numbers(bench.family or "")
    if spring:
        notes.append(f"springs back {spring[0]:g} to {spring[1]:g}° of 90")
    notes.append("burr side inside the bend")
    if len(found.lines) > 1:
        notes.append("outer and return flanges first, then inward")
    return "; ".join(notes)


def near_bend(
    point: Point, radius_mm: float, bench: BenchPart, bends: tuple[BendLines, ...], what: str = "tap_after"
) -> bool:
    """Tell whether a rim is so near to a bend that bending pulls it out of shape; `what`: a key of ``[near_bend]``."""
    if bench.thickness_mm is None:
        return False
    for found in bends:
        inside = found.ask.radius_mm or bench.thickness_mm
        half = found.figures.allowance_mm / 2.0 if found.figures else inside
        reach = half + clear_of_bend_mm(what, bench.thickness_mm, inside, bench.own) + radius_mm
        if any(distance_mm(point, line) < reach for line in found.lines):
            return True
    return False


def distance_mm(point: Point, line: Line) -> float:
    """Return the distance of a point from a line between two points."""
    a, b, p = np.array(line[0]), np.array(line[1]), np.array(point)
    run = b - a
    span = float(run @ run)
    share = 0.0 if span == 0.0 else min(1.0, max(0.0, float((p - a) @ run) / span))
    nearest = a + share * run
    return hypot(*(p - nearest))
