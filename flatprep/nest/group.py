"""One material and thickness: its parts as shapes, its stock as bins, and the way back from places to true parts."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from shapely.geometry import Polygon

from flatprep.geom.bulge import Similarity
from flatprep.model.layout import Unplaced
from flatprep.nest.allowed import hands, matches, turns_of, why_no_stock
from flatprep.nest.assemble import FilledSheet, Spot, spot
from flatprep.nest.construct import Bin
from flatprep.nest.keep import Supply, room_left
from flatprep.nest.objective import is_open
from flatprep.nest.prepare import Grown, container_of, grow
from flatprep.nest.problem import Item, NestAsk, StockSheet
from flatprep.nest.shapes import Place, Shape


@dataclass(frozen=True, slots=True)
class Group:
    """Parts of one material and thickness, and the stock they may lie on.

    Attributes
    ----------
    stock : tuple of StockSheet
        The kinds that the margin leaves something of; `bins` go with them.
    items : tuple of Item
    shapes : tuple of Shape
        One for each item and hand.
    owner : tuple of (Item, Grown)
        What each shape stands for.
    kept : tuple of tuple of Spot
        What already lies on each kind of stock.
    """

    stock: tuple[StockSheet, ...]
    bins: tuple[Bin, ...]
    shapes: tuple[Shape, ...]
    owner: tuple[tuple[Item, Grown], ...]
    kept: tuple[tuple[Spot, ...], ...]

    @property
    def pieces(self) -> int:
        """Pieces to lay."""
        return sum(s.count for s in self.shapes)

    def filled(self, places: Sequence[Place], supply: Sequence[int]) -> tuple[FilledSheet, ...]:
        """Sheets of `supply` with true parts on them, in its order."""
        spots: dict[int, list[Spot]] = {}
        for p in places:
            item, grown = self.owner[p.shape]
            motion = Similarity(turn_deg=p.turn_deg, dx=p.x, dy=p.y, mirrored=p.mirrored)
            spots.setdefault(p.container, []).append(spot(item, grown.centre, motion))
        return tuple(
            FilledSheet(self.stock[kind], (*self.kept[kind], *spots.get(n, ()))) for n, kind in enumerate(supply)
        )


def split(items: Sequence[Item], stock: Sequence[StockSheet]) -> tuple[list[tuple[Item, ...]], list[Unplaced]]:
    """Sort items by material and thickness; those that no stock may carry come back with the reason."""
    groups: list[list[Item]] = []
    unplaced = []
    for item in items:
        count = item.quantity + item.quantity_opposite
        why = why_no_stock(item, stock) if count else None
        if count == 0:
            continue
        if why is not None:
            unplaced.append(Unplaced(item.name, count, why))
            continue
        for group in groups:
            same = item.material == group[0].material
            if same and abs(item.thickness_mm - group[0].thickness_mm) <= 1e-6:
                group.append(item)
                break
        else:
            groups.append([item])
    return [tuple(group) for group in groups], unplaced


def prepare_group(items: Sequence[Item], supplies: Sequence[Supply], ask: NestAsk, *, prefer: bool = False) -> Group:
    """Grow the parts, shrink the stock, take kept parts off it, resolve turns against the grain.

    With `prefer` bends lie across the grain also where the material only had better have it so.
    """
    owner: list[tuple[Item, Grown]] = []
    shapes: list[Shape] = []
    for item in items:
        grown = grow(item.part, ask.spacing_mm, windows=ask.windows)
        for count, states in hands(item):
            owner.append((item, grown))
            shapes.append(Shape(grown.outer, grown.holes, item.turns_deg, states, count))
    shapes = [_useful_windows(s, shapes) for s in shapes]
    longest = sum(s.count * float(np.hypot(*np.ptp(s.outer, axis=0))) for s in shapes) + 2.0 * ask.margin_mm
    kinds, bins, kept = [], [], []
    for supply in supplies:
        stock = supply.stock
        if stock.count == 0 or not any(matches(item, stock) for item in items):
            continue
        try:
            container = container_of(stock, ask.margin_mm, ask.spacing_mm, longest if is_open(stock) else None)
            container = room_left(container, supply, ask.items, ask.spacing_mm)
        except ValueError:
            continue
        kinds.append(stock)
        kept.append(kept_spots(supply, ask.items))
        turns = (turns_of(item, s.mirror, stock, prefer=prefer) for s, (item, _) in zip(shapes, owner, strict=True))
        bins.append(Bin(container, tuple(turns)))
    return Group(tuple(kinds), tuple(bins), tuple(shapes), tuple(owner), tuple(kept))


def kept_spots(supply: Supply, items: Sequence[Item]) -> tuple[Spot, ...]:
    """Pieces that already lie on a sheet."""
    named = {item.name: item for item in items}
    return tuple(Spot(named[p.part], p.motion) for p in supply.kept)


def _useful_windows(shape: Shape, others: Sequence[Shape]) -> Shape:
    """Shape without the windows that no piece can lie in: too small by area."""
    least = min(float(Polygon(s.outer, s.holes).area) for s in others)
    kept = tuple(h for h in shape.holes if Polygon(h).area >= least)
    return Shape(shape.outer, kept, shape.turns_deg, shape.mirror, shape.count)
