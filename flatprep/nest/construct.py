"""A first full layout: large pieces first, each where it reaches least far along the sheet, at its best turn.

The classical bottom-left rule with filling of holes, on exact geometry: places along a row come from
`flatprep.nest.trapezoids`, so pieces touch and find windows and bays; rows are spread evenly, with those added at
which a piece just lies on or under another.
"""

from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass, field
from math import inf

import numpy as np
import shapely
from shapely.geometry import Polygon

from flatprep.geom.bulge import Floats, Similarity
from flatprep.nest.prepare import clipped, region_of, simple_ring
from flatprep.nest.shapes import Container, Place, Shape
from flatprep.nest.slide import Bed, best_row, rows_for, settle
from flatprep.nest.trapezoids import Cuts, cut_up

NO_ROWS = np.zeros(0)
Variants = tuple[int, ...]
"""Numbers of variants of one shape."""
SAME_SHARE = 1e-6
MOST_TURNS = 8
"""Turns tried for one piece."""
PLAIN_CORNERS = 24
COARSE_SHARE = 0.01
"""Rings of more corners are simplified outward by this share of the side of a square of their area."""


@dataclass(frozen=True, slots=True)
class Bin:
    """A container and the turns each shape may have in it: None for any, empty where it may not lie there.

    Attributes
    ----------
    blocked : tuple of ndarray, shape (m, 2)
        Rings (even-odd) of what already lies there, windows included.
    """

    container: Container
    turns: tuple[tuple[float, ...] | None, ...]
    blocked: tuple[Floats, ...] = ()


@dataclass(frozen=True, slots=True)
class Variant:
    """A shape mirrored or not, at one turn."""

    shape: int
    turn_deg: float
    mirrored: bool


@dataclass(frozen=True, slots=True)
class Laid:
    """What the rule has laid, and how many pieces of each shape found no place."""

    places: tuple[Place, ...]
    left_out: tuple[int, ...]


@dataclass(slots=True)
class _Sheet:
    """A container being filled."""

    bed: Bed
    variants: dict[int, Variants]
    free_mm2: float
    rows: dict[int, Floats] = field(default_factory=dict)
    since: dict[int, Floats] = field(default_factory=dict)
    seen: dict[int, int] = field(default_factory=dict)
    full_for: set[int] = field(default_factory=set)


class Layer:
    """Lays shapes in bins, again and again in other orders: outlines are cut up once.

    Parameters
    ----------
    shapes
        Grown outlines.
    bins
        Kinds of container.
    coarse
        Take rings of many corners a little larger than they are: far quicker, a little wider apart.
    """

    def __init__(self, shapes: Sequence[Shape], bins: Sequence[Bin], *, coarse: bool = True) -> None:
        self.shapes = tuple(shapes)
        self.bins = tuple(bins)
        self.variants, self._of_bin = _variants(self.shapes, self.bins)
        walls = [[*_wall(b.container), *b.blocked] for b in self.bins]
        moves = [Similarity(turn_deg=v.turn_deg, mirrored=v.mirrored) for v in self.variants]
        outlines = [(coarse_rings if coarse else fine_rings)(s) for s in self.shapes]
        rings = [
            [move.points(ring) for ring in outlines[v.shape]] for v, move in zip(self.variants, moves, strict=True)
        ]
        self._area = [float(Polygon(s.outer, s.holes).area) for s in self.shapes]
        self._room = [float(region_of(b.container).area) for b in self.bins]
        self._wall_of: list[int | None] = []
        for wall in walls:
            self._wall_of.append(len(rings) if wall else None)
            if wall:
                rings.append(wall)
        self._cuts: Cuts = cut_up(rings)

    def lay(
        self,
        order: Iterable[int],
        supply: Sequence[int],
        stop: Callable[[], bool] = lambda: False,
        first: Callable[[Variants], Variants] | None = None,
    ) -> Laid:
        """Lay pieces in turn, each on the first sheet that has room.

        Parameters
        ----------
        order
            Index of the shape of each piece.
        supply
            Kind of each sheet at hand, preferred ones first.
        stop
            Asked after each piece; pieces not yet laid are then left out.
        first
            Of the numbers of a piece's variants, those to be tried before the others; all are equal by default.

        Returns
        -------
        Laid
            Places whose container is the index into `supply`.
        """
        sheets: list[_Sheet] = []
        places: list[Place] = []
        left_out = [0] * len(self.shapes)
        stopped = False
        for shape in order:
            stopped = stopped or stop()
            place = None if stopped else self._on_some_sheet(shape, supply, sheets, first)
            if place is None:
                left_out[shape] += 1
            else:
                places.append(place)
        return Laid(tuple(places), tuple(left_out))

    def fits_alone(self, shape: int, kind: int) -> bool:
        """Tell whether a piece goes on an empty sheet of that kind."""
        sheet = self._empty(kind, 1)
        return self._lay_one(sheet.variants.get(shape, ()), sheet) is not None

    def _on_some_sheet(
        self, shape: int, supply: Sequence[int], sheets: list[_Sheet], first: Callable[[Variants], Variants] | None
    ) -> Place | None:
        for number, kind in enumerate(supply):
            if number == len(sheets):
                sheets.append(self._empty(kind, sum(s.count for s in self.shapes)))
            sheet = sheets[number]
            if shape in sheet.full_for or self._area[shape] > sheet.free_mm2 * (1.0 + SAME_SHARE):
                continue
            variants = sheet.variants.get(shape, ())
            found = self._lay_one(first(variants), sheet) if first else None
            found = found or self._lay_one(variants, sheet)
            if found is not None:
                variant, x, y = found
                sheet.free_mm2 -= self._area[shape]
                v = self.variants[variant]
                return Place(shape, number, v.turn_deg, v.mirrored, x, y)
            sheet.full_for.add(shape)
        return None

    def _empty(self, kind: int, pieces: int) -> _Sheet:
        outer = self.bins[kind].container.outer
        room = np.concatenate([outer.min(axis=0), outer.max(axis=0)])
        who, at = np.zeros(pieces + 1, dtype=np.int64), np.zeros((pieces + 1, 2))
        bed = Bed(who, at, np.zeros(1, dtype=np.int64), room)
        wall = self._wall_of[kind]
        if wall is not None:
            who[0], bed.laid[0] = wall, 1
        return _Sheet(bed, self._of_bin[kind], self._room[kind])

    def _lay_one(self, variants: Variants, sheet: _Sheet) -> tuple[int, float, float] | None:
        best: tuple[int, float, float] | None = None
        bed, reach = sheet.bed, inf
        for v in variants:
            rows, since = self._rows(v, sheet)
            x, row = best_row(self._cuts, bed, v, rows, since, reach)
            if row >= 0:
                best = (v, x, float(rows[row]))
                reach = x + float(self._cuts.box[v, 2])
        if best is None:
            return None
        v, x, y = best
        place = np.array([x, y])
        settle(self._cuts, bed, v, place)
        n = int(bed.laid[0])
        bed.who[n], bed.at[n], bed.laid[0] = v, place, n + 1
        return v, float(place[0]), float(place[1])

    def _rows(self, v: int, sheet: _Sheet) -> tuple[Floats, Floats]:
        """Rows for a variant, those of pieces laid since it was last asked for added."""
        known = (sheet.rows.get(v, NO_ROWS), sheet.since.get(v, NO_ROWS), sheet.seen.get(v, 0))
        rows, since = rows_for(self._cuts, sheet.bed, v, *known)
        sheet.rows[v], sheet.since[v], sheet.seen[v] = rows, since, int(sheet.bed.laid[0])
        return rows, since


def _variants(shapes: Sequence[Shape], bins: Sequence[Bin]) -> tuple[list[Variant], list[dict[int, Variants]]]:
    """Every variant that some bin allows, and for each bin those of each shape."""
    index: dict[Variant, int] = {}
    of_bin: list[dict[int, Variants]] = []
    for kind in bins:
        mine: dict[int, Variants] = {}
        for s, shape in enumerate(shapes):
            turns = few_turns(shape, kind.turns[s])
            wanted = [Variant(s, turn, flip) for flip in shape.mirror for turn in turns]
            mine[s] = tuple(index.setdefault(v, len(index)) for v in wanted)
        of_bin.append(mine)
    return list(index), of_bin


def fine_rings(shape: Shape) -> list[Floats]:
    """Rings of a shape as they are."""
    return [shape.outer, *shape.holes]


def coarse_rings(shape: Shape) -> list[Floats]:
    """Rings of a shape, those of many corners simplified so that the material only grows, within its own box."""
    outer = shape.outer
    tolerance = COARSE_SHARE * float(np.sqrt(Polygon(outer).area))
    if len(outer) > PLAIN_CORNERS:
        outer = clipped(simple_ring(outer, tolerance, 1.0), [*outer.min(axis=0), *outer.max(axis=0)])
    holes = [simple_ring(h, tolerance, -1.0) if len(h) > PLAIN_CORNERS else h for h in shape.holes]
    return [outer, *holes]


def few_turns(shape: Shape, turns_deg: tuple[float, ...] | None) -> tuple[float, ...]:
    """Return turns worth trying: those listed; for a piece that turns freely the quarter turns, of its box."""
    if turns_deg is not None and len(turns_deg) <= MOST_TURNS:
        return turns_deg
    lean = least_box_turn(shape.outer)
    quarters = [0.0, 90.0, 180.0, 270.0]
    if turns_deg is None:
        return tuple(dict.fromkeys(round((q + d) % 360.0, 9) for d in (0.0, lean) for q in quarters))
    wanted = [(q + d) % 360.0 for d in (0.0, lean) for q in quarters]
    near = [min(turns_deg, key=lambda t: abs((t - w + 180.0) % 360.0 - 180.0)) for w in wanted]
    return tuple(dict.fromkeys(near))


def least_box_turn(ring: Floats) -> float:
    """Turn in degrees, 0 to 90, that gives a ring the box of least area: one edge of its hull lies level."""
    hull = np.asarray(shapely.MultiPoint(ring).convex_hull.boundary.coords)
    along = np.diff(hull, axis=0)
    angles = np.unique(np.round(np.degrees(-np.arctan2(along[:, 1], along[:, 0])) % 90.0, 9))
    turned = [Similarity(turn_deg=float(a)).points(hull) for a in angles]
    areas = [float(np.prod(np.ptp(t, axis=0))) for t in turned]
    return float(angles[int(np.argmin(areas))])


def _wall(container: Container) -> list[Floats]:
    """Rings of what a container's box holds beside the container: nothing for a plain rectangle."""
    rest = shapely.box(*Polygon(container.outer).bounds).difference(region_of(container))
    pieces = [p for p in getattr(rest, "geoms", [rest]) if isinstance(p, Polygon) and p.area > 1e-9]
    return [np.asarray(r.coords)[:-1] for p in pieces for r in (p.exterior, *p.interiors)]
