"""Thickness as people write it: ``3``, ``3mm``, ``0.125in``, ``1/8in``, ``16ga``."""

import re
from functools import cache

from flatprep.base.errors import FlatprepError, ProfileError
from flatprep.base.names import did_you_mean
from flatprep.base.units import LengthError, parse_length_mm
from flatprep.profile.material import Material
from flatprep.profile.toml_check import Table, read_toml
from flatprep.profile.where import SHIPPED

_GAUGE = re.compile(r"\s*#?(\d{1,2})\s*-?\s*(?:ga|gauge|gage|swg)\.?\s*", re.IGNORECASE)
MOST_MM = 1000.0
STOCK_GAUGES = (26, 24, 22, 20, 18, 16, 14, 12, 11, 10, 7)
STOCK_FRACTIONS = (3 / 16, 1 / 4, 5 / 16, 3 / 8, 1 / 2, 5 / 8, 3 / 4, 1.0)
GAUGE_METALS = ("steel", "stainless", "aluminium", "galvanised")
FILE = SHIPPED / "hardware" / "gauges.toml"
_FAMILY_METAL = {"low-carbon-steel": "steel", "wear-plate": "steel", "stainless": "stainless", "aluminium": "aluminium"}


class ThicknessError(FlatprepError):
    """A text that is no thickness, or a gauge whose metal is not known."""


def parse_thickness_mm(value: float | str, unit: str = "mm", material: Material | None = None) -> float:
    """Read a thickness: a length above 0, or a gauge number of the material's metal.

    Parameters
    ----------
    value
        A number, taken in `unit`, or a text with its own unit.
    unit
        A key of `flatprep.base.units.MM_PER_UNIT`.
    material
        Whose gauge table holds; a gauge means another thickness in each metal.

    Raises
    ------
    ThicknessError
        When the value is no thickness, is not above 0, or is a gauge without a metal that has one.
    """
    match = _GAUGE.fullmatch(value) if isinstance(value, str) else None
    if match:
        return gauge_mm(int(match[1]), metal_of(material, str(value)))
    try:
        thickness = parse_length_mm(value, unit)
    except LengthError:
        raise ThicknessError(f"thickness {value!r} is not a length", "write 3, 3mm, 0.125in, 1/8in or 16ga") from None
    if thickness <= 0.0:
        raise ThicknessError(f"thickness {value!r} is not above 0", "write the sheet's thickness, such as 3mm")
    if thickness > MOST_MM:
        raise ThicknessError(f"thickness {value!r} is over a metre", "write the sheet's thickness, such as 3mm")
    return thickness


def metal_of(material: Material | None, asked: str = "gauge") -> str:
    """Return the column of the gauge table that holds for a material.

    Raises
    ------
    ThicknessError
        When no material is known, or gauges are not used for it.
    """
    if material is None:
        raise ThicknessError(
            f'"{asked.strip()}": a gauge number means another thickness in each metal',
            "name the material as well, or write the thickness in mm or in",
        )
    metal = material.gauge_metal or _FAMILY_METAL.get(material.family)
    if metal is None:
        raise ThicknessError(
            f'"{asked.strip()}": {material.name} is not sold by gauge', "write the thickness in mm or in"
        )
    return metal


def gauge_mm(number: int, metal: str) -> float:
    """Return the thickness of a gauge number in one of `GAUGE_METALS`, mm.

    Raises
    ------
    ThicknessError
        When the table has no such number in that metal.
    """
    column = {gauge: row[metal] for gauge, row in _table().items() if metal in row}
    if number not in column:
        raise ThicknessError(
            f"no gauge {number} in {metal}", did_you_mean(str(number), [str(gauge) for gauge in column])
        )
    return column[number] * 25.4


def inch_stock_mm(material: Material) -> tuple[float, ...]:
    """Return the thicknesses that a material is usually sold in by inches, mm, rising.

    Metals with a gauge table by the gauges that shops stock (the even ones from 26 to 10, and 11 and 7), others in
    1/16 and 1/8 in; from 3/16 in on by fractions: common practice.
    """
    metal = material.gauge_metal
    thin = [1 / 16, 1 / 8] if metal is None else [_table()[g][metal] for g in STOCK_GAUGES if metal in _table()[g]]
    return tuple(sorted(inch * 25.4 for inch in {*thin, *STOCK_FRACTIONS}))


def gauge_source() -> str:
    """Return where the gauge table is from."""
    return _source(read_toml(FILE))


@cache
def _table() -> dict[int, dict[str, float]]:
    top = Table(read_toml(FILE), str(FILE)).only(("source", "units", "row"))
    rows = {}
    for row in top.tables("row"):
        row.only(("gauge", *GAUGE_METALS))
        rows[row.integer("gauge")] = {metal: row.number(metal, above=0.0) for metal in GAUGE_METALS if row.has(metal)}
    if not rows:
        raise ProfileError(f"{FILE}: holds no row", "add a [[row]] with gauge and the inches of each metal")
    return rows


def _source(data: dict[str, object]) -> str:
    source = data.get("source")
    return "; ".join(str(v) for v in source.values()) if isinstance(source, dict) else ""
