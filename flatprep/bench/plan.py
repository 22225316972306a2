"""What is done to one part: every piece of work turned into operations, in the order they need."""

from collections.abc import Callable, Mapping
from dataclasses import replace

from flatprep.base.errors import FlatprepError, JobError
from flatprep.bench import fits, screws, threads
from flatprep.bench.bends import BendLines, bend_ops, near_bend
from flatprep.bench.match import Found
from flatprep.bench.ops import WHY, Ask, Op, Rank, late
from flatprep.bench.part import BenchPart
from flatprep.bench.tabs import dressing
from flatprep.job.values import Point, Work
from flatprep.model.work import StepKind
from flatprep.practice.targets import SAME_DIA_MM, Target
from flatprep.practice.threads import THERMAL

OPS: Mapping[str, Callable[[Ask], list[Op]]] = {
    "tap": threads.tap_ops,
    "thread_insert": threads.insert_ops,
    "ream": fits.ream_ops,
    "bore": fits.bore_ops,
    "clearance": screws.clearance_ops,
    "drill": screws.drill_ops,
    "countersink": screws.sink_ops,
    "counterbore": screws.sink_ops,
    "nut_pocket": screws.nut_pocket_ops,
    "press": screws.press_ops,
}
"""By the kind of work; the keys are those of ``[[part.work]]``."""

_MAKES_HOLE = ("tap", "thread_insert", "ream", "bore", "clearance", "drill")
_SITS_IN_HOLE = ("countersink", "counterbore")
_WAITS = (StepKind.TAP, StepKind.REAM, StepKind.BORE, StepKind.THREAD_INSERT)
_RAISES_BURR = (
    StepKind.DRILL, StepKind.REAM, StepKind.BORE, StepKind.COUNTERSINK, StepKind.COUNTERBORE, StepKind.TAP,
    StepKind.THREAD_INSERT,
)  # fmt: skip


def plan(bench: BenchPart, found: Found, bends: tuple[BendLines, ...]) -> list[Op]:
    """Return the operations of a part in order.

    Parameters
    ----------
    found
        The places of each piece of work.

    Raises
    ------
    JobError
        When a size is not known; names file, key and value.
    """
    ops: list[Op] = []
    for work, targets in zip(bench.work, found, strict=True):
        for ask in by_drawn(bench, work, targets):
            ops += operations(ask, _made_by_others(ask, found))
    ops = [_about_bends(op, bench, bends) for op in ops]
    ops = _merged([*ops, *bend_ops(bench, bends)])
    return sorted([*ops, *_frame(bench, ops)], key=lambda op: op.rank)


def by_drawn(bench: BenchPart, work: Work, targets: tuple[Target, ...]) -> list[Ask]:
    """Split the places by drawn diameter, so that each operation has one."""
    groups: list[list[Target]] = []
    for target in targets:
        group = next((g for g in groups if _same(g[0].drawn_mm, target.drawn_mm)), None)
        if group is None:
            groups.append([target])
        else:
            group.append(target)
    return [Ask(bench, work, tuple(group), group[0].drawn_mm) for group in groups]


def _same(a: float | None, b: float | None) -> bool:
    return a is b if a is None or b is None else abs(a - b) <= SAME_DIA_MM


def operations(ask: Ask, made: Op | None = None) -> list[Op]:
    """Return the operations of one piece of work on holes of one drawn diameter; errors name file, key and value."""
    work = ask.work
    try:
        if made is not None:
            ops = [replace(op, cut_dia_mm=made.cut_dia_mm) for op in screws.sink_ops(ask, made.tool_dia_mm)]
        else:
            ops = OPS[work.kind](ask)
    except JobError:
        raise
    except FlatprepError as err:
        raise JobError(f'{work.where}: {work.kind} = "{work.size}": {err.message}', err.remedy) from None
    return [op.with_note(work.note) if work.note and op is ops[-1] and work.kind != "press" else op for op in ops]


def _made_by_others(ask: Ask, found: Found) -> Op | None:
    """Return the operation of another piece of work that finishes the holes, if there is one."""
    if ask.work.kind not in _SITS_IN_HOLE:
        return None
    places = set(ask.at)
    for other, targets in zip(ask.bench.work, found, strict=True):
        if other.kind in _MAKES_HOLE and places & {t.at for t in targets}:
            return operations(replace(ask, work=other))[-1]
    return None


def _about_bends(op: Op, bench: BenchPart, bends: tuple[BendLines, ...]) -> Op:
    """Return the operation moved behind the bends, or with a word, where a bend pulls its holes out of shape."""
    radius = (op.tool_dia_mm or 0.0) / 2.0
    if op.kind in _WAITS and any(near_bend(point, radius, bench, bends) for point in op.at):
        return late(op)
    sunk = op.kind in (StepKind.COUNTERSINK, StepKind.COUNTERBORE)
    if sunk and any(near_bend(point, radius, bench, bends, "countersink") for point in op.at):
        return op.with_note("near a bend: the seat may be pulled out of shape")
    return op


def _merged(ops: list[Op]) -> list[Op]:
    """Join operations that differ only in their places; a place is never done twice."""
    out: list[Op] = []
    for op in ops:
        twin = next((k for k, o in enumerate(out) if replace(o, at=op.at, count=op.count) == op), None)
        if twin is None:
            out.append(op)
        else:
            both: tuple[Point, ...] = tuple(dict.fromkeys((*out[twin].at, *op.at)))
            out[twin] = replace(out[twin], at=both, count=None)
    return out


def _frame(bench: BenchPart, ops: list[Op]) -> list[Op]:
    """Return what every part gets: edges first, flatness before work on it, burrs of holes, inspection last."""
    off = dressing(bench) or f"off with tabs and {_left_by_the_cut(bench)}"
    note = f"hold against the drawing: side, scale, holes; {off}; break edges 0.2 to 0.5 mm"
    out = [Op(StepKind.DEBURR, Rank.DEBURR, note=note, count=1)]
    if any(op.kind not in (StepKind.INSPECT, StepKind.PRESS) for op in ops):
        out.append(
            Op(StepKind.FLATNESS, Rank.FLATNESS, note="flatten before any work if it rocks on the plate", count=1)
        )
    drilled = tuple(dict.fromkeys(point for op in ops if op.kind in _RAISES_BURR for point in op.at))
    if drilled:
        last = max(op.rank for op in ops if op.kind in _RAISES_BURR)
        rank = Rank.HOLE_EDGES if last < Rank.BEND else Rank.BEND + Rank.HOLE_EDGES // 10
        out.append(Op(StepKind.DEBURR, rank, drilled, note="both rims of every hole that was worked on"))
    out.append(Op(StepKind.INSPECT, Rank.INSPECT, note=_inspection(bench, ops), count=1))
    return out


def _left_by_the_cut(bench: BenchPart) -> str:
    """Name what a cut leaves on its edges."""
    if bench.process.kind not in THERMAL:
        return "burrs"
    return "dross" if bench.is_metal else "soot"


def _inspection(bench: BenchPart, ops: list[Op]) -> str:
    width, height = bench.part.size_mm
    notes = [f"outside {width:.4g} x {height:.4g} mm" if not bench.bends else "flanges and angle after bending"]
    for op in ops:
        if op.limits_mm and op.kind in (StepKind.REAM, StepKind.BORE):
            notes.append(f"{op.size}: passes {op.limits_mm[0]:.3f}, stops at {op.limits_mm[1]:.3f}")
        if op.kind is StepKind.TAP:
            notes.append(f"{op.size}: go and no-go plug")
    return "; ".join(notes)


def reason(op: Op) -> str:
    """Return why an operation stands where it stands."""
    if op.why:
        return op.why
    return WHY.get(Rank(op.rank), "") if op.rank in set(Rank) else WHY[Rank.HOLE_EDGES]
