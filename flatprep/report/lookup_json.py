"""An answer from the tables as one JSON document."""

from flatprep.practice.lookup import LookupAnswer


def lookup_document(answer: LookupAnswer) -> dict[str, object]:
    """Return the document of ``lookup --format json``: numbers unrounded."""
    return {
        "schema": "flatprep-lookup/1", "kind": answer.kind, "name": answer.name, "title": answer.title,
        "values": dict(answer.values),
        "source": answer.source,
    }  # fmt: skip
