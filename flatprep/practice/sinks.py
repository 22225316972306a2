"""Countersinks and counterbores: how deep, and what the sheet has left."""

from collections.abc import Sequence
from dataclasses import dataclass
from math import radians, tan
from pathlib import Path

from flatprep.profile.hardware.rules import section


def sink_depth_mm(sink_dia_mm: float, hole_dia_mm: float, angle_deg: float) -> float:
    """Return the depth of a countersink from the face: (sink - hole) / 2 / tan(angle / 2)."""
    return (sink_dia_mm - hole_dia_mm) / 2.0 / tan(radians(angle_deg) / 2.0)


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
