"""Fit holes by what goes into them: a size and class, a bearing, a bush, a dowel pin."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from flatprep.practice.fits import seat_class
from flatprep.profile.hardware.bearings import find_bearing, find_bush, is_bush
from flatprep.profile.hardware.fits import Limits, is_fit, limits, parse_fit
from flatprep.profile.hardware.names import UnknownHardwareError, tidy
from flatprep.profile.hardware.pins import find_pin
from flatprep.profile.hardware.rules import section
from flatprep.profile.material import Material

_ZONE = re.compile(r"\s([A-Z]{1,2}\d{1,2})$")
_DESIGNATION = re.compile(r"6\d{2,4}\b|16\d{3}\b")
"""Numbers beyond the fit tables' sizes that name a bearing: ``608 N7``."""
_TIGHT = ("K", "M", "N", "P", "R")
SOFT = ("aluminium", "magnesium", "plastic", "acrylic", "wood", "copper-brass")


@dataclass(frozen=True, slots=True)
class Seat:
    """A hole for a fit.

    Attributes
    ----------
    limits : Limits
    what : str
        What goes in, and what was taken for granted; empty for a bare size and class.
    pressed : bool
        Whether something is pressed in, so that the wall round it is strained.
    width_mm : float or None
        Width of the bearing that sits there.
    """

    limits: Limits
    what: str = ""
    pressed: bool = False
    width_mm: float | None = None


def find_seat(text: str, material: Material | None = None, own: Sequence[Path] = ()) -> Seat:
    """Return the fit hole of ``22 N7``, ``608 N7``, ``608``, ``10 bush``, ``6 dowel``, ``6 dowel slip``.

    Raises
    ------
    UnknownHardwareError
        For a text that is neither a fit nor a bearing, bush or pin.
    """
    flat = tidy(text)
    if is_fit(text) and not _DESIGNATION.match(flat):
        size = parse_fit(text, own).first
        return Seat(size, pressed=_tight(size))
    match = _ZONE.search(flat)
    zone, bare = (match[1], flat[: match.start()]) if match else (None, flat)
    if is_bush(bare):
        bush = find_bush(bare, own)
        return Seat(limits(bush.outside_mm, zone or "H7", own), f"housing of the {bush.name}", pressed=True)
    if re.search(r"dowel|pin|ISO\s*(?:2338|8734)", bare, re.IGNORECASE):
        return _pin(bare, zone, own)
    return _bearing(text, zone, material, own)


def _tight(size: Limits) -> bool:
    return size.zone.startswith(_TIGHT)


def _pin(text: str, zone: str | None, own: Sequence[Path]) -> Seat:
    slips = re.search(r"\bslip\b", text, re.IGNORECASE) is not None
    pin = find_pin(re.sub(r"\b(?:press|slip)\b", " ", text, flags=re.IGNORECASE), own)
    hole = limits(pin.diameter_mm, zone or (pin.slip if slips else pin.press), own)
    return Seat(hole, f"dowel {pin.diameter_mm:g} {pin.standard}; {pin.note}", pressed=not slips)


def _bearing(text: str, zone: str | None, material: Material | None, own: Sequence[Path]) -> Seat:
    bare = _ZONE.sub("", tidy(text))
    try:
        bearing, _ = find_bearing(bare, own)
    except UnknownHardwareError as err:
        hint = 'write size and class ("22 N7"), a bearing ("608 N7"), "10 bush" or "6 dowel"'
        raise UnknownHardwareError(f'fit "{text}" is not known', f"{hint}; {err.remedy}") from None
    usual, why = seat_class(material)
    size = limits(bearing.outside_mm, zone or usual, own)
    told = f"seat of bearing {bearing.name}" + ("" if zone else f", class not named: {why}")
    return Seat(size, told, pressed=_tight(size), width_mm=bearing.width_mm)


def seat_wall_mm(
    seat: Seat, material: Material | None, thickness_mm: float | None, own: Sequence[Path] = ()
) -> float | None:
    """Return the radial wall that a press fit needs, mm; None where nothing is pressed in."""
    if not seat.pressed:
        return None
    rules = section("edges", own)
    wall = rules["press_wall"] * seat.limits.nominal_mm
    soft = material is not None and material.family in SOFT
    return min(wall, rules["press_wall_soft"] * thickness_mm) if soft and thickness_mm is not None else wall
