"""Screw heads that are sunk: countersinks by head standard, counterbores for socket heads."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from functools import lru_cache
from pathlib import Path

from flatprep.base.units import MM_PER_UNIT
from flatprep.profile.hardware.names import screw_in, tidy, unknown
from flatprep.profile.hardware.table import HardwareTable, table
from flatprep.profile.toml_check import Table

_HEADS = ("head",)


@dataclass(frozen=True, slots=True)
class Countersink:
    """A countersunk head and the sink to cut for it, mm and degrees.

    Attributes
    ----------
    standard, screw : str
        ``ISO 10642``, ``M5``.
    head_dia_mm : float
        Sharp (theoretical) maximum diameter of the head.
    head_real_mm, height_mm : float or None
        The head as made, where it was read.
    sink_dia_mm : float
        Diameter of the sink at the face; the head's own where the standard for the sink has no figure.
    """

    standard: str
    screw: str
    angle_deg: float
    head_dia_mm: float
    head_real_mm: float | None
    height_mm: float | None
    sink_dia_mm: float
    sink_rule: str
    source: str

    @property
    def name(self) -> str:
        """``M5 ISO 10642``."""
        return f"{self.screw} {self.standard}"


@dataclass(frozen=True, slots=True)
class Counterbore:
    """A counterbore for a socket head screw, mm."""

    screw: str
    bore_mm: float
    head_dia_mm: float
    head_height_mm: float
    depth_mm: float
    source: str


@lru_cache(maxsize=8)
def _countersinks(own: tuple[Path, ...]) -> tuple[Countersink, ...]:
    sheet = table("countersinks", own, _HEADS)
    rules = {h.text("head"): h.text("sink_rule") for h in sheet.top.tables("head")}
    return tuple(_countersink(sheet, row, rules.get(row.text("head"), "")) for row in sheet.rows)


def all_countersinks(own: Sequence[Path] = ()) -> tuple[Countersink, ...]:
    """Return every countersunk head of the table."""
    return _countersinks(tuple(own))


def _countersink(sheet: HardwareTable, row: Table, rule: str) -> Countersink:
    row.only(("head", "screw", "angle", "head_dia", "head_real", "height", "sink", "unit", "from"))
    scale = MM_PER_UNIT[row.choice("unit", tuple(MM_PER_UNIT))]
    head = row.number("head_dia", above=0.0)
    real, height = (row.optional_number(key, above=0.0) for key in ("head_real", "height"))
    return Countersink(
        standard=row.text("head"), screw=row.text("screw"), angle_deg=row.number("angle"), head_dia_mm=head * scale,
        head_real_mm=None if real is None else real * scale, height_mm=None if height is None else height * scale,
        sink_dia_mm=row.number("sink", head) * scale, sink_rule=rule, source=sheet.source(row),
    )  # fmt: skip


def find_countersink(name: str, own: Sequence[Path] = ()) -> Countersink:
    """Return the countersink of a screw and head standard, in either order: ``M5 ISO 10642``, ``DIN 7991 M6``.

    Raises
    ------
    UnknownHardwareError
        With the nearest known names; also where the screw has several heads and none is named: they differ.
    """
    known = all_countersinks(own)
    rest, standard = _split_standard(name, own)
    size = screw_in(rest)
    found = [c for c in known if c.screw == size and standard in (None, c.standard)]
    if len(found) == 1 and (standard is not None or len({c.standard for c in found}) == 1):
        return found[0]
    if found:
        raise unknown("countersink", name, [c.name for c in found], "the heads of that screw differ, name the standard")
    near = [c.name for c in known if c.screw == size] or [c.name for c in known if c.standard == standard]
    raise unknown("countersink", name, near or [c.name for c in known])


def names_head(name: str, own: Sequence[Path] = ()) -> bool:
    """Tell whether a text names a standard of countersunk heads."""
    return _split_standard(name, own)[1] is not None


def _split_standard(name: str, own: Sequence[Path]) -> tuple[str, str | None]:
    text = tidy(name)
    sheet = table("countersinks", own, _HEADS)
    pairs = [(alias, h.text("head")) for h in sheet.top.tables("head") for alias in h.texts("names")]
    for alias, standard in sorted(pairs, key=lambda pair: -len(pair[0])):
        pattern = r"(?<![\w.])" + re.escape(alias).replace(r"\ ", r"[\s-]*") + r"(?![\w])"
        if re.search(pattern, text, re.IGNORECASE):
            return re.sub(pattern, " ", text, flags=re.IGNORECASE).strip(), standard
    return text, None


@lru_cache(maxsize=8)
def _counterbores(own: tuple[Path, ...]) -> tuple[Counterbore, ...]:
    sheet = table("counterbores", own)
    out = []
    for row in sheet.rows:
        row.only(("screw", "bore", "head_dia", "height", "depth", "from"))
        bore, head, height, depth = (row.number(key, above=0.0) for key in ("bore", "head_dia", "height", "depth"))
        out.append(Counterbore(row.text("screw"), bore, head, height, depth, sheet.source(row)))
    return tuple(out)


def find_counterbore(name: str, own: Sequence[Path] = ()) -> Counterbore:
    """Return the counterbore for a socket head screw ISO 4762: ``M6``, ``M6 ISO 4762``, ``M6 DIN 912``.

    Raises
    ------
    UnknownHardwareError
        With the nearest known names.
    """
    known = _counterbores(tuple(own))
    found = [c for c in known if c.screw == screw_in(name)]
    if not found:
        raise unknown("counterbore", name, [f"{c.screw} ISO 4762" for c in known])
    return found[0]
