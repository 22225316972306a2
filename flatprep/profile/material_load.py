"""Material profiles: TOML in, a checked Material out; looked up by id or by a common designation."""

from collections.abc import Mapping, Sequence
from decimal import Decimal
from pathlib import Path

from flatprep.base.errors import ProfileError
from flatprep.base.keys import keys_of
from flatprep.base.names import did_you_mean, nearest, plain
from flatprep.profile import reference
from flatprep.profile.gauges import GAUGE_METALS
from flatprep.profile.material import FAMILIES, LEVELS, TECHNOLOGIES, BendRule, Material, Verdict
from flatprep.profile.points import Points
from flatprep.profile.toml_check import Table, read_toml
from flatprep.profile.where import candidate, ids

MOST_DENSITY = 30000.0
KEYS = keys_of(reference.MATERIAL)
"""Every key that a material profile may have."""


def load_material(name: str, own: Sequence[Path] = ()) -> Material:
    """Load a material by its id or one of its aliases, own folders first.

    Raises
    ------
    ProfileError
        When no material is called that (with the nearest names), or a profile holds a mistake.
    """
    path = candidate("materials", name, own)
    if path is not None:
        return _read(path)
    asked = plain(name)
    known = all_materials(own)
    for material in known:
        if asked in {plain(word) for word in (material.id, material.name, *material.aliases)}:
            return material
    names = [word for material in known for word in (material.id, material.name, *material.aliases)]
    if nearest(name, names):
        raise ProfileError(f'unknown material "{name}"', did_you_mean(name, names))
    all_ids = did_you_mean(name, [material.id for material in known], most=len(known))
    raise ProfileError(f'unknown material "{name}"', f"{all_ids}; one of your own is a file under --profiles DIR")


def all_materials(own: Sequence[Path] = ()) -> tuple[Material, ...]:
    """Return every known material by id; own ones go before shipped ones of the same id."""
    files = (candidate("materials", name, own) for name in ids("materials", own))
    return tuple(_read(file) for file in files if file is not None)


def _read(path: Path) -> Material:
    return parse_material(read_toml(path), str(path), path.stem)


def parse_material(data: Mapping[str, object], file: str, stem: str) -> Material:
    """Check the tables of a material profile; `file` is named in messages, `stem` becomes the id."""
    top = Table(data, file).only(KEYS)
    bend = top.table("bend")
    kind = top.choice("strength_kind", ("yield", "tensile", "flexural"), "")
    return Material(
        id=stem,
        name=top.text("name", stem),
        family=top.choice("family", FAMILIES),
        density_kg_m3=density(top),
        aliases=top.texts("aliases"),
        face_grain=top.flag("face_grain"),
        source=top.text("source", ""),
        density_range=_span(top, "density_range"),
        e_gpa=top.optional_number("elastic_modulus", above=0.0),
        strength_mpa=top.optional_number("strength", above=0.0),
        strength_kind=kind,
        mechanical_source=top.text("mechanical_source", ""),
        hardness=top.text("hardness", ""),
        gauge_metal=top.choice("gauge", GAUGE_METALS) if top.has("gauge") else None,
        stock_mm=tuple(sorted(top.numbers("stock", least=0.0))),
        tap=top.choice("tap", ("good", "fair", "poor", "no"), ""),
        tap_note=top.text("tap_note", ""),
        cautions=top.texts("cautions"),
        hazards=top.texts("hazards"),
        bend=_bend(bend) if bend else None,
        cuts=_cuts(top),
        price_per_kg=_price(top),
    )


def _span(top: Table, key: str) -> tuple[float, float] | None:
    if not top.has(key):
        return None
    low, high = top.numbers(key, count=2, least=0.0)
    if low > high:
        raise top.fail(key, "the least and the most, such as [7830, 7870]")
    return low, high


def density(table: Table) -> float | None:
    """Return the density of a material's table, kg/m³, or None; nothing is heavier than osmium by much."""
    value = table.optional_number("density", above=0.0)
    if value is not None and value > MOST_DENSITY:
        raise table.fail("density", f"kilograms per cubic metre, {MOST_DENSITY:g} at the most")
    return value


def _price(top: Table) -> Decimal | None:
    price = top.optional_number("price_per_kg", least=0.0)
    if price is not None and price > 1e12:
        raise top.fail("price_per_kg", "a number from 0 to 1e12")
    return None if price is None else Decimal(str(price))


def _cuts(top: Table) -> dict[str, Verdict]:
    outer = top.table("cut")
    if outer is None:
        return {}
    outer.only(TECHNOLOGIES)
    return {name: _verdict(table) for name, table in top.named_tables("cut").items()}


def _verdict(table: Table) -> Verdict:
    table.only(("verdict", "why", "caution", "source"))
    level = table.choice("verdict", LEVELS)
    if level in ("no", "never") and not table.has("why"):
        raise table.need("why", '"..." (what goes wrong)')
    return Verdict(level, table.text("why", ""), table.text("caution", ""), table.text("source", ""))


def _bend(table: Table) -> BendRule:
    table.only(("bendable", "table", "refuse", "prefer", "refuse_mm", "along_grain", "across_only", "note", "source"))
    return BendRule(
        bendable=table.flag("bendable", default=True),
        table=_ratios(table, "table"),
        refuse=table.optional_number("refuse", least=0.0),
        prefer=_ratios(table, "prefer"),
        refuse_mm=table.number("refuse_mm", 0.0, least=0.0),
        along_grain=table.number("along_grain", 1.0, least=1.0),
        across_only=table.flag("across_only"),
        note=table.text("note", ""),
        source=table.text("source", ""),
    )


def _ratios(table: Table, key: str) -> Points:
    """Return (thickness, radius over thickness) rows; one bare number holds for every thickness."""
    if isinstance(table.get(key), int | float):
        return ((0.0, table.number(key, least=0.0)),)
    rows = table.pairs(key)
    steps = [x for x, _ in rows]
    if steps != sorted(set(steps)) or any(x < 0.0 or y < 0.0 for x, y in rows):
        raise table.fail(key, "pairs [thickness mm, radius over thickness] by rising thickness")
    return rows
