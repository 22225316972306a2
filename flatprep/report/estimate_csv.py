"""An estimate as a table for spreadsheets: one line a part, figures unrounded, money to the cent."""

from flatprep.model.estimate import Estimate, PartEstimate
from flatprep.report.csv_table import csv_table

HEAD = (
    "name", "material", "thickness_mm", "quantity", "area_mm2", "mass_kg", "finished_mass_kg", "mass_share",
    "cut_length_mm", "pierces", "material_cost", "line_cost", "currency", "cut_time_s",
)  # fmt: skip


def estimate_csv(estimate: Estimate) -> str:
    """Return the table with its head; what is not known is empty."""
    return csv_table(HEAD, (_row(part, estimate.currency) for part in estimate.parts))


def _row(part: PartEstimate, currency: str | None) -> list[object]:
    return [
        part.name,
        part.material,
        part.thickness_mm,
        part.quantity,
        part.area_mm2,
        part.mass_kg,
        part.finished_mass_kg,
        part.mass_share,
        part.cut_length_mm,
        part.pierces,
        part.material_cost,
        part.line_cost,
        currency,
        part.cut_time_s,
    ]
