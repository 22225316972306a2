"""Countersinks and counterbores: which, how deep, and what the sheet has left."""

import re
from collections.abc import Sequence
from dataclasses import dataclass
from math import radians, tan
from pathlib import Path

from flatprep.profile.hardware.clearance import find_clearance
from flatprep.profile.hardware.heads import find_counterbore, find_countersink
from flatprep.profile.hardware.names import tidy
from flatprep.profile.hardware.rules import section

_PLAIN_SINK = re.compile(r"[ØøD]?\s*(\d+(?:\.\d+)?)\s*(?:mm)?\s*(?:x|by|at)?\s*(60|75|82|90|100|110|120)\s*(?:°|deg)?")
_PLAIN_BORE = re.compile(r"[ØøD]?\s*(\d+(?:\.\d+)?)\s*(?:mm)?\s*(?:x|by|depth)\s*(\d+(?:\.\d+)?)\s*(?:mm)?(?:\s*deep)?")


def sink_depth_mm(sink_dia_mm: float, hole_dia_mm: float, angle_deg: float) -> float:
    """Return the depth of a countersink from the face: (sink - hole) / 2 / tan(angle / 2)."""
    return (sink_dia_mm - hole_dia_mm) / 2.0 / tan(radians(angle_deg) / 2.0)


@dataclass(frozen=True, slots=True)
class Sink:
    """A countersink or counterbore over a hole.

    Attributes
    ----------
    angle_deg : float or None
        None for a counterbore.
    screw : str
        What it is for; empty where it is given by its sizes.
    through_mm : float or None
        The screw's medium clearance hole; None where it is given by its sizes.
    hole_mm : float
        The hole below.
    """

    name: str
    dia_mm: float
    depth_mm: float
    angle_deg: float | None
    screw: str
    through_mm: float | None
    hole_mm: float
    note: str


def find_sink(
    kind: str, size: str, hole_mm: float | None, depth_mm: float | None = None, own: Sequence[Path] = ()
) -> Sink:
    """Return a ``countersink`` or ``counterbore`` by screw and standard, or by its sizes: ``11 x 90``, ``11 x 6.4``.

    Parameters
    ----------
    hole_mm
        The hole as drawn or as other work leaves it; a screw's clearance hole where it is smaller or None.

    Raises
    ------
    UnknownHardwareError
        With the nearest known names.
    """
    if kind == "countersink":
        return _countersink(size, hole_mm, own)
    return _counterbore(size, hole_mm, depth_mm, own)


def _countersink(size: str, hole_mm: float | None, own: Sequence[Path]) -> Sink:
    plain = _PLAIN_SINK.fullmatch(tidy(size))
    if plain:
        dia, angle, hole = float(plain[1]), float(plain[2]), hole_mm or 0.0
        return Sink(f"{dia:g} x {plain[2]}°", dia, sink_depth_mm(dia, hole, angle), angle, "", None, hole, "")
    found = find_countersink(size, own)
    through = find_clearance(found.screw, own).medium_mm
    hole = max(through, hole_mm or 0.0)
    depth = sink_depth_mm(found.sink_dia_mm, hole, found.angle_deg)
    note = f"head {found.head_dia_mm:.4g} mm sharp, sink by {found.sink_rule}"
    return Sink(found.name, found.sink_dia_mm, depth, found.angle_deg, found.screw, through, hole, note)


def _counterbore(size: str, hole_mm: float | None, depth_mm: float | None, own: Sequence[Path]) -> Sink:
    plain = _PLAIN_BORE.fullmatch(tidy(size))
    if plain:
        dia, depth = float(plain[1]), float(plain[2])
        return Sink(f"{dia:g} x {depth:g} deep", dia, depth, None, "", None, hole_mm or 0.0, "")
    found = find_counterbore(size, own)
    through = find_clearance(found.screw, own).medium_mm
    depth = depth_mm or found.depth_mm
    name, hole = f"{found.screw} ISO 4762", max(through, hole_mm or 0.0)
    return Sink(name, found.bore_mm, depth, None, found.screw, through, hole, f"head {found.head_height_mm:g} mm high")


@dataclass(frozen=True, slots=True)
class SinkRoom:
    """What a sheet offers a sink of a given depth.

    Attributes
    ----------
    depth_mm : float
    land_mm : float
        Cylindrical hole left under the sink; negative where the sink goes through.
    land_needed_mm : float
    """

    depth_mm: float
    land_mm: float
    land_needed_mm: float

    @property
    def through(self) -> bool:
        """Whether the sink leaves a knife edge or goes through."""
        return self.land_mm <= 1e-3

    @property
    def thin(self) -> bool:
        """Whether the land is under what the rules ask for."""
        return self.land_mm < self.land_needed_mm - 1e-3


def sink_room(depth_mm: float, thickness_mm: float, own: Sequence[Path] = ()) -> SinkRoom:
    """Return what a sheet has left under a countersink or counterbore."""
    rules = section("countersink", own)
    needed = max(rules["land"], rules["land_to_thickness"] * thickness_mm)
    return SinkRoom(depth_mm, thickness_mm - depth_mm, needed)
