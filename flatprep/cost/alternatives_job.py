"""What if for the whole job: all parts of one material made of another, and what a set then weighs."""

from collections.abc import Iterator, Mapping, Sequence

from flatprep.model.alternative import Alternative, Basis, JobAlternative, PartAlternatives
from flatprep.model.estimate import Estimate


def job_alternatives(tables: Sequence[PartAlternatives], estimate: Estimate) -> tuple[JobAlternative, ...]:
    """Return one line for each pair of materials and basis, the lightest first; none where the mass is not known.

    Parameters
    ----------
    tables
        Those of all parts that have one.
    estimate
        Of the job as it is: quantities, sets, mass and mass limit.

    Notes
    -----
    A line is left out where one of its parts has no sheet thick enough. A part without an option in that material
    (it is made of it already) stays as it is.
    """
    if estimate.mass_kg is None:
        return ()
    pieces = {part.name: part.quantity / estimate.sets for part in estimate.parts}
    lines = [line for pair in _pairs(tables) for line in _line(pair, tables, pieces, estimate)]
    return tuple(sorted(lines, key=lambda line: (line.mass_kg, line.present, line.material, line.basis)))


Pair = tuple[str, str, Basis]


def _pairs(tables: Sequence[PartAlternatives]) -> list[Pair]:
    """Return present material, other material and basis, each once, in the order met."""
    found = (
        (table.material, option.material, option.basis)
        for table in tables
        for option in table.options
        if option.basis is not Basis.SAME_MATERIAL
    )
    return list(dict.fromkeys(found))


def _line(
    pair: Pair, tables: Sequence[PartAlternatives], pieces: Mapping[str, float], estimate: Estimate
) -> Iterator[JobAlternative]:
    present, material, basis = pair
    change, blocked = 0.0, []
    deflections: list[float | None] = []
    for table in (t for t in tables if t.material == present):
        option = next((o for o in table.options if (o.material, o.basis) == (material, basis)), None)
        if option is None or option.mass_kg is None or table.mass_kg is None:
            return
        deflections.append(option.deflection_ratio)
        change += (option.mass_kg - table.mass_kg) * pieces[table.part]
        if _is_blocked(option):
            blocked.append(table.part)
    mass = (estimate.mass_kg or 0.0) + change
    left = None if estimate.mass_limit_kg is None else estimate.mass_limit_kg - mass
    known = [d for d in deflections if d is not None]
    worst = max(known) if len(known) == len(deflections) else None
    yield JobAlternative(basis, present, material, len(deflections), mass, change, left, worst, tuple(blocked))


def _is_blocked(option: Alternative) -> bool:
    return option.process is None or bool(option.findings)
