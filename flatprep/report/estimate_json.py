"""An estimate as the JSON document ``flatprep-estimate/1``: figures unrounded, money as numbers."""

from decimal import Decimal

from flatprep.model.estimate import Estimate, MassProperties, PartEstimate, QuantityBreak, StockUse

SCHEMA = "flatprep-estimate/1"


def estimate_document(estimate: Estimate, breaks: tuple[QuantityBreak, ...] = ()) -> dict[str, object]:
    """Return the document; what is not known is None, `notes` say why.

    Mass and mass limit are those of one set, cost and stock those of all sets; `mass_kg` is as cut,
    `finished_mass_kg` after bench work.
    """
    document: dict[str, object] = {
        "schema": SCHEMA,
        "currency": estimate.currency,
        "sets": estimate.sets,
        "parts": [_part(part) for part in estimate.parts],
        "stock": [_stock(use) for use in estimate.stock],
        "mass_kg": estimate.mass_kg,
        "finished_mass_kg": estimate.finished_mass_kg,
        "mass_limit_kg": estimate.mass_limit_kg,
        "mass_left_kg": estimate.mass_left_kg,
        "material_cost": _money(estimate.material_cost),
        "utilisation": estimate.utilisation,
        "shared_by": estimate.share,
        "discount_percent": float(estimate.discount_percent),
        "credits": float(estimate.credits),
        "cut_time_s": estimate.cut_time_s,
        "machine_cost": _money(estimate.machine_cost),
        "notes": list(estimate.notes),
    }
    if breaks:
        document["quantity_breaks"] = [_break(one) for one in breaks]
    return document


def _money(amount: Decimal | None) -> float | None:
    return None if amount is None else float(amount)


def _part(part: PartEstimate) -> dict[str, object]:
    return {
        "name": part.name,
        "quantity": part.quantity,
        "material": part.material,
        "thickness_mm": part.thickness_mm,
        "area_mm2": part.area_mm2,
        "mass_kg": part.mass_kg,
        "finished_mass_kg": part.finished_mass_kg,
        "mass_share": part.mass_share,
        "cut_length_mm": part.cut_length_mm,
        "pierces": part.pierces,
        "material_cost": part.material_cost,
        "line_cost": _money(part.line_cost),
        "cut_time_s": part.cut_time_s,
        "mass_properties": None if part.properties is None else _properties(part.properties),
    }


def _properties(given: MassProperties) -> dict[str, object]:
    return {
        "centroid_mm": list(given.centroid_mm),
        "ixx_mm4": given.ixx_mm4,
        "iyy_mm4": given.iyy_mm4,
        "ixy_mm4": given.ixy_mm4,
        "polar_mm4": given.polar_mm4,
        "principal_mm4": list(given.principal_mm4),
        "principal_deg": given.principal_deg,
        "gyration_mm": given.gyration_mm,
        "spin_kg_mm2": given.spin_kg_mm2,
    }


def _stock(use: StockUse) -> dict[str, object]:
    return {
        "name": use.name,
        "count": use.count,
        "price": _money(use.price),
        "length_mm": use.length_mm,
        "cost": _money(use.cost),
        "credit": float(use.credit),
        "utilisation": use.utilisation,
    }


def _break(one: QuantityBreak) -> dict[str, object]:
    return {
        "sets": one.sets,
        "sheets": one.sheets,
        "material_cost": _money(one.material_cost),
        "cost_per_set": one.cost_per_set,
        "utilisation": one.utilisation,
        "unplaced": one.unplaced,
    }
