"""What lint says: numbers with a place, not sentences."""

from dataclasses import dataclass
from enum import StrEnum


class Severity(StrEnum):
    """How loud a finding is."""

    ERROR = "error"
    WARNING = "warning"
    NOTE = "note"


@dataclass(frozen=True, slots=True)
class Finding:
    """One fault, reported once.

    Attributes
    ----------
    rule : str
    severity : Severity
    message : str
        One sentence without the numbers' repetition; no full stop.
    part : str or None
    at : tuple of float or None
        Middle of what was measured, in the drawing's own coordinates, mm.
    measured, limit : float or None
        In `unit`, unrounded.
    remedy : str
    handles : tuple of str
    """

    rule: str
    severity: Severity
    message: str
    part: str | None = None
    at: tuple[float, float] | None = None
    measured: float | None = None
    limit: float | None = None
    unit: str | None = None
    remedy: str = ""
    handles: tuple[str, ...] = ()
