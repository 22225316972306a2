"""Mass, cut length and money."""

from dataclasses import dataclass
from decimal import Decimal


@dataclass(frozen=True, slots=True)
class PartEstimate:
    """Figures of one piece; `line_cost` is that of all its pieces. None: not known."""

    name: str
    quantity: int
    area_mm2: float
    mass_kg: float | None
    cut_length_mm: float
    pierces: int
    material_cost: float | None
    line_cost: Decimal | None
    cut_time_s: float | None


@dataclass(frozen=True, slots=True)
class StockUse:
    """Stock the job takes."""

    name: str
    count: int
    price: Decimal | None
    length_mm: float | None = None


@dataclass(frozen=True, slots=True)
class Estimate:
    """The whole job: masses for one set, cost for all sets."""

    currency: str | None
    parts: tuple[PartEstimate, ...]
    stock: tuple[StockUse, ...]
    mass_kg: float | None
    mass_limit_kg: float | None
    material_cost: Decimal | None
    utilisation: float | None
    notes: tuple[str, ...] = ()
