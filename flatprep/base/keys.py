"""Keys of the files that people write, each with what it means: what is read and what the manual says are one thing."""

from collections.abc import Iterable
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Row:
    """Keys that are explained together.

    Attributes
    ----------
    keys : tuple of str
    meaning : str
        Markdown, for the manual's table.
    default : str
        What holds where the key is not given; empty where the meaning says it.
    """

    keys: tuple[str, ...]
    meaning: str
    default: str = ""


def keys_of(rows: Iterable[Row]) -> tuple[str, ...]:
    """Return all keys, in the manual's order."""
    return tuple(key for row in rows for key in row.keys)
