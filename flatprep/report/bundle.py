"""What the report is made of: values of the other packages joined under the names of the job."""

from dataclasses import dataclass

from flatprep.model.drawing import Part
from flatprep.model.estimate import Estimate, PartEstimate
from flatprep.model.finding import Finding, Severity
from flatprep.model.layout import Layout
from flatprep.model.work import Checklist, Step


@dataclass(frozen=True, slots=True)
class PartCard:
    """All that is known of one part.

    Attributes
    ----------
    name : str
        As in layout, checklist and estimate.
    part : Part or None
        Its shape; None where the drawing holds none.
    drawing, digest : str
        The drawing as it was given, and the first digits of the SHA-256 of its bytes.
    quantity, quantity_opposite : int
        Pieces as drawn and pieces turned over, all sets together.
    findings : tuple of Finding
        This part's, and those of its drawing that name no part.
    assumed : tuple of str
        What was taken for granted while reading, in sentences.
    """

    name: str
    part: Part | None
    drawing: str = ""
    digest: str = ""
    material: str = ""
    material_name: str = ""
    thickness_mm: float | None = None
    process: str = ""
    quantity: int = 1
    quantity_opposite: int = 0
    revision: str = ""
    note: str = ""
    findings: tuple[Finding, ...] = ()
    steps: tuple[Step, ...] = ()
    estimate: PartEstimate | None = None
    assumed: tuple[str, ...] = ()

    def count(self, severity: Severity) -> int:
        """How many findings are this loud."""
        return sum(f.severity is severity for f in self.findings)


@dataclass(frozen=True, slots=True)
class SearchPoint:
    """A state of the nest while it was searched: `length_mm` is the used length of all sheets together."""

    seconds: float
    sheets: int
    length_mm: float


@dataclass(frozen=True, slots=True)
class Offcut:
    """Largest usable rectangle left of a sheet (numbered from 1), sheet coordinates, mm."""

    sheet: int
    x0: float
    y0: float
    x1: float
    y1: float


@dataclass(frozen=True, slots=True)
class Bundle:
    """A whole job for one page.

    Attributes
    ----------
    units : str
        The unit that lengths are shown in.
    unreadable : tuple of (str, str)
        File and message of each drawing that could not be read.
    files : tuple of (str, str)
        Files beside the report, relative to it, and what they are.
    search : tuple of SearchPoint
        The search's progress, oldest first.
    """

    name: str
    revision: str = ""
    units: str = "mm"
    sets: int = 1
    cards: tuple[PartCard, ...] = ()
    layout: Layout | None = None
    estimate: Estimate | None = None
    checklist: Checklist | None = None
    unreadable: tuple[tuple[str, str], ...] = ()
    files: tuple[tuple[str, str], ...] = ()
    assumed: tuple[str, ...] = ()
    cautions: tuple[str, ...] = ()
    search: tuple[SearchPoint, ...] = ()
    offcuts: tuple[Offcut, ...] = ()
    version: str = ""

    def count(self, severity: Severity) -> int:
        """How many findings of all parts are this loud."""
        return sum(card.count(severity) for card in self.cards)

    def card(self, name: str) -> PartCard | None:
        """Return the card of that name."""
        return next((card for card in self.cards if card.name == name), None)
