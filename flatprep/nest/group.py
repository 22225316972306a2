"""One material and thickness: its parts as shapes, its stock as bins, and the way back from places to true parts."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from shapely.geometry import Polygon

from flatprep.model.layout import Unplaced
from flatprep.nest.allowed import hands, matches, turns_of, why_no_stock
from flatprep.nest.assemble import FilledSheet, Spot
from flatprep.nest.construct import Bin
from flatprep.nest.keep import Supply, room_left
from flatprep.nest.objective import is_open
from flatprep.nest.prepare import container_of, grow
from flatprep.nest.problem import Item, NestAsk, StockSheet
from flatprep.nest.shapes import Container, Place, Shape
from flatprep.nest.twins import Owner, kinds_of


@dataclass(frozen=True, slots=True)
class Group:
    """Parts of one material and thickness, and the stock they may lie on.

    Attributes
    ----------
    stock : tuple of StockSheet
        The kinds that the margin leaves something of; `bins` go with them.
    items : tuple of Item
    shapes : tuple of Shape
        One for each outline and hand.
    owners : tuple of tuple of Owner
        Whose pieces each shape stands for: one item's, or those of several with the same outline.
    kept : tuple of tuple of Spot
        What already lies on each kind of stock.
    """

    stock: tuple[StockSheet, ...]
    bins: tuple[Bin, ...]
    shapes: tuple[Shape, ...]
    owners: tuple[tuple[Owner, ...], ...]
    kept: tuple[tuple[Spot, ...], ...]

    @property
    def pieces(self) -> int:
        """Pieces to lay."""
        return sum(s.count for s in self.shapes)

    @property
    def items(self) -> tuple[Item, ...]:
        """Items of the group, each once."""
        return tuple({o.item.name: o.item for owners in self.owners for o in owners}.values())

    def spots(self, places: Sequence[Place]) -> list[Spot]:
        """Return the true part at each place: of a shape's owners, the first ones' pieces go to its first places."""
        turn = [iter([o for o in owners for _ in range(o.pieces)]) for owners in self.owners]
        taken = ((next(turn[p.shape]), p) for p in places)
        return [Spot(owner.item, owner.motion(p)) for owner, p in taken]

    def without_place(self, shape: int, count: int) -> list[tuple[Item, int]]:
        """Items, and how many pieces of each, of the last `count` pieces of a shape: those that have no place."""
        late = [o.item.name for o in self.owners[shape] for _ in range(o.pieces)]
        return [(item, n) for item in self.items if (n := late[len(late) - count :].count(item.name))]

    def filled(self, places: Sequence[Place], supply: Sequence[int]) -> tuple[FilledSheet, ...]:
        """Sheets of `supply` with true parts on them, in its order."""
        spots: dict[int, list[Spot]] = {}
        for p, one in zip(places, self.spots(places), strict=True):
            spots.setdefault(p.container, []).append(one)
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
    grown = [(item, grow(item.part, ask.spacing_mm, windows=ask.windows)) for item in items]
    pieces = [(item, outline, count, states) for item, outline in grown for count, states in hands(item)]
    across = (count * float(np.hypot(*np.ptp(outline.outer, axis=0))) for _, outline, count, _ in pieces)
    longest = sum(across) + 2.0 * ask.margin_mm
    usable = [
        (supply, container)
        for supply in supplies
        if supply.stock.count != 0 and any(matches(item, supply.stock) for item in items)
        if (container := _container(supply, ask, longest)) is not None
    ]
    room = min((float(np.ptp(c.outer, axis=0).min()) for _, c in usable), default=0.0)
    kinds = kinds_of(pieces, room)
    shapes = [Shape(k.grown.outer, k.grown.holes, k.owners[0].item.turns_deg, k.states, k.pieces) for k in kinds]
    bins = [
        Bin(c, tuple(turns_of(k.owners[0].item, k.states, supply.stock, prefer=prefer) for k in kinds))
        for supply, c in usable
    ]
    return Group(
        tuple(supply.stock for supply, _ in usable),
        tuple(bins),
        tuple(_useful_windows(s, shapes) for s in shapes),
        tuple(k.owners for k in kinds),
        tuple(kept_spots(supply, ask.items) for supply, _ in usable),
    )


def _container(supply: Supply, ask: NestAsk, longest_mm: float) -> Container | None:
    """Room that is left of a sheet, open ones being as long as could be needed; None where there is none."""
    stock = supply.stock
    try:
        container = container_of(stock, ask.margin_mm, ask.spacing_mm, longest_mm if is_open(stock) else None)
        return room_left(container, supply, ask.items, ask.spacing_mm)
    except ValueError:
        return None


def kept_spots(supply: Supply, items: Sequence[Item]) -> tuple[Spot, ...]:
    """Pieces that already lie on a sheet."""
    named = {item.name: item for item in items}
    return tuple(Spot(named[p.part], p.motion) for p in supply.kept)


def _useful_windows(shape: Shape, others: Sequence[Shape]) -> Shape:
    """Shape without the windows that no piece can lie in: too small by area."""
    least = min(float(Polygon(s.outer, s.holes).area) for s in others)
    kept = tuple(h for h in shape.holes if Polygon(h).area >= least)
    return Shape(shape.outer, kept, shape.turns_deg, shape.mirror, shape.count)
