"""The lines that say what an estimate does not know, and where its mass stands against the limit."""

from collections.abc import Sequence
from dataclasses import replace

from flatprep.model.estimate import Estimate, PartEstimate

NEAR = 0.9
"""Share of the mass limit from which on it is mentioned."""

_SHARES = {
    "net-area": "net area of the parts",
    "box-area": "area of the parts' boxes as drawn",
    "used-length": "length that the parts take along the sheet",
}


def notes_of(result: Estimate, *, nested: bool) -> Estimate:
    """Return the estimate with its notes; `nested` tells whether there was a layout."""
    notes = [*_mass(result), *_cost(result, nested=nested), *_time(result)]
    return replace(result, notes=tuple(notes))


def _mass(result: Estimate) -> list[str]:
    unknown = [p.name for p in result.parts if p.mass_kg is None]
    notes = [f"mass not known, for want of thickness or density: {_few(unknown)}"] if unknown else []
    left, limit = result.mass_left_kg, result.mass_limit_kg
    if left is None or limit is None:
        return notes
    if left < 0.0:
        notes.append(f"mass limit of {limit:g} kg per set broken by {-left:.3g} kg")
    elif left <= (1.0 - NEAR) * limit:
        notes.append(f"mass limit of {limit:g} kg per set nearly reached: {left:.3g} kg left")
    return notes


def _cost(result: Estimate, *, nested: bool) -> list[str]:
    if not nested:
        return ["material cost not known: no layout"]
    notes = []
    unpriced = [s.name for s in result.stock if s.price is None]
    if unpriced:
        notes.append(f"material cost not known: no price given for stock {_few(unpriced)} (0 is a price, too)")
    elif result.stock:
        notes.append(f"the cost of each kind of sheet is shared out by the {_SHARES[result.share]}")
    short = [f"{p.name} ({p.quantity - (p.placed or 0)} of {p.quantity})" for p in result.parts if _short(p)]
    if short:
        notes.append(f"not placed, so not in the cost: {_few(short)}")
    if result.material_cost is not None and result.currency is None:
        notes.append("no currency given: amounts are in the prices' own")
    return notes


def _short(part: PartEstimate) -> bool:
    return part.placed is not None and part.placed < part.quantity


def _time(result: Estimate) -> list[str]:
    unknown = [p.name for p in result.parts if p.cut_time_s is None]
    if len(unknown) == len(result.parts):
        return ["cut time not known: the process profile gives no feeds"] if unknown else []
    notes = ["cut time is cutting and piercing, without the moves between"]
    return [*notes, f"cut time not known for {_few(unknown)}"] if unknown else notes


def _few(names: Sequence[str]) -> str:
    shown = ", ".join(names[:6])
    return shown if len(names) <= 6 else f"{shown} and {len(names) - 6} more"
