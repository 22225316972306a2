"""Bends: allowance, deduction and flat length by DIN 6935, and what must stay clear of a bend."""

from collections.abc import Sequence
from dataclasses import dataclass
from math import log10, radians, tan
from pathlib import Path

from flatprep.base.errors import UsageError
from flatprep.profile.hardware.rules import section
from flatprep.profile.hardware.table import table

FILE = "bending"
MOST_DEG = 165.0
ALONG_DEG = 30.0
"""A bend line nearer to the rolling direction than this runs along it (common practice)."""
_METALS = {"aluminium": "aluminium", "low-carbon-steel": "steel", "stainless": "stainless"}


@dataclass(frozen=True, slots=True)
class Bend:
    """A bend worked out.

    Attributes
    ----------
    k : float
        DIN 6935 factor; the K factor (neutral fibre over thickness) is half of it.
    allowance_mm : float
        Length of the neutral fibre in the bend.
    setback_mm : float
        Outside leg to the tangent line.
    """

    thickness_mm: float
    radius_mm: float
    angle_deg: float
    k: float
    allowance_mm: float
    setback_mm: float

    @property
    def k_factor(self) -> float:
        """Neutral fibre over thickness."""
        return self.k / 2.0

    @property
    def deduction_mm(self) -> float:
        """What the flat length is shorter than both outside legs together."""
        return 2.0 * self.setback_mm - self.allowance_mm

    def flat_mm(self, leg_a_mm: float, leg_b_mm: float) -> float:
        """Return the flat length for two outside legs."""
        return leg_a_mm + leg_b_mm - self.deduction_mm


def bend(
    thickness_mm: float, radius_mm: float, angle_deg: float, *, k: float | None = None, own: Sequence[Path] = ()
) -> Bend:
    """Work a bend out by DIN 6935.

    Parameters
    ----------
    thickness_mm, radius_mm
        Sheet and inside radius.
    angle_deg
        Angle that the leg is turned by: 90 for an L.
    k
        A factor measured on a coupon, instead of the standard's.

    Raises
    ------
    UsageError
        For a thickness, radius or angle out of range.

    Notes
    -----
    k = 0.65 + 0.5 log10(r / t) up to r / t = 5, else 1, never below 0; allowance = angle (r + k t / 2). Up to 90
    degrees the outside legs meet in the sharp corner: setback (r + t) tan(angle / 2); above, they run to the tangent
    line: r + t.
    """
    if thickness_mm <= 0.0 or radius_mm <= 0.0:
        raise UsageError("thickness and inside radius of a bend must be above 0", "name both, such as 2 and 2 mm")
    if not 0.0 < angle_deg <= MOST_DEG:
        raise UsageError(f"angle {angle_deg:g} is not above 0 and at most {MOST_DEG:g} degrees", "90 makes an L")
    factor = din_k(radius_mm / thickness_mm, own) if k is None else k
    allowance = radians(angle_deg) * (radius_mm + factor * thickness_mm / 2.0)
    reach = tan(radians(angle_deg) / 2.0) if angle_deg <= 90.0 else 1.0
    return Bend(thickness_mm, radius_mm, angle_deg, factor, allowance, (radius_mm + thickness_mm) * reach)


def din_k(ratio: float, own: Sequence[Path] = ()) -> float:
    """Return DIN 6935's k for a radius over thickness."""
    rules = section("din6935", own, FILE)
    if ratio > rules["up_to"]:
        return 1.0
    return max(0.0, rules["constant"] + rules["slope"] * log10(ratio))


def measured_k_factor(family: str, own: Sequence[Path] = ()) -> tuple[float, float] | None:
    """Return the least and the greatest K factor that handbooks measured in a material family, or None."""
    metal = _METALS.get(family)
    rows = {row.text("metal"): row for row in table(FILE, own, ("din6935", "near_bend", "springback")).rows}
    if metal not in rows:
        return None
    row = rows[metal].only(("metal", "least", "most", "from"))
    return row.number("least"), row.number("most")


def clear_of_bend_mm(what: str, thickness_mm: float, radius_mm: float, own: Sequence[Path] = ()) -> float:
    """Return how far a rim stays from the tangent line: factor x t + r; `what` is a key of ``[near_bend]``."""
    return section("near_bend", own, FILE)[what] * thickness_mm + radius_mm


def tangent_mm(radius_mm: float, thickness_mm: float, angle_deg: float, own: Sequence[Path] = ()) -> float:
    """Return half the bend allowance: how far the tangent line lies from the bend line in the flat."""
    return bend(thickness_mm, radius_mm, angle_deg, own=own).allowance_mm / 2.0
