"""Rows of the reference tables by column name."""

from typing import Any

from tests.reference_tables import table


def rows(name: str) -> list[dict[str, Any]]:
    """The rows of a reference table as dictionaries; a short row leaves its last columns out."""
    body = table(name)["table"]
    return [dict(zip(body["columns"], row, strict=False)) for row in body["row"]]


def named(row: dict[str, Any]) -> str:
    """The test id of a row: its first values."""
    return " ".join(str(value) for value in list(row.values())[:3])
