"""The workshop's rules of thumb, from ``bench_rules.toml`` and ``bending.toml``: figures by section, with source."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

from flatprep.base.errors import ProfileError
from flatprep.profile.toml_check import Table, read_toml
from flatprep.profile.where import candidate


@dataclass(frozen=True, slots=True)
class Section:
    """One section of the rules."""

    table: Table

    def __getitem__(self, key: str) -> float:
        """Return a figure that has to be there."""
        return self.table.number(key)

    def find(self, key: str) -> float | None:
        """Return a figure, or None where the section has no such key."""
        return self.table.optional_number(key)

    def words(self, key: str) -> tuple[str, ...]:
        """Return a list of words."""
        return self.table.texts(key)

    def text(self, key: str) -> str | None:
        """Return a text, or None where the section has no such key."""
        return self.table.optional_text(key)

    def numbers(self, key: str) -> tuple[float, ...]:
        """Return a list of figures."""
        return self.table.numbers(key)

    @property
    def source(self) -> str:
        """Where the section's figures are from."""
        return self.table.text("from", "")


def section(name: str, own: Sequence[Path] = (), file: str = "bench_rules") -> Section:
    """Return a section of the workshop's rules; the user's own file goes before the shipped one, section by section.

    Raises
    ------
    ProfileError
        When no file has that section.
    """
    return _section(name, tuple(own), file)


@lru_cache(maxsize=256)
def _section(name: str, own: tuple[Path, ...], file: str) -> Section:
    for folders in (own, ()):
        path = candidate("hardware", file, folders)
        found = None if path is None else Table(read_toml(path), str(path)).table(name)
        if found is not None:
            return Section(found)
    raise ProfileError(f"hardware table {file}: section [{name}] is missing", "check the folder given with --profiles")
