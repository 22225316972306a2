"""What a bare hole may be meant for: told as questions, never taken as facts."""

from collections.abc import Iterator
from functools import lru_cache

from flatprep.base.tolerances import DEFAULT
from flatprep.measure.holes import Hole, HoleShape
from flatprep.profile.hardware.bearings import all_bearings
from flatprep.profile.hardware.clearance import all_clearances
from flatprep.profile.hardware.nuts import all_nuts
from flatprep.profile.hardware.threads import all_threads

USUAL_MM = (2.0, 2.5, 3.0, 4.0, 5.0, 6.0, 8.0, 10.0, 12.0, 16.0, 20.0)
"""Metric screws that a workshop has in its drawers (first choice of ISO 262)."""
USUAL_IN = ("#4", "#6", "#8", "#10", "1/4", "5/16", "3/8", "1/2")
NOMINAL_TO_MM = 20.0
INCH_NOMINALS_MM = {"1/8": 3.175, "3/16": 4.7625, "1/4": 6.35, "5/16": 7.9375, "3/8": 9.525, "1/2": 12.7, "5/8": 15.875}
SEATS_FROM_MM = 13.0
"""Smaller round holes are taken for screws, not for bearings."""


def meanings(hole: Hole) -> tuple[str, ...]:
    """Return what the drawn size of a hole is exactly the size of: a tap drill, a clearance hole, a seat, a nut."""
    if hole.shape is HoleShape.HEXAGON:
        return tuple(_nuts(hole.width_mm))
    if hole.shape is not HoleShape.CIRCLE:
        return ()
    slack = DEFAULT.limit_chord_mm if hole.chords else 0.005
    return tuple(dict.fromkeys((*_holes_of_screws(hole.width_mm, slack), *_seats(hole.width_mm, slack))))


@lru_cache(maxsize=1)
def _sizes() -> tuple[tuple[float, str], ...]:
    """Return tap drills and clearance holes of usual screws with their names."""
    usual = {f"M{d:g}" for d in USUAL_MM} | set(USUAL_IN)
    threads = [t for t in all_threads() if t.screw in usual and t.series != "fine"]
    out = [(t.drill_mm, f"the tap drill of {t.name}") for t in threads]
    for hole in all_clearances():
        if hole.screw in usual:
            out += [(hole.series(s), f"the {s} clearance hole of {hole.screw}") for s in ("fine", "medium", "coarse")]
    return tuple(out)


def _holes_of_screws(diameter_mm: float, slack_mm: float) -> Iterator[str]:
    return (name for size, name in _sizes() if abs(size - diameter_mm) <= slack_mm)


def _seats(diameter_mm: float, slack_mm: float) -> Iterator[str]:
    if diameter_mm < SEATS_FROM_MM:
        return iter(())
    found = [b for b in all_bearings() if abs(b.outside_mm - diameter_mm) <= slack_mm]
    if not found:
        return iter(())
    names = " or ".join(b.name for b in found[:3])
    return iter((f"the outside of a bearing {names}",))


def _nuts(flats_mm: float) -> Iterator[str]:
    return (f"across flats of a nut {n.name}" for n in all_nuts() if -0.01 <= flats_mm - n.flats_mm <= 0.5)


def nominal_of(diameter_mm: float, slack_mm: float = 0.005) -> str | None:
    """Return the screw or round size that a diameter is the bare nominal of (``M6``, ``1/4``), else None."""
    if diameter_mm > NOMINAL_TO_MM + slack_mm:
        return None
    metric = next((d for d in USUAL_MM if abs(d - diameter_mm) <= slack_mm), None)
    if metric is not None:
        return f"M{metric:g}"
    return next((name for name, size in INCH_NOMINALS_MM.items() if abs(size - diameter_mm) <= slack_mm), None)


def is_unclear(hole: Hole) -> bool:
    """Tell whether a round hole has a bare nominal size that is neither thread nor clearance of a usual screw."""
    if hole.shape is not HoleShape.CIRCLE:
        return False
    slack = DEFAULT.limit_chord_mm if hole.chords else 0.005
    return nominal_of(hole.width_mm, slack) is not None and not any(_holes_of_screws(hole.width_mm, slack))
