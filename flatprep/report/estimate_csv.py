"""An estimate as a table for spreadsheets: one line a part, figures unrounded, money to the cent."""

import csv
import io

from flatprep.model.estimate import Estimate, PartEstimate

HEAD = (
    "name", "material", "thickness_mm", "quantity", "area_mm2", "mass_kg", "mass_share", "cut_length_mm", "pierces",
    "material_cost", "line_cost", "currency", "cut_time_s",
)  # fmt: skip


def estimate_csv(estimate: Estimate) -> str:
    """Return the table with its head; what is not known is empty."""
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(HEAD)
    writer.writerows(_row(part, estimate.currency) for part in estimate.parts)
    return out.getvalue()


def _row(part: PartEstimate, currency: str | None) -> list[object]:
    return [
        safe(part.name),
        part.material,
        part.thickness_mm,
        part.quantity,
        part.area_mm2,
        part.mass_kg,
        part.mass_share,
        part.cut_length_mm,
        part.pierces,
        part.material_cost,
        part.line_cost,
        currency,
        part.cut_time_s,
    ]


def safe(text: str) -> str:
    """Return a text that no spreadsheet takes for a formula: names come from other people's drawings."""
    return f"'{text}" if text[:1] in ("=", "+", "-", "@", "\t", "\r") else text
