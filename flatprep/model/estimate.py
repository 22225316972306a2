"""Mass, cut length and money."""

from dataclasses import dataclass
from decimal import Decimal


@dataclass(frozen=True, slots=True)
class MassProperties:
    """How a part's area and mass lie about its centroid; axes are the drawing's.

    Attributes
    ----------
    centroid_mm : (float, float)
        Drawing coordinates.
    ixx_mm4, iyy_mm4, ixy_mm4 : float
        Second moments of area ∫y² dA, ∫x² dA and ∫xy dA.
    polar_mm4 : float
        ∫r² dA = ixx + iyy.
    principal_mm4 : (float, float)
        Largest and least second moment.
    principal_deg : float
        Angle from the x axis to the axis of the largest one, -90 < angle <= 90.
    gyration_mm : float
        Radius of gyration about the axis through the centroid across the sheet.
    spin_kg_mm2 : float or None
        Moment of inertia about that axis; None without a mass.
    """

    centroid_mm: tuple[float, float]
    ixx_mm4: float
    iyy_mm4: float
    ixy_mm4: float
    polar_mm4: float
    principal_mm4: tuple[float, float]
    principal_deg: float
    gyration_mm: float
    spin_kg_mm2: float | None


@dataclass(frozen=True, slots=True)
class PartEstimate:
    """Figures of one piece; `line_cost` is that of all its pieces. None: not known.

    `mass_kg` is that of the part as cut, `finished_mass_kg` without what bench work takes off, as far as that is
    known; `mass_share` is the share of all its pieces in the mass of the job.
    """

    name: str
    quantity: int
    area_mm2: float
    mass_kg: float | None
    cut_length_mm: float
    pierces: int
    material_cost: float | None
    line_cost: Decimal | None
    cut_time_s: float | None
    material: str | None = None
    thickness_mm: float | None = None
    mass_share: float | None = None
    placed: int | None = None
    properties: MassProperties | None = None
    finished_mass_kg: float | None = None


@dataclass(frozen=True, slots=True)
class StockUse:
    """Stock the job takes: `price` is that of one sheet, or of one metre where `length_mm` is given.

    `length_mm` is the length taken from open stock, all its sheets together; `cost` what all of it is charged with,
    after discount and credits; `utilisation` is the net area of the parts over that of its sheets.
    """

    name: str
    count: int
    price: Decimal | None
    length_mm: float | None = None
    cost: Decimal | None = None
    credit: Decimal = Decimal(0)
    utilisation: float | None = None


@dataclass(frozen=True, slots=True)
class Estimate:
    """The whole job: masses for one set (as cut, and finished at the bench), cost for all sets."""

    currency: str | None
    parts: tuple[PartEstimate, ...]
    stock: tuple[StockUse, ...]
    mass_kg: float | None
    mass_limit_kg: float | None
    material_cost: Decimal | None
    utilisation: float | None
    notes: tuple[str, ...] = ()
    sets: int = 1
    share: str = "net-area"
    cut_time_s: float | None = None
    machine_cost: Decimal | None = None
    discount_percent: Decimal = Decimal(0)
    credits: Decimal = Decimal(0)
    finished_mass_kg: float | None = None

    @property
    def mass_left_kg(self) -> float | None:
        """What the mass limit leaves, negative where it is broken; None where either is not known."""
        if self.mass_kg is None or self.mass_limit_kg is None:
            return None
        return self.mass_limit_kg - self.mass_kg


@dataclass(frozen=True, slots=True)
class QuantityBreak:
    """What a number of sets costs, from a nest of its own; no cost where `unplaced` pieces found no room."""

    sets: int
    sheets: int
    material_cost: Decimal | None
    cost_per_set: float | None
    utilisation: float | None
    unplaced: int = 0
