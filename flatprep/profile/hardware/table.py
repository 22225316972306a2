"""A hardware table: rows from one TOML file, and the words that say where each row is from."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

from flatprep.base.errors import ProfileError
from flatprep.profile.toml_check import Table, read_toml
from flatprep.profile.where import candidate, ids

HEAD = ("source", "sources", "units", "row")
"""Keys that every table may have."""


@dataclass(frozen=True, slots=True)
class HardwareTable:
    """One table of hardware.

    Attributes
    ----------
    name : str
        File stem.
    top : Table
        The whole file.
    rows : tuple of Table
    """

    name: str
    top: Table
    rows: tuple[Table, ...]

    def source(self, row: Table | None = None, *keys: str) -> str:
        """Return the table's title and, for a row, what its own `keys` (default ``from``) say was read."""
        named = self.top.table("sources")
        head = self.top.table("source")
        texts = [head.text("title")] if head else []
        for key in (keys or ("from",)) if row else ():
            for word in row.texts(key) if row else ():
                texts.append(named.text(word) if named and named.has(word) else word)
        return "; ".join(dict.fromkeys(texts))

    @property
    def note(self) -> str:
        """What the file says about doubtful figures."""
        head = self.top.table("source")
        return head.text("note", "") if head else ""


def table(name: str, own: Sequence[Path] = (), more: Sequence[str] = ()) -> HardwareTable:
    """Return a hardware table, from the user's folders or from those shipped.

    Parameters
    ----------
    name
        File stem, such as ``nuts``.
    own
        Folders looked into first.
    more
        Further keys that the file may have at its top.

    Raises
    ------
    ProfileError
        When the file is missing, no TOML, or has no row.
    """
    return _read(name, tuple(own), tuple(more))


def family(prefix: str, own: Sequence[Path] = ()) -> tuple[str, ...]:
    """Return the names of all tables that begin with `prefix`: a new series is one new file."""
    return tuple(name for name in ids("hardware", own) if name.startswith(prefix))


@lru_cache(maxsize=256)
def _read(name: str, own: tuple[Path, ...], more: tuple[str, ...]) -> HardwareTable:
    path = candidate("hardware", name, own)
    if path is None:
        raise ProfileError(f"hardware table {name}: no such file", "check the folder given with --profiles")
    top = Table(read_toml(path), str(path)).only((*HEAD, *more))
    rows = top.tables("row")
    if not rows:
        raise ProfileError(f"{path}: holds no row", "add row = [ { ... }, ... ]")
    return HardwareTable(name, top, rows)
