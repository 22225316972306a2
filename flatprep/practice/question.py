"""What is asked of a table, and the shape of the answer."""

from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import TypeAlias

from flatprep.base.errors import UsageError
from flatprep.profile.hardware.table import table
from flatprep.profile.material import Material

Value: TypeAlias = float | str | None
Values: TypeAlias = tuple[str, Mapping[str, Value], str]
"""Name in the trade's form, values, source."""


@dataclass(frozen=True, slots=True)
class Question:
    """A name and what was given beside it."""

    name: str
    thickness_mm: float | None
    radius_mm: float | None
    angle_deg: float | None
    material: Material | None
    own: tuple[Path, ...]

    def need_thickness(self, kind: str) -> float:
        """Return the thickness, or raise where it was not given."""
        if self.thickness_mm is None:
            raise UsageError(f"{kind}: the answer depends on the thickness", "add --thickness, such as --thickness 3")
        return self.thickness_mm

    def table_source(self, name: str, more: tuple[str, ...] = ()) -> str:
        """Return the source of a whole table."""
        return table(name, self.own, more).source()
