"""JSON Schemas of the documents that ``--format json`` writes, for the programs that read them."""

import json
from importlib.resources import files

KINDS = ("lint", "layout", "checklist", "estimate", "lookup", "alternatives", "repair", "compare", "coupon", "book")
"""The documents that have a schema."""


def schema(kind: str) -> dict[str, object]:
    """Return the JSON Schema (draft 2020-12) of a document.

    Parameters
    ----------
    kind
        One of `KINDS`.

    Raises
    ------
    KeyError
        When there is no such document.
    """
    if kind not in KINDS:
        raise KeyError(kind)
    text = files("flatprep.report").joinpath("schemas", f"{kind}.json").read_text(encoding="utf-8")
    found: dict[str, object] = json.loads(text)
    return found
