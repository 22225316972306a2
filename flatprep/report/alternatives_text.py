"""The what-if table for people."""

from collections.abc import Sequence

from flatprep.model.alternative import Alternative, Basis, JobAlternative, PartAlternatives
from flatprep.report.columns import columns
from flatprep.report.figures import UNKNOWN, length, mass, money, significant

_TITLES = {
    Basis.SAME_MATERIAL: "same material, other thickness",
    Basis.SAME_THICKNESS: "other material, same thickness",
    Basis.STIFFNESS: "as stiff in bending",
    Basis.STRENGTH: "as strong in bending",
}
_HEAD = ["material", "cut by", "needed", "sold", "mass", "mass ratio", "deflection", "strength", "cost", "lint"]


def alternatives_text(
    tables: Sequence[PartAlternatives],
    whole: Sequence[JobAlternative] = (),
    *,
    currency: str | None = None,
    units: str = "mm",
) -> str:
    """Return one block a part: what it is, then the options by what stays the same, the lightest first.

    `whole` adds what a set weighs when all parts of a material are made of another.
    """
    blocks = [_part(table, currency, units) for table in tables]
    return "\n\n".join([*blocks, _whole(whole)] if whole else blocks)


def _whole(lines: Sequence[JobAlternative]) -> str:
    head = [
        "all parts of",
        "made of",
        "basis",
        "kinds",
        "set weighs",
        "change",
        "limit left",
        "deflection",
        "in the way",
    ]
    rows = [
        [
            line.present,
            line.material,
            _TITLES[line.basis],
            str(line.parts),
            mass(line.mass_kg),
            ("+" if line.change_kg > 0.0 else "") + mass(line.change_kg),
            mass(line.limit_left_kg),
            _times(line.deflection_ratio),
            _few(line.blocked),
        ]
        for line in lines
    ]
    return f"one set, material by material\n{columns(head, rows, left=3)}"


def _few(names: Sequence[str]) -> str:
    if not names:
        return UNKNOWN
    return names[0] if len(names) == 1 else f"{names[0]} and {len(names) - 1} more"


def _part(table: PartAlternatives, currency: str | None, units: str) -> str:
    now = f"{table.part}: {table.material} {length(table.thickness_mm, units)}, {mass(table.mass_kg)}"
    blocks = [now + (f", {money(table.cost, currency)}" if table.cost is not None else "")]
    for basis in Basis:
        rows = [_row(option, currency, units) for option in table.options if option.basis is basis]
        if rows:
            blocks.append(f"{_TITLES[basis]}\n{columns(_HEAD, rows, left=2)}")
    cautions = dict.fromkeys(f"{o.material}: {o.caution}" for o in table.options if o.caution)
    blocks += ["\n".join([*(f"caution: {c}" for c in cautions), *(f"note: {n}" for n in table.notes)])]
    return "\n\n".join(block for block in blocks if block)


def _row(option: Alternative, currency: str | None, units: str) -> list[str]:
    return [
        option.material,
        option.process or "not cut here",
        length(option.needed_mm, units),
        length(option.thickness_mm, units) if option.thickness_mm is not None else "not sold",
        mass(option.mass_kg),
        _times(option.mass_ratio),
        _times(option.deflection_ratio),
        _times(option.strength_ratio),
        money(option.cost, currency),
        _lint(option),
    ]


def _times(ratio: float | None) -> str:
    return UNKNOWN if ratio is None else f"× {significant(ratio)}"


def _lint(option: Alternative) -> str:
    if option.findings is None:
        return UNKNOWN
    return ", ".join(option.findings) if option.findings else "passes"
