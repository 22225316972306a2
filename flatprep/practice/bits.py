"""Twist drills as they are taken from the drawer: metric ones by size, inch ones by number, letter or fraction."""

from dataclasses import dataclass

from flatprep.profile.hardware.clearance import Clearance
from flatprep.profile.hardware.drills import inch_drill, inch_drill_below
from flatprep.profile.hardware.threads import Thread


@dataclass(frozen=True, slots=True)
class Bit:
    """A drill.

    Attributes
    ----------
    diameter_mm : float
        The size that is aimed at; the drill itself is within a few hundredths of it.
    name : str
        As it is asked for: ``5.5 mm``, ``#7``, ``9/32``.
    """

    diameter_mm: float
    name: str


def bit_for(diameter_mm: float, *, inch: bool) -> Bit:
    """Return the drill of a size: metric, or the nearest number, letter or fractional drill."""
    return Bit(diameter_mm, inch_drill(diameter_mm)[1] if inch else f"{diameter_mm:.4g} mm")


def bit_below(diameter_mm: float, *, inch: bool) -> Bit:
    """Return the largest drill that is not above a size that metric drills are made in."""
    found = inch_drill_below(diameter_mm) if inch else None
    return Bit(*found) if found else Bit(diameter_mm, f"{diameter_mm:.4g} mm")


def tap_bit(thread: Thread, *, inch: bool) -> Bit:
    """Return the tap drill: its own, in an inch shop the nearest inch drill that stays inside the thread's limits.

    A metric shop gets the metric drill beside the inch one.
    """
    if thread.is_inch:
        named = thread.drill if inch else f"{thread.drill} ({thread.metric_drill_mm:g} mm)"
        return Bit(thread.drill_mm, named)
    size, name = inch_drill(thread.drill_mm)
    return Bit(size, name) if inch and thread.admits(size) else Bit(thread.drill_mm, thread.drill)


def clearance_bit(hole: Clearance, series: str, *, inch: bool) -> Bit:
    """Return the drill of a clearance hole: the table's own, or the nearest of the shop's."""
    own, size = hole.drill(series), hole.series(series)
    if own.endswith("mm"):
        return bit_for(size, inch=inch)
    return Bit(size, own if inch else f"{own} ({hole.metric_drill_mm(series):g} mm)")
