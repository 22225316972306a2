"""Operations for fit holes: ream, bore, and seats for bearings, bushes and pins."""

import re

from flatprep.bench.ops import Ask, Op, Rank, open_up, spoilt
from flatprep.model.work import StepKind
from flatprep.practice.fits import FinishPlan, finish_plan, seat_class
from flatprep.profile.hardware.bearings import find_bearing, find_bush, is_bush
from flatprep.profile.hardware.fits import Limits, is_fit, limits, parse_fit
from flatprep.profile.hardware.names import UnknownHardwareError, tidy
from flatprep.profile.hardware.pins import find_pin

_ZONE = re.compile(r"\s([A-Z]{1,2}\d{1,2})$")


def seat(text: str, ask: Ask) -> tuple[Limits, str]:
    """Return the limits of a fit hole and what it is: ``22 N7``, ``608 N7``, ``608``, ``10 bush``, ``6 dowel``.

    Raises
    ------
    UnknownHardwareError
        For a text that is neither a fit nor a bearing, bush or pin.
    """
    if is_fit(text):
        return parse_fit(text).first, ""
    flat = tidy(text)
    match = _ZONE.search(flat)
    zone, bare = (match[1], flat[: match.start()]) if match else (None, flat)
    if is_bush(bare):
        bush = find_bush(bare)
        return limits(bush.outside_mm, zone or "H7"), f"housing of the {bush.name}"
    if re.search(r"dowel|pin|ISO\s*(?:2338|8734)", bare, re.IGNORECASE):
        pin = find_pin(re.sub(r"\b(?:press|slip)\b", " ", bare, flags=re.IGNORECASE))
        slips = re.search(r"\bslip\b", bare, re.IGNORECASE) is not None
        return limits(
            pin.diameter_mm, zone or (pin.slip if slips else pin.press)
        ), f"dowel {pin.diameter_mm:g}, {pin.note}"
    try:
        bearing, _ = find_bearing(bare)
    except UnknownHardwareError:
        raise UnknownHardwareError(
            f'fit "{text}" is not known', 'write size and class ("22 N7"), a bearing ("608 N7"), "10 bush" or "6 dowel"'
        ) from None
    usual, why = seat_class(ask.bench.material)
    told = f"seat of bearing {bearing.name}" + ("" if zone else f", class not named: {why}")
    return limits(bearing.outside_mm, zone or usual), told


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


def _finish(ask: Ask, kind: StepKind, rank: Rank, tool: str) -> list[Op]:
    size, told = seat(ask.work.size, ask)
    plan = finish_plan(size, ask.bench.process, ask.bench.material, ask.bench.thickness_mm)
    cut = fit_cut_mm(ask, plan)
    as_cut = ask.as_cut_mm(cut)
    note = f"{size.least_mm:.3f} to {size.most_mm:.3f} mm" + (f"; {told}" if told else "")
    finish = Op(
        kind, rank, ask.at, size.name, size.nominal_mm, f"{tool} {size.name}", ask.work.depth_mm, cut, ask.work.side,
        note, limits_mm=(size.least_mm, size.most_mm),
    )  # fmt: skip
    if as_cut is not None and as_cut > size.least_mm + 1e-3:
        why = f"the hole of {as_cut:.4g} mm is wider than the least finished size {size.least_mm:.3f}"
        return [spoilt(finish, why)]
    if as_cut is not None and as_cut > plan.cut_range_mm[1] + 1e-3:
        finish = finish.with_note(f"only {size.least_mm - as_cut:.2f} mm left: the cut skin may stay in the wall")
    if kind is StepKind.BORE and as_cut is not None:
        return [finish.with_note(f"from the cut hole of {as_cut:.4g} mm")]
    drill = plan.drill_from(as_cut)
    return [*([] if drill is None else open_up(ask, as_cut, drill, cut)), finish]
