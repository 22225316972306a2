"""What else a part could be made of."""

from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum


class Basis(StrEnum):
    """What stays the same when the material changes."""

    SAME_MATERIAL = "same-material"
    SAME_THICKNESS = "same-thickness"
    STIFFNESS = "stiffness"
    STRENGTH = "strength"


@dataclass(frozen=True, slots=True)
class Alternative:
    """One line of the what-if table; figures are those of one piece, None: not known.

    Attributes
    ----------
    basis : Basis
    material, material_name : str
    needed_mm : float
        Thickness that keeps what `basis` says.
    thickness_mm : float or None
        The next thickness that is sold; None where nothing so thick is.
    mass_kg, mass_ratio : float or None
        At that thickness, and over the present mass.
    cost : Decimal or None
        From the user's price per kg.
    deflection_ratio, strength_ratio : float or None
        Deflection under the same load, and load at the same share of the strength, over the present ones.
    process : str or None
        A process that can cut it; None where none of those asked can.
    caution : str
    findings : tuple of str or None
        What lint says of the part in that material, thickness and process; None: not checked.
    note : str
    """

    basis: Basis
    material: str
    material_name: str
    needed_mm: float
    thickness_mm: float | None
    mass_kg: float | None = None
    mass_ratio: float | None = None
    cost: Decimal | None = None
    deflection_ratio: float | None = None
    strength_ratio: float | None = None
    process: str | None = None
    caution: str = ""
    findings: tuple[str, ...] | None = None
    note: str = ""


@dataclass(frozen=True, slots=True)
class PartAlternatives:
    """The table of one part: what it is now, and what else it could be."""

    part: str
    material: str
    thickness_mm: float
    mass_kg: float | None
    cost: Decimal | None
    options: tuple[Alternative, ...]
    notes: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class JobAlternative:
    """The whole set with all parts of one material made of another; figures are those of one set.

    Attributes
    ----------
    present, material : str
        Material now, and instead.
    parts : int
        Kinds of part that change.
    mass_kg, change_kg : float
        Of the set then, and the difference to now.
    limit_left_kg : float or None
        What the mass limit then leaves.
    deflection_ratio : float or None
        Of the part that becomes the least stiff, under the same load; None where it is not known of one.
    blocked : tuple of str
        Parts that no process at hand can cut then, or that lint would not pass.
    """

    basis: Basis
    present: str
    material: str
    parts: int
    mass_kg: float
    change_kg: float
    limit_left_kg: float | None
    deflection_ratio: float | None
    blocked: tuple[str, ...]
