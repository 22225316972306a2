"""A drawing that was checked, and one that could not be."""

from dataclasses import dataclass

from flatprep.model.drawing import Drawing, Part
from flatprep.model.finding import Finding, Severity


@dataclass(frozen=True, slots=True)
class Linted:
    """A drawing with its findings, and what it was held against.

    Attributes
    ----------
    file : str
        As it was given.
    findings : tuple of Finding
        Worst first.
    material, process : str or None
        Ids; None where nothing was said.
    thickness_mm, density_kg_m3 : float or None
    tool_radius_mm : float
        Of the process's tool; 0 for a beam.
    """

    file: str
    drawing: Drawing
    findings: tuple[Finding, ...]
    process: str | None = None
    material: str | None = None
    thickness_mm: float | None = None
    density_kg_m3: float | None = None
    tool_radius_mm: float = 0.0

    @property
    def loud(self) -> bool:
        """Whether there is an error or a warning."""
        return any(f.severity is not Severity.NOTE for f in self.findings)

    def mass_kg(self, part: Part) -> float | None:
        """Mass of one piece, None where density or thickness is not known."""
        if self.thickness_mm is None or self.density_kg_m3 is None:
            return None
        return part.area_mm2 * self.thickness_mm * self.density_kg_m3 * 1e-9


@dataclass(frozen=True, slots=True)
class Unreadable:
    """A drawing that could not be read, and why."""

    file: str
    message: str
    remedy: str = ""


@dataclass(frozen=True, slots=True)
class LintReport:
    """Everything that was given, answered."""

    linted: tuple[Linted, ...]
    unreadable: tuple[Unreadable, ...] = ()
    notes: tuple[str, ...] = ()
    """Said once for the run: what was not known, and which rules did not run for it."""
