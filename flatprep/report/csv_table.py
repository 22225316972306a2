"""CSV as RFC 4180 has it, safe to open in a spreadsheet."""

import csv
import io
from collections.abc import Iterable, Sequence

_FORMULA_STARTS = ("=", "+", "-", "@", "\t", "\r")


def csv_table(head: Sequence[str], rows: Iterable[Sequence[object]]) -> str:
    """Return a table with its head: figures unrounded, nothing where something is not known (None).

    A text that a spreadsheet would take for a formula gets an apostrophe in front: names come from other people's
    drawings.
    """
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\r\n")
    writer.writerow(head)
    writer.writerows([_cell(value) for value in row] for row in rows)
    return out.getvalue()


def safe(text: str) -> str:
    """Return a text that no spreadsheet takes for a formula."""
    return "'" + text if text.startswith(_FORMULA_STARTS) else text


def _cell(value: object) -> object:
    return safe(value) if isinstance(value, str) else "" if value is None else value
