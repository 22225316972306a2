"""Whether a drawing's unit can be right: the size of its parts and of its holes."""

from collections.abc import Sequence
from statistics import median

from flatprep.base.units import MM_PER_UNIT
from flatprep.model.drawing import Fault, Part

PART_MM = (3.0, 6200.0)
"""Larger side of parts people cut: from a washer to the longest stock sheet (6 m, common practice)."""
HOLE_MM = (0.5, 100.0)
"""Median diameter of the round holes of a part (common practice)."""
_LIKELY = ("mm", "in", "cm", "m")
"""Units to try instead, the most usual first."""


def doubtful_units(parts: Sequence[Part], units: str) -> list[Fault]:
    """Say so when sizes are not those of flat parts, and name the unit that would make them so.

    Parameters
    ----------
    parts
        As read in `units`, mm.
    units
        A key of `MM_PER_UNIT`.
    """
    if not parts:
        return []
    largest = max(max(p.size_mm) for p in parts)
    holes = [2.0 * c.circle[2] for p in parts for c in p.holes if c.circle is not None]
    hole = median(holes) if len(holes) >= 2 else None
    if _fits(largest, hole):
        return []
    factors = {unit: MM_PER_UNIT[unit] / MM_PER_UNIT[units] for unit in _LIKELY if unit != units}
    likely = next((u for u, k in factors.items() if _fits(largest * k, None if hole is None else hole * k)), None)
    if likely is None:
        return []
    holding = "" if hole is None else f", its round holes {_figure(hole)} mm across"
    detail = (
        f"read in {units} its largest part is {_figure(largest)} mm long{holding}: was it drawn in {likely} "
        f"({_figure(largest * factors[likely])} mm)?"
    )
    x0, y0, x1, y1 = parts[0].outer.bounds
    return [Fault("doubtful-units", ((x0 + x1) / 2, (y0 + y1) / 2), largest, (), detail)]


def _fits(largest: float, hole: float | None) -> bool:
    return PART_MM[0] <= largest <= PART_MM[1] and (hole is None or HOLE_MM[0] <= hole <= HOLE_MM[1])


def _figure(mm: float) -> str:
    return f"{mm:.0f}" if mm >= 1000.0 else f"{mm:.3g}"
