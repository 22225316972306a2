"""Operations for fit holes: ream, bore, and seats for bearings, bushes and pins."""

from dataclasses import replace

from flatprep.bench.ops import Ask, Op, Rank, open_up, spoilt
from flatprep.model.work import StepKind
from flatprep.practice.bits import bit_below
from flatprep.practice.fits import FinishPlan, finish_plan, holds
from flatprep.practice.seats import Seat, find_seat
from flatprep.profile.hardware.fits import Limits
from flatprep.profile.hardware.rules import section


def fit_cut_mm(ask: Ask, plan: FinishPlan) -> float | None:
    """Return the diameter to cut before finishing: the drawn one where it will do."""
    low, high = plan.cut_range_mm
    if ask.drawn_mm is not None and plan.cut_mm is not None and low - 1e-3 <= ask.drawn_mm <= high + 1e-3:
        return ask.drawn_mm
    return plan.cut_mm


def ream_ops(ask: Ask) -> list[Op]:
    """Return drill (where needed) and ream."""
    return _finish(ask, StepKind.REAM, Rank.REAM, "reamer")


def bore_ops(ask: Ask) -> list[Op]:
    """Return drill (where nothing is cut) and bore."""
    return _finish(ask, StepKind.BORE, Rank.BORE, "boring head, set to")


def _as_cut_will_do(size: Limits, as_cut_mm: float, ask: Ask) -> bool:
    """Tell whether the hole is drawn inside wide limits that the process alone holds."""
    inside = size.least_mm - 1e-3 <= as_cut_mm <= size.most_mm + 1e-3
    return inside and holds(ask.bench.process, size, ask.bench.thickness_mm, ask.own)


def _measure(finish: Op, ask: Ask) -> Op:
    note = f"the cut alone may hold it: measure; {finish.note}"
    return replace(finish, kind=StepKind.INSPECT, rank=Rank.CHECK_CUT, tool="", cut_dia_mm=ask.drawn_mm, note=note)


def _held(seat: Seat, ask: Ask) -> str:
    """Return a word where the plate is too thin to hold a bearing alone."""
    thickness = ask.bench.thickness_mm
    if (
        seat.width_mm is None
        or thickness is None
        or thickness >= section("finishing", ask.own)["seat_thickness"] * seat.width_mm
    ):
        return ""
    return f"the plate is thin for a bearing {seat.width_mm:g} mm wide: add a retaining plate"


def _finish(ask: Ask, kind: StepKind, rank: Rank, tool: str) -> list[Op]:
    seat = find_seat(ask.work.size, ask.bench.material, ask.own)
    size, told = seat.limits, seat.what
    plan = finish_plan(size, ask.bench.process, ask.bench.material, ask.bench.thickness_mm, ask.own)
    cut = fit_cut_mm(ask, plan)
    as_cut = ask.as_cut_mm(cut)
    note = "; ".join(t for t in (f"{size.least_mm:.3f} to {size.most_mm:.3f} mm", told, _held(seat, ask)) if t)
    finish = Op(
        kind, rank, ask.at, size.name, size.nominal_mm, f"{tool} {size.name}", ask.work.depth_mm, ask.told_mm(cut),
        ask.work.side, note, limits_mm=(size.least_mm, size.most_mm),
    )  # fmt: skip
    if as_cut is not None and _as_cut_will_do(size, as_cut, ask):
        return [_measure(finish, ask)]
    if as_cut is not None and as_cut > size.least_mm + 1e-3:
        why = f"the hole of {as_cut:.4g} mm is wider than the least finished size {size.least_mm:.3f}"
        return [spoilt(finish, why)]
    if as_cut is not None and as_cut > plan.cut_range_mm[1] + 1e-3:
        finish = finish.with_note(f"only {size.least_mm - as_cut:.2f} mm left: the cut skin may stay in the wall")
    if kind is StepKind.BORE and as_cut is not None:
        return [finish.with_note(f"from the cut hole of {as_cut:.4g} mm")]
    drill = plan.drill_from(as_cut)
    return [*([] if drill is None else open_up(ask, as_cut, bit_below(drill, inch=ask.bench.inch), cut)), finish]
