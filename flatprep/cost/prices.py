"""Prices per kg out of the prices of sheets that a job states."""

from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal

from flatprep.cost.share import decimal
from flatprep.job.values import Stock
from flatprep.profile.material import Material


def price_per_kg(stock: Stock) -> Decimal | None:
    """Return what a kilogram of a rectangular sheet, or of open stock, costs; None without price, size or density."""
    density = stock.material.density_kg_m3
    price, length = (
        (stock.price_per_sheet, stock.length_mm) if stock.length_mm is not None else (stock.price_per_metre, 1000.0)
    )
    if price is None or density is None or stock.width_mm is None:
        return None
    mass = length * stock.width_mm * stock.thickness_mm * density * 1e-9
    return price / decimal(mass)


def priced(materials: Sequence[Material], stock: Sequence[Stock]) -> tuple[Material, ...]:
    """Give materials that have no price per kg of their own the dearest one of the job's stock of that material."""
    known: dict[str, Decimal] = {}
    for one in stock:
        price = price_per_kg(one)
        if price is not None:
            known[one.material.id] = max(price, known.get(one.material.id, price))
    return tuple(
        replace(m, price_per_kg=known.get(m.id)) if m.price_per_kg is None and m.id in known else m for m in materials
    )
