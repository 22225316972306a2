"""Coupons: sample cuts of a job's own slots and bores, to be tried before the job is cut."""

from dataclasses import dataclass
from enum import StrEnum

from flatprep.model.drawing import Part, Text


class TrialKind(StrEnum):
    """What is tried."""

    SLOT = "slot"
    BORE = "bore"


@dataclass(frozen=True, slots=True)
class Trial:
    """A row of sizes around the one that is wanted.

    Attributes
    ----------
    kind : TrialKind
    mate : str
        What goes in, in words: ``a sheet of 3 mm``, ``22 N7``.
    wanted_mm : float
        Width of the slot or diameter of the bore, as the job has it.
    sizes_mm : tuple of float
        Those on the coupon, rising; sizes that cannot be cut are left out.
    parts : tuple of str
        Where the job has it.
    """

    kind: TrialKind
    mate: str
    wanted_mm: float
    sizes_mm: tuple[float, ...]
    parts: tuple[str, ...]


@dataclass(frozen=True, eq=False)
class Coupon:
    """The sample cuts for one material, thickness and process.

    Attributes
    ----------
    stem : str
        Of its file.
    material, process : str
        Ids.
    thickness_mm : float
    trials : tuple of Trial
    plates : tuple of Part
        What is cut.
    labels : tuple of Text
        What stands beside it, not cut.
    left_out : tuple of str
        What the process does not cut, in words.
    """

    stem: str
    material: str
    thickness_mm: float
    process: str
    trials: tuple[Trial, ...]
    plates: tuple[Part, ...]
    labels: tuple[Text, ...]
    left_out: tuple[str, ...] = ()
