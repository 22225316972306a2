"""Mass, cut length and material cost of a job: values in, an Estimate out; layouts are given, never made here."""

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass, field
from decimal import Decimal

from flatprep.cost.lines import Lines, share_out
from flatprep.cost.mass import mass_kg, mass_properties
from flatprep.cost.notes import notes_of
from flatprep.cost.share import decimal, to_cents
from flatprep.cost.sheets import sheet_area_mm2
from flatprep.job.terms import CostTerms
from flatprep.job.values import Stock
from flatprep.model.drawing import Part
from flatprep.model.estimate import Estimate, PartEstimate, StockUse
from flatprep.model.layout import Layout, SheetLayout
from flatprep.profile.material import Material
from flatprep.profile.process import Process


@dataclass(frozen=True, slots=True)
class Costed:
    """A part to be estimated.

    `part` is the shape that is cut, `quantity` counts all sets and both hands, `removed_mm3` is what bench work
    takes off afterwards.
    """

    part: Part
    quantity: int
    material: Material | None
    thickness_mm: float | None
    process: Process
    removed_mm3: float = 0.0

    @property
    def mass_kg(self) -> float | None:
        """Mass of one piece as cut; None without thickness or density."""
        return self._mass_kg(0.0)

    @property
    def finished_mass_kg(self) -> float | None:
        """Mass of one piece after bench work; None without thickness or density."""
        return self._mass_kg(self.removed_mm3)

    def _mass_kg(self, removed_mm3: float) -> float | None:
        density = self.material.density_kg_m3 if self.material else None
        if density is None or self.thickness_mm is None:
            return None
        return mass_kg(self.part.area_mm2, self.thickness_mm, density, removed_mm3)

    @property
    def cut_time_s(self) -> float | None:
        """Time of cutting one piece; None where the process knows no feeds."""
        family = self.material.family if self.material else None
        return self.process.cut_seconds(family, self.thickness_mm, self.part.cut_length_mm, self.part.pierces)


@dataclass(frozen=True, slots=True)
class Ask:
    """What holds for the whole job."""

    sets: int = 1
    mass_limit_kg: float | None = None
    currency: str | None = None
    terms: CostTerms = field(default_factory=CostTerms)


def estimate(
    items: Sequence[Costed], stock: Sequence[Stock] = (), layout: Layout | None = None, ask: Ask | None = None
) -> Estimate:
    """Estimate a job.

    Parameters
    ----------
    items
        Its parts, each name once.
    stock
        What the layout's sheets are called, with the user's prices.
    layout
        A nest of the parts; without one no cost is known.
    ask
        Sets, mass limit, currency, terms.

    Returns
    -------
    Estimate
        The line costs add up to the material cost to the cent; what is not known is None, with a note.
    """
    ask = ask or Ask()
    lines = share_out([i.part for i in items], stock, layout, ask.terms) if layout else None
    whole = _of_all(items, [item.mass_kg for item in items])
    finished = _of_all(items, [item.finished_mass_kg for item in items])
    placed = Counter(p.part for sheet in layout.sheets for p in sheet.placements) if layout else None
    parts = tuple(_part(item, lines, whole, placed) for item in items)
    seconds = _of_all(items, [item.cut_time_s for item in items])
    result = Estimate(
        currency=ask.currency,
        parts=parts,
        stock=_stock_use(items, stock, layout, lines) if layout and lines else (),
        mass_kg=None if whole is None else whole / ask.sets,
        mass_limit_kg=ask.mass_limit_kg,
        material_cost=lines.total if lines else None,
        utilisation=_utilisation(items, [s for s in layout.sheets if s.placements]) if layout else None,
        sets=ask.sets,
        share=str(ask.terms.share),
        cut_time_s=seconds,
        machine_cost=_machine_cost(items, parts, ask.terms.machine_rate),
        discount_percent=lines.percent if lines else Decimal(0),
        credits=to_cents(sum((b.credit for b in lines.bills), Decimal(0))) if lines else Decimal(0),
        finished_mass_kg=None if finished is None else finished / ask.sets,
    )
    return notes_of(result, nested=layout is not None)


def _of_all(items: Sequence[Costed], each: Sequence[float | None]) -> float | None:
    """Add up what all pieces have of something; None where it is not known of one of them."""
    known = [v * item.quantity for item, v in zip(items, each, strict=True) if v is not None]
    return sum(known) if len(known) == len(items) else None


def _part(item: Costed, lines: Lines | None, whole: float | None, placed: Counter[str] | None) -> PartEstimate:
    part, mass = item.part, item.mass_kg
    return PartEstimate(
        name=part.name,
        quantity=item.quantity,
        area_mm2=part.area_mm2,
        mass_kg=mass,
        cut_length_mm=part.cut_length_mm,
        pierces=part.pierces,
        material_cost=lines.piece.get(part.name) if lines else None,
        line_cost=lines.line.get(part.name) if lines else None,
        cut_time_s=item.cut_time_s,
        material=item.material.id if item.material else None,
        thickness_mm=item.thickness_mm,
        mass_share=mass * item.quantity / whole if mass is not None and whole else None,
        placed=placed[part.name] if placed is not None else None,
        properties=mass_properties(part, mass),
        finished_mass_kg=item.finished_mass_kg,
    )


def _stock_use(items: Sequence[Costed], stock: Sequence[Stock], layout: Layout, lines: Lines) -> tuple[StockUse, ...]:
    out = []
    for one in stock:
        sheets = [sheet for sheet in layout.sheets if sheet.stock == one.name and sheet.placements]
        if not sheets:
            continue
        is_open = one.length_mm is None and one.outline is None
        credit = sum((bill.credit for bill in lines.bills if bill.stock == one.name), Decimal(0))
        out.append(
            StockUse(
                name=one.name,
                count=len(sheets),
                price=one.price_per_metre if is_open else one.price_per_sheet,
                length_mm=sum(sheet.used_length_mm for sheet in sheets) if is_open else None,
                cost=lines.stock.get(one.name),
                credit=to_cents(credit),
                utilisation=_utilisation(items, sheets),
            )
        )
    return tuple(out)


def _utilisation(items: Sequence[Costed], sheets: Sequence[SheetLayout]) -> float | None:
    areas = {item.part.name: item.part.area_mm2 for item in items}
    whole = sum(sheet_area_mm2(sheet) for sheet in sheets)
    return sum(areas[p.part] for sheet in sheets for p in sheet.placements) / whole if whole else None


def _machine_cost(items: Sequence[Costed], parts: Sequence[PartEstimate], rate: Decimal | None) -> Decimal | None:
    """Return what the cutting costs: seconds times the rate per hour; None where either is not known."""
    total = Decimal(0)
    for item, part in zip(items, parts, strict=True):
        own = item.process.machine_rate
        hourly = rate if rate is not None else (None if own is None else decimal(own))
        if hourly is None or part.cut_time_s is None:
            return None
        total += hourly * decimal(part.cut_time_s * part.quantity) / 3600
    return to_cents(total)
