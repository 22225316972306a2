"""What the sheets of a layout cost: price, discount, credit for usable rests and for scrap."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal

import numpy as np

from flatprep.cost.share import decimal
from flatprep.geom.bulge import Floats
from flatprep.job.terms import CostTerms, Discount
from flatprep.job.values import Stock
from flatprep.model.layout import SheetLayout
from flatprep.profile.material import METAL_FAMILIES


@dataclass(frozen=True, slots=True)
class SheetBill:
    """One sheet: its price before discount (None: not known), and what is credited after it."""

    stock: str
    gross: Decimal | None
    paid: Decimal | None
    credit: Decimal

    @property
    def net(self) -> Decimal | None:
        """What the parts on it have to bear; never negative."""
        return None if self.paid is None else max(self.paid - self.credit, Decimal(0))


def sheet_area_mm2(sheet: SheetLayout) -> float:
    """Area of a sheet: its border less its holes."""
    return _ring_area(sheet.outline) - sum(_ring_area(hole) for hole in sheet.holes)


def _ring_area(ring: Floats) -> float:
    x, y = (ring - ring[0]).T
    return abs(float(np.sum(x * np.roll(y, -1) - np.roll(x, -1) * y))) / 2.0


def gross_price(sheet: SheetLayout, stock: Stock) -> Decimal | None:
    """Return the price of a sheet, or of the length taken from open stock; None where the user gives none."""
    if stock.length_mm is None and stock.outline is None:
        metre = stock.price_per_metre
        return None if metre is None else metre * decimal(sheet.used_length_mm) / 1000
    return stock.price_per_sheet


def discount_percent(bill: Decimal, discounts: Sequence[Discount]) -> Decimal:
    """Return the per cent off a bill: that of the highest amount it reaches."""
    return next((d.percent for d in reversed(discounts) if bill >= d.least), Decimal(0))


def rest_area_mm2(sheet: SheetLayout, stock: Stock, least_mm: tuple[float, float]) -> float:
    """Area of the rectangle beyond the used length of a full sheet, 0 where it is smaller than the least rest."""
    if stock.length_mm is None or stock.width_mm is None:
        return 0.0
    sides = sorted((stock.length_mm - sheet.used_length_mm, stock.width_mm))
    usable = sides[0] >= min(least_mm) and sides[1] >= max(least_mm)
    return sides[0] * sides[1] if usable else 0.0


def bill_sheets(
    sheets: Sequence[SheetLayout], stock: Mapping[str, Stock], net_mm2: Sequence[float], terms: CostTerms
) -> tuple[tuple[SheetBill, ...], Decimal]:
    """Return the bill of every sheet and the discount in per cent.

    Parameters
    ----------
    sheets
        Those of a layout.
    stock
        By name.
    net_mm2
        Net area of the parts on each sheet.
    terms
        Discounts and credits.
    """
    gross = [gross_price(sheet, stock[sheet.stock]) for sheet in sheets]
    percent = discount_percent(sum((g for g in gross if g is not None), Decimal(0)), terms.discounts)
    bills = []
    for sheet, price, net in zip(sheets, gross, net_mm2, strict=True):
        paid = None if price is None else price * (100 - percent) / 100
        credit = Decimal(0) if paid is None else _credit(sheet, stock[sheet.stock], net, paid, terms)
        bills.append(SheetBill(sheet.stock, price, paid, credit))
    return tuple(bills), percent


def _credit(sheet: SheetLayout, stock: Stock, net_mm2: float, paid: Decimal, terms: CostTerms) -> Decimal:
    area = sheet_area_mm2(sheet)
    rest = rest_area_mm2(sheet, stock, terms.offcut_least_mm) if terms.offcut_credit else 0.0
    credit = paid * terms.offcut_credit * decimal(rest / area)
    density = stock.material.density_kg_m3
    if terms.scrap_per_kg and density and stock.material.family in METAL_FAMILIES:
        skeleton = max(area - rest - net_mm2, 0.0)
        credit += terms.scrap_per_kg * decimal(skeleton * stock.thickness_mm * density * 1e-9)
    return min(credit, paid)
