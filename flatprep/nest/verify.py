"""Check a layout on the true shapes, apart from the engine that made it.

Nothing here is shared with the search: every part is taken as drawn, its arcs circumscribed by polygons that hold
it wholly, so a distance measured is never more than the true one. Where that is not enough to tell, the polygons of
the pair are made finer, down to the last of `CHORDS_MM`.
"""

from collections import Counter, defaultdict
from collections.abc import Collection, Iterator, Sequence
from dataclasses import dataclass
from functools import lru_cache
from math import isfinite

import numpy as np
import shapely
from shapely import STRtree
from shapely.geometry import Polygon
from shapely.geometry.base import BaseGeometry

from flatprep.geom import bulge
from flatprep.geom.bulge import Floats
from flatprep.geom.outward import outside_points
from flatprep.model.drawing import Part
from flatprep.model.layout import Layout, Placement, SheetLayout
from flatprep.nest.across import grain_deg, off_grain_deg
from flatprep.nest.allowed import SAME_THICKNESS_MM, same_turn, turns_on
from flatprep.nest.objective import is_open
from flatprep.nest.problem import Item, NestAsk, StockSheet
from flatprep.practice.bends import ALONG_DEG

SLACK_MM = 1e-6
"""What a gap may fall short, and an overlap be deep, for rounding."""
CHORDS_MM = (0.01, 1e-4, 2e-7)
"""Chord errors tried one after the other."""
SLACK_DEG = 1e-6
SAME_SHARE = 1e-9

SheetKey = tuple[str, float, float, tuple[tuple[str, float, bool, float, float], ...]]


@dataclass(frozen=True, slots=True)
class LayoutFault:
    """Something wrong with a layout.

    Attributes
    ----------
    kind : str
        ``overlap``, ``spacing``, ``margin``, ``keep-out``, ``window``, ``turn``, ``grain``, ``flip``, ``count``,
        ``stock``, ``border``, ``figure``.
    message : str
    sheet : int or None
        From 1.
    parts : tuple of str
    measured_mm, limit_mm : float or None
    """

    kind: str
    message: str
    sheet: int | None = None
    parts: tuple[str, ...] = ()
    measured_mm: float | None = None
    limit_mm: float | None = None


def sheet_key(sheet: SheetLayout) -> SheetKey:
    """All that a sheet's soundness depends on, but for the job: stock, pieces and where they lie, stated figures."""
    spots = tuple((p.part, p.turn_deg, p.mirrored, p.dx, p.dy) for p in sheet.placements)
    return sheet.stock, sheet.used_length_mm, sheet.utilisation, spots


def verify(layout: Layout, ask: NestAsk, sound: Collection[SheetKey] = frozenset()) -> tuple[LayoutFault, ...]:
    """Return everything that is wrong with a layout: overlaps, gaps, margins, turns, counts, stock; empty if sound.

    Parameters
    ----------
    sound
        Keys of sheets that were verified before, for the same job: their pieces are not looked at again.
    """
    items = {item.name: item for item in ask.items}
    faults = [*_count_faults(layout, ask), *_stock_faults(layout, ask)]
    stock = {s.name: s for s in ask.stock}
    for number, sheet in enumerate(layout.sheets, start=1):
        strange = [p.part for p in sheet.placements if p.part not in items]
        if sheet.stock not in stock or strange:
            what = f"part {strange[0]}" if strange else f"stock {sheet.stock}"
            faults.append(LayoutFault("count", f"sheet {number}: the job has no {what}", number))
            continue
        faults += _border_faults(number, sheet, stock[sheet.stock])
        if sheet_key(sheet) not in sound:
            faults += _sheet_faults(number, sheet, stock[sheet.stock], items, ask)
    return tuple(faults)


def _sheet_faults(
    number: int, sheet: SheetLayout, stock: StockSheet, items: dict[str, Item], ask: NestAsk
) -> Iterator[LayoutFault]:
    for placement in sheet.placements:
        yield from _piece_faults(number, placement, items[placement.part], stock)
    if not all(isfinite(v) for p in sheet.placements for v in (p.turn_deg, p.dx, p.dy)):
        yield LayoutFault("figure", f"sheet {number}: a placement that is no finite number", number)
        return
    laid = _Laid(sheet, items)
    if stock.margins_mm is None:
        yield from laid.margin_faults(number, ask.margin_mm)
    else:
        yield from laid.side_faults(number, stock.margins_mm)
    yield from laid.keep_out_faults(number, stock.keep_out)
    yield from laid.gap_faults(number, ask.spacing_mm)
    if not ask.windows:
        yield from laid.window_faults(number)
    yield from laid.figure_faults(number, stock.margins(ask.margin_mm)[1])


class _Laid:
    """The pieces of one sheet as polygons, as fine as a question needs."""

    def __init__(self, sheet: SheetLayout, items: dict[str, Item]) -> None:
        self.sheet = sheet
        self.parts = [items[p.part].part for p in sheet.placements]
        self.stock = Polygon(sheet.outline, list(sheet.holes))
        self.bodies = [self._body(k, CHORDS_MM[0]) for k in range(len(self.parts))]
        self.tree = STRtree(self.bodies)

    def _body(self, k: int, chord_mm: float) -> Polygon:
        return body(self.parts[k], self.sheet.placements[k], chord_mm)

    def _names(self, *pieces: int) -> tuple[str, ...]:
        return tuple(f"{p.part} {p.copy}" for p in (self.sheet.placements[k] for k in pieces))

    def margin_faults(self, number: int, margin_mm: float) -> Iterator[LayoutFault]:
        """Pieces too near the border, or beyond it."""
        for k, coarse in enumerate(self.bodies):
            gap, chord = _inside_gap(self.stock, coarse), 0
            while gap < margin_mm - SLACK_MM and chord + 1 < len(CHORDS_MM):
                chord += 1
                gap = _inside_gap(self.stock, self._body(k, CHORDS_MM[chord]))
            if gap < margin_mm - SLACK_MM:
                who = self._names(k)
                where = "reaches beyond the border" if gap < 0.0 else f"is {gap:.3f} mm from the border"
                text = f"sheet {number}: {who[0]} {where}, the margin is {margin_mm:g} mm"
                yield LayoutFault("margin", text, number, who, gap, margin_mm)

    def side_faults(self, number: int, margins_mm: tuple[float, float, float, float]) -> Iterator[LayoutFault]:
        """Pieces nearer to a side of a rectangle than the margin of that side, on the exact arcs."""
        x0, y0, x1, y1 = self.stock.bounds
        for k, (part, p) in enumerate(zip(self.parts, self.sheet.placements, strict=True)):
            left, low, right, high = bulge.bounds(p.motion.polyline(part.outer.xyb), closed=True)
            gaps = (left - x0, x1 - right, low - y0, y1 - high)
            for side, gap, margin in zip(("left", "right", "lower", "upper"), gaps, margins_mm, strict=True):
                if gap < margin - SLACK_MM:
                    who = self._names(k)
                    text = f"sheet {number}: {who[0]} is {gap:.3f} mm from the {side} side, the margin is {margin:g} mm"
                    yield LayoutFault("margin", text, number, who, gap, margin)

    def keep_out_faults(self, number: int, keep_out: Sequence[tuple[float, ...]]) -> Iterator[LayoutFault]:
        """Pieces that reach into a box or a circle where nothing may lie."""
        for k, piece in enumerate(self.bodies):
            for one in keep_out:
                if _reaches_into(piece, one) and _reaches_into(self._body(k, CHORDS_MM[-1]), one):
                    who = self._names(k)
                    text = f"sheet {number}: {who[0]} lies where nothing may lie ({one[0]:g}, {one[1]:g})"
                    yield LayoutFault("keep-out", text, number, who)

    def gap_faults(self, number: int, spacing_mm: float) -> Iterator[LayoutFault]:
        """Pairs that overlap or are nearer than the spacing."""
        if not self.bodies:
            return
        pairs = self.tree.query(self.bodies, predicate="dwithin", distance=spacing_mm).T
        for i, j in pairs[pairs[:, 0] < pairs[:, 1]].tolist():
            gap, chord = clearance(self.bodies[i], self.bodies[j]), 0
            while gap < spacing_mm - SLACK_MM and chord + 1 < len(CHORDS_MM):
                chord += 1
                near = self._near(i, j, CHORDS_MM[chord], spacing_mm)
                gap = clearance(*near)
            if gap < spacing_mm - SLACK_MM:
                who = self._names(i, j)
                kind = "overlap" if gap < 0.0 else "spacing"
                how = "overlap" if gap < 0.0 else f"are {gap:.3f} mm apart, the spacing is {spacing_mm:g} mm"
                yield LayoutFault(kind, f"sheet {number}: {who[0]} and {who[1]} {how}", number, who, gap, spacing_mm)

    def _near(self, i: int, j: int, chord_mm: float, spacing_mm: float) -> tuple[BaseGeometry, BaseGeometry]:
        """Two pieces finely, each only where the other's box is near: fine polygons have very many corners."""
        reach = spacing_mm + 1.0
        boxes = [shapely.box(*self.bodies[k].bounds).buffer(reach, join_style="mitre") for k in (i, j)]
        both = boxes[0].intersection(boxes[1])
        return self._body(i, chord_mm).intersection(both), self._body(j, chord_mm).intersection(both)

    def window_faults(self, number: int) -> Iterator[LayoutFault]:
        """Pieces that lie in the window of another where windows are not to be used."""
        solid = [Polygon(b.exterior) for b in self.bodies]
        points = [b.representative_point() for b in self.bodies]
        for i, j in STRtree(points).query(solid, predicate="contains").T.tolist():
            if i != j:
                who = self._names(j, i)
                yield LayoutFault("window", f"sheet {number}: {who[0]} lies in a window of {who[1]}", number, who)

    def figure_faults(self, number: int, margin_mm: float) -> Iterator[LayoutFault]:
        """Stated figures that are not so."""
        share = sum(p.area_mm2 for p in self.parts) / self.stock.area
        if abs(share - self.sheet.utilisation) > SAME_SHARE * max(1.0, share):
            text = f"sheet {number}: utilisation stated {self.sheet.utilisation:.6f}, it is {share:.6f}"
            yield LayoutFault("figure", text, number)
        if self.parts:
            x0, _, x1, _ = self.stock.bounds
            motions = zip(self.parts, self.sheet.placements, strict=True)
            reach = max(bulge.bounds(p.motion.polyline(part.outer.xyb), closed=True)[2] for part, p in motions)
            used = min(reach + margin_mm, x1) - x0
            if abs(used - self.sheet.used_length_mm) > SLACK_MM:
                text = f"sheet {number}: used length stated {self.sheet.used_length_mm:.3f} mm, it is {used:.3f} mm"
                yield LayoutFault("figure", text, number, (), self.sheet.used_length_mm, used)


def body(part: Part, placement: Placement, chord_mm: float) -> Polygon:
    """Polygon that holds the placed part's material wholly and no more than `chord_mm` beside it."""
    moved = [placement.motion.points(ring) for ring in _rings(part, chord_mm)]
    shape = Polygon(moved[0], moved[1:])
    return shape if shape.is_valid else shape.buffer(0.0)


@lru_cache(maxsize=4096)
def _rings(part: Part, chord_mm: float) -> tuple[Floats, ...]:
    """Rings of a part where it is drawn: pieces of it are looked at again and again."""
    return tuple(outside_points(c.xyb, chord_mm) for c in part.contours)


def clearance(a: BaseGeometry, b: BaseGeometry) -> float:
    """Distance of two regions, mm; minus a depth where they overlap by more than `SLACK_MM`."""
    gap = float(a.distance(b))
    if gap > 0.0:
        return gap
    common = a.intersection(b)
    return -SLACK_MM * 2.0 if not common.buffer(-SLACK_MM / 2.0).is_empty else 0.0


def _reaches_into(piece: BaseGeometry, keep_out: tuple[float, ...]) -> bool:
    """Tell whether a piece lies in a box (x0, y0, x1, y1) or a circle (x, y, radius) in part."""
    if len(keep_out) == 4:
        return clearance(piece, shapely.box(*keep_out)) < 0.0
    x, y, radius = keep_out
    return float(piece.distance(shapely.Point(x, y))) < radius - SLACK_MM


def _inside_gap(stock: Polygon, piece: Polygon) -> float:
    """Distance of a piece from the border of the region it lies in, mm; negative where it reaches out of it."""
    if stock.contains_properly(piece):
        return float(stock.boundary.distance(piece))
    outside = piece.difference(stock)
    deep = not outside.buffer(-SLACK_MM / 2.0).is_empty
    return -SLACK_MM * 2.0 if deep or not stock.intersects(piece) else 0.0


def _piece_faults(number: int, p: Placement, item: Item, stock: StockSheet) -> Iterator[LayoutFault]:
    who = (f"{p.part} {p.copy}",)
    turns = item.turns_deg
    if turns is not None and not any(same_turn(p.turn_deg, t) for t in turns):
        allowed = ", ".join(f"{t:g}" for t in turns)
        yield LayoutFault(
            "turn", f"sheet {number}: {who[0]} is turned by {p.turn_deg:g}, allowed {allowed}", number, who
        )
    along = turns_on(item, stock)
    if item.grain is not None and not any(same_turn(p.turn_deg, t) for t in along or ()):
        yield LayoutFault("grain", f"sheet {number}: {who[0]} does not lie along the grain", number, who)
    if item.must_cross and item.minds_grain and stock.grain is not None:
        off = off_grain_deg(item.bends_deg, p.turn_deg, grain_deg(stock.grain), mirrored=p.mirrored)
        if off < ALONG_DEG - SLACK_DEG:
            text = f"sheet {number}: {who[0]} has a bend {off:.1f} degrees off the grain, along which it cracks"
            yield LayoutFault("grain", text, number, who)
    if p.mirrored and not item.may_flip and item.quantity_opposite == 0:
        yield LayoutFault(
            "flip", f"sheet {number}: {who[0]} is turned over, which its entry does not allow", number, who
        )
    if item.material != stock.material or abs(item.thickness_mm - stock.thickness_mm) > SAME_THICKNESS_MM:
        text = f"sheet {number}: {who[0]} is of {item.material} {item.thickness_mm:g} mm, the sheet is not"
        yield LayoutFault("stock", text, number, who)


def _count_faults(layout: Layout, ask: NestAsk) -> Iterator[LayoutFault]:
    placed: dict[str, Counter[bool]] = defaultdict(Counter)
    for sheet in layout.sheets:
        for p in sheet.placements:
            placed[p.part][p.mirrored] += 1
    left = Counter({name: sum(u.count for u in layout.unplaced if u.part == name) for name in placed | _names(layout)})
    for item in ask.items:
        asked = item.quantity + item.quantity_opposite
        have = placed[item.name]
        if sum(have.values()) + left[item.name] != asked:
            text = f"{item.name}: {asked} asked, {sum(have.values())} placed, {left[item.name]} listed as unplaced"
            yield LayoutFault("count", text, None, (item.name,))
        if not item.may_flip and (have[False] > item.quantity or have[True] > item.quantity_opposite):
            text = (
                f"{item.name}: {have[False]} as drawn and {have[True]} turned over, "
                f"asked {item.quantity} and {item.quantity_opposite}"
            )
            yield LayoutFault("count", text, None, (item.name,))


def _names(layout: Layout) -> dict[str, Counter[bool]]:
    return {u.part: Counter() for u in layout.unplaced}


def _stock_faults(layout: Layout, ask: NestAsk) -> Iterator[LayoutFault]:
    used = Counter(sheet.stock for sheet in layout.sheets)
    for stock in ask.stock:
        if stock.count is not None and used[stock.name] > stock.count:
            text = f"{stock.name}: {used[stock.name]} sheets used, {stock.count} in stock"
            yield LayoutFault("stock", text)


def _border_faults(number: int, sheet: SheetLayout, stock: StockSheet) -> Iterator[LayoutFault]:
    if stock.outline is not None:
        same = _same_points(sheet.outline, stock.outline)
    else:
        length = sheet.used_length_mm if is_open(stock) else stock.length_mm or 0.0
        wanted = np.array([[0.0, 0.0], [length, 0.0], [length, stock.width_mm], [0.0, stock.width_mm]])
        same = _same_points(sheet.outline, wanted)
    holes: Sequence[bool] = [_same_points(a, b) for a, b in zip(sheet.holes, stock.holes, strict=False)]
    if not same or len(sheet.holes) != len(stock.holes) or not all(holes):
        yield LayoutFault("border", f"sheet {number}: its border is not that of stock {stock.name}", number)


def _same_points(a: bulge.Floats, b: bulge.Floats) -> bool:
    return a.shape == b.shape and bool(np.allclose(a, b, rtol=0.0, atol=SLACK_MM))
