"""Marks and bend lines given to the part they lie on."""

from collections.abc import Sequence
from dataclasses import dataclass, replace

import shapely
from shapely import STRtree

from flatprep.geom.bulge import points_along
from flatprep.geom.polygons import polygon
from flatprep.model.drawing import Curve, Fault, Part, Role

_REACH_MM = 1.0
"""A bend line may stop at, or run a little past, the part's edge."""


@dataclass(frozen=True, slots=True)
class Assigned:
    """Parts with their marks and bends, and what belongs to no part."""

    parts: tuple[Part, ...]
    faults: tuple[Fault, ...]


def assign(parts: Sequence[Part], others: Sequence[tuple[Curve, Role]]) -> Assigned:
    """Give every mark and bend line to the part that its middle lies on."""
    if not others or not parts:
        return Assigned(tuple(parts), ())
    bodies = [polygon(p.outer.xyb, (), chord_mm=0.05) for p in parts]
    lines = [points_along(c.xyb, closed=c.closed, chord_mm=0.05) for c, _ in others]
    middles = [shapely.linestrings(p).interpolate(0.5, normalized=True) for p in lines]
    mark, body = STRtree(bodies).query(middles, predicate="dwithin", distance=_REACH_MM)
    home: dict[int, int] = {}
    for m, b in zip(mark.tolist(), body.tolist(), strict=True):
        if m not in home or parts[b].outer.area_mm2 < parts[home[m]].outer.area_mm2:
            home[m] = b
    given: list[Part] = []
    for index, part in enumerate(parts):
        mine = [others[m] for m, b in sorted(home.items()) if b == index]
        marks = tuple(c for c, role in mine if role is Role.MARK)
        bends = tuple(c for c, role in mine if role is Role.BEND)
        given.append(replace(part, marks=marks, bends=bends) if mine else part)
    stray = len(others) - len(home)
    faults = (
        [Fault("unsupported-entity", detail=f"{stray} marks or bend lines lie on no part: left out")] if stray else []
    )
    return Assigned(tuple(given), tuple(faults))
