"""What repair is asked, and what it answers."""

from collections.abc import Mapping
from dataclasses import dataclass, field

from flatprep.base.tolerances import DEFAULT, Tolerances
from flatprep.measure.relieved import ReliefAsk
from flatprep.measure.slots import SlotAsk
from flatprep.model.drawing import Part, Role
from flatprep.model.finding import Finding

Place = tuple[float, float]


@dataclass(frozen=True, slots=True)
class RoundLimits:
    """When chords are taken for an arc.

    Attributes
    ----------
    vertex_mm
        The vertices of a run lie this near to one circle.
    deviation_mm
        Largest distance between the chords and the arc that takes their place.
    polygon_mm
        The same for a whole regular polygon of `least_sides` sides or more, which is a coarse circle.
    least_chords
        A run has at least so many chords.
    least_sides
        A closed polygon with fewer sides is a polygon.
    area_share
        Share of a part's net area that arcs through the chords' vertices may change; past it, arcs of equal area.
    """

    vertex_mm: float = 0.005
    deviation_mm: float = 0.1
    polygon_mm: float = 0.5
    least_chords: int = 4
    least_sides: int = 12
    area_share: float = 9e-5


@dataclass(frozen=True, slots=True)
class RepairOptions:
    """What the user says.

    Attributes
    ----------
    gap_mm
        Outlines open by no more than this are closed by a straight line; wider gaps are left and told.
    units, roles
        As for reading (`flatprep.drawing.read.ReadOptions`).
    relief
        How inside corners are opened for square mates; None leaves them.
    slots
        How slots for the sheet are resized; None leaves them.
    """

    gap_mm: float = 0.1
    rounding: RoundLimits = RoundLimits()
    units: str | None = None
    roles: Mapping[str, Role] = field(default_factory=dict)
    tol: Tolerances = DEFAULT
    relief: ReliefAsk | None = None
    slots: SlotAsk | None = None


@dataclass(frozen=True, slots=True)
class Change:
    """One thing that is not as it was drawn.

    Attributes
    ----------
    kind : str
        ``joined``, ``double``, ``no-length``, ``rounded``, ``exploded``, ``curve``, ``flattened``, ``layer``,
        ``unit``, ``left-out``, ``relief``, ``slot``.
    message : str
        One sentence, no full stop.
    at : tuple of float or None
        mm.
    measured_mm : float or None
        Gap closed, or largest deviation of an arc from its chords.
    """

    kind: str
    message: str
    at: Place | None = None
    measured_mm: float | None = None
    handles: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Repaired:
    """A clean drawing, and everything that was done to it.

    Attributes
    ----------
    text : str
        The drawing as DXF.
    changes : tuple of Change
    left : tuple of Finding
        What needs a person.
    before, after : tuple of Part
        The parts as they were read, and as they come out.
    """

    file: str
    text: str
    units: str
    changes: tuple[Change, ...]
    left: tuple[Finding, ...]
    before: tuple[Part, ...] = ()
    after: tuple[Part, ...] = ()
