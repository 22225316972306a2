"""The what-if table as the JSON document ``flatprep-alternatives/1`` and as CSV."""

from collections.abc import Sequence
from dataclasses import asdict, fields
from decimal import Decimal

from flatprep.model.alternative import Alternative, JobAlternative, PartAlternatives
from flatprep.report.csv_table import csv_table

SCHEMA = "flatprep-alternatives/1"


def alternatives_document(
    tables: Sequence[PartAlternatives], whole: Sequence[JobAlternative] = (), *, currency: str | None = None
) -> dict[str, object]:
    """Return the document: one entry a part, and one line for each material made of another in the whole set.

    Figures are unrounded, None where something is not known.
    """
    parts = [_plain(asdict(table)) for table in tables]
    return {"schema": SCHEMA, "currency": currency, "parts": parts, "set": [_plain(asdict(line)) for line in whole]}


def _plain(value: object) -> object:
    if isinstance(value, Decimal):
        return float(value)
    if isinstance(value, dict):
        return {key: _plain(item) for key, item in value.items()}
    if isinstance(value, list | tuple):
        return [_plain(item) for item in value]
    return value


def alternatives_csv(tables: Sequence[PartAlternatives]) -> str:
    """Return one line an option, under a head."""
    names = [field.name for field in fields(Alternative)]
    rows = ([table.part, *_cells(option, names)] for table in tables for option in table.options)
    return csv_table(["part", *names], rows)


def _cells(option: Alternative, names: Sequence[str]) -> list[object]:
    values = [getattr(option, name) for name in names]
    return ["; ".join(value) if isinstance(value, tuple) else value for value in values]
