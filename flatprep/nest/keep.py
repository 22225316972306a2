"""Placements that stay: what is left of a job once the sheets that are kept are taken off it."""

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass, replace

import shapely
from shapely.geometry import Polygon

from flatprep.base.errors import FlatprepError
from flatprep.model.layout import Placement
from flatprep.nest.objective import is_open
from flatprep.nest.prepare import grow, region_container, region_of
from flatprep.nest.problem import Item, KeptSheet, NestAsk, StockSheet
from flatprep.nest.shapes import Container


class KeepError(FlatprepError):
    """Kept placements that do not go with the job: the message names what."""


@dataclass(frozen=True, slots=True)
class Supply:
    """A kind of sheet, and what already lies on it."""

    stock: StockSheet
    kept: tuple[Placement, ...] = ()


def left_to_lay(ask: NestAsk) -> tuple[tuple[Item, ...], tuple[Supply, ...]]:
    """Return the items with what is still to be laid, and the stock: kept sheets first, each a kind of its own.

    Raises
    ------
    KeepError
        When a kept sheet is of stock, or holds parts, that the job does not have, or more of them than it asks for.
    """
    items = {item.name: item for item in ask.items}
    stock = {s.name: s for s in ask.stock}
    kept = []
    for sheet in ask.keep:
        strange = [p.part for p in sheet.placements if p.part not in items]
        if sheet.stock not in stock or strange:
            what = f"part {strange[0]!r}" if strange else f"stock {sheet.stock!r}"
            raise KeepError(f"the kept layout has {what}, the job has not", "keep sheets of this job only")
        kept.append(Supply(_begun(stock[sheet.stock]), sheet.placements))
        stock[sheet.stock] = _one_fewer(stock[sheet.stock])
    counts = Counter((p.part, p.mirrored) for sheet in ask.keep for p in sheet.placements)
    rest = tuple(_still_asked(item, counts[item.name, False], counts[item.name, True]) for item in ask.items)
    return rest, (*kept, *(Supply(s) for s in stock.values()))


def room_left(container: Container, supply: Supply, items: Sequence[Item], spacing_mm: float) -> Container:
    """Container without the room that kept parts take, their windows with it.

    Raises
    ------
    ValueError
        When nothing is left.
    """
    if not supply.kept:
        return container
    parts = {item.name: item.part for item in items}
    taken = []
    for p in supply.kept:
        grown = grow(parts[p.part], spacing_mm, windows=False)
        taken.append(Polygon(p.motion.points(grown.outer + grown.centre)))
    return region_container(region_of(container).difference(shapely.union_all(taken)))


def kept_of(sheets: Sequence[KeptSheet]) -> Counter[str]:
    """Count the pieces that are kept, by part."""
    return Counter(p.part for sheet in sheets for p in sheet.placements)


def _begun(stock: StockSheet) -> StockSheet:
    return replace(stock, count=1) if is_open(stock) else replace(stock, count=1, price=0.0)


def _one_fewer(stock: StockSheet) -> StockSheet:
    if stock.count is None:
        return stock
    if stock.count == 0:
        raise KeepError(f"the kept layout uses more sheets of {stock.name!r} than there are", "raise the stock's count")
    return replace(stock, count=stock.count - 1)


def _still_asked(item: Item, drawn: int, mirrored: int) -> Item:
    if item.may_flip:
        total = item.quantity + item.quantity_opposite - drawn - mirrored
        left = (total, 0)
    else:
        left = (item.quantity - drawn, item.quantity_opposite - mirrored)
    if min(left) < 0:
        raise KeepError(
            f"the kept layout holds {drawn + mirrored} of {item.name!r}, the job asks for fewer in that hand",
            "raise the quantity, or take pieces off the kept layout",
        )
    return replace(item, quantity=left[0], quantity_opposite=left[1])
