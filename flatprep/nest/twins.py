"""Parts of one outline, however they are drawn, are one kind of piece: the search learns each pair of kinds once."""

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np
import shapely
from shapely.geometry import Polygon

from flatprep.geom.bulge import Similarity
from flatprep.geom.outward import outside_points
from flatprep.nest.prepare import CHORD_MM, Grown
from flatprep.nest.problem import Item
from flatprep.nest.shapes import Place

SAME_MM = 0.02
"""Outlines that lie this near to each other all around are one."""
HAIR_MM = 1e-9
"""Outlines this near are the same drawing."""
MOST_TURNS = 24
"""Turns at which two outlines are laid on each other, at most."""


class Owner(NamedTuple):
    """Whose pieces a kind stands for.

    Attributes
    ----------
    item : Item
    grown : Grown
        Its outline, about its own middle.
    pieces : int
        Its pieces among those of the kind.
    onto : Similarity
        Turn and move that bring its outline onto that of the kind.
    """

    item: Item
    grown: Grown
    pieces: int
    onto: Similarity

    def motion(self, place: Place) -> Similarity:
        """Motion of a point of the item's drawing where the kind lies at a place."""
        kind = Similarity(turn_deg=place.turn_deg, dx=place.x, dy=place.y, mirrored=place.mirrored)
        turn = place.turn_deg + (-self.onto.turn_deg if place.mirrored else self.onto.turn_deg)
        about = Similarity(turn_deg=turn, mirrored=place.mirrored)
        at = kind.points(np.array([[self.onto.dx, self.onto.dy]])) - about.points(np.array([self.grown.centre]))
        return Similarity(turn_deg=turn, dx=float(at[0, 0]), dy=float(at[0, 1]), mirrored=place.mirrored)


class Kind(NamedTuple):
    """An outline that holds those of all its owners, in states that all of them may have.

    Attributes
    ----------
    outline : Polygon
        The first owner's part about the middle of its grown outline.
    grown : Grown
    states : tuple of bool
    owners : tuple of Owner
    """

    outline: Polygon
    grown: Grown
    states: tuple[bool, ...]
    owners: tuple[Owner, ...]

    @property
    def pieces(self) -> int:
        """Pieces of all owners."""
        return sum(o.pieces for o in self.owners)


def kinds_of(pieces: Sequence[tuple[Item, Grown, int, tuple[bool, ...]]], room_mm: float) -> list[Kind]:
    """Kinds of pieces, those of one outline together.

    Parameters
    ----------
    pieces
        Item, grown outline, count and mirror states.
    room_mm
        Parts of a diameter near this or above stay apart: they may just fit, and a common outline is a little larger.
    """
    found: list[Kind] = []
    for item, grown, count, states in pieces:
        mine = Kind(_outline(item, grown), grown, states, (Owner(item, grown, count, Similarity()),))
        apart = not _turns_freely(item) or 2.0 * float(np.hypot(*grown.outer.T).max()) + 2.0 * SAME_MM > room_mm
        for number, kind in enumerate([] if apart else found):
            if (one := _together(kind, mine)) is not None:
                found[number] = one
                break
        else:
            found.append(mine)
    return found


def _outline(item: Item, grown: Grown) -> Polygon:
    """Return a part's own outline, about the middle of its grown one."""
    outer, *holes = (outside_points(c.xyb, CHORD_MM) - np.array(grown.centre) for c in item.part.contours)
    return Polygon(outer, holes)


def _turns_freely(item: Item) -> bool:
    return item.turns_deg is None and item.grain is None and not item.bends_deg


def _together(kind: Kind, other: Kind) -> Kind | None:
    """Kind of both, None where they differ."""
    first, mine = kind.owners[0], other.owners[0]
    if kind.states != other.states or not _turns_freely(first.item):
        return None
    laid = turn_onto(kind.outline, other.outline)
    if laid is None:
        return None
    onto, off_mm = laid
    grown = kind.grown if off_mm <= HAIR_MM else _wider(first.grown)
    return Kind(kind.outline, grown, kind.states, (*kind.owners, mine._replace(onto=onto)))


def turn_onto(one: Polygon, other: Polygon) -> tuple[Similarity, float] | None:
    """Lay an outline on another that is the same within `SAME_MM`.

    Returns
    -------
    (Similarity, float) or None
        Turn and move of the other one, and how far they then lie apart at the most, mm.

    Notes
    -----
    A turn brings the corner that is farthest from the middle onto one that is as far; the middles lie on each other.
    """
    if len(one.interiors) != len(other.interiors) or abs(one.area - other.area) > SAME_MM * one.length:
        return None
    middle, mine = (np.array(p.centroid.coords[0]) for p in (one, other))
    arms, own = np.asarray(one.exterior.coords)[:-1] - middle, np.asarray(other.exterior.coords)[:-1] - mine
    reach, far = np.hypot(*arms.T), np.hypot(*own.T)
    first = own[int(np.argmax(far))]
    for arm in arms[np.abs(reach - far.max()) <= SAME_MM][:MOST_TURNS]:
        angle = float(np.degrees(np.arctan2(arm[1], arm[0]) - np.arctan2(first[1], first[0]))) % 360.0
        shift = middle - Similarity(turn_deg=angle).points(mine[None])[0]
        onto = Similarity(turn_deg=angle, dx=float(shift[0]), dy=float(shift[1]))
        off = float(shapely.hausdorff_distance(one, shapely.transform(other, onto.points)))
        if off <= SAME_MM:
            return onto, off
    return None


def _wider(grown: Grown) -> Grown:
    """Return an outline with `SAME_MM` more around."""
    whole = shapely.orient_polygons(Polygon(grown.outer, grown.holes).buffer(SAME_MM, join_style="mitre"))
    outer, *holes = (np.ascontiguousarray(np.asarray(r.coords)[:-1]) for r in (whole.exterior, *whole.interiors))
    return Grown(outer, tuple(holes), grown.centre)
