"""Fillers: pieces laid where room is left when everything else lies."""

from dataclasses import replace

import numpy as np
import shapely

from flatprep.geom.bulge import Floats
from flatprep.model.layout import Unplaced
from flatprep.nest.allowed import turns_of
from flatprep.nest.assemble import Spot, used_length
from flatprep.nest.construct import Bin, Layer
from flatprep.nest.firstfit import Answer, piece_orders
from flatprep.nest.group import Group
from flatprep.nest.objective import is_open
from flatprep.nest.prepare import grow, region_container, region_of
from flatprep.nest.problem import NestAsk
from flatprep.nest.shapes import Container

NO_ROOM = "filler: no room left beside the other parts"


def fill(answer: Answer, fillers: Group, ask: NestAsk) -> tuple[Answer, tuple[Unplaced, ...]]:
    """Lay fillers on the sheets of an answer, none of which is used further along for them.

    Parameters
    ----------
    fillers
        The group of the same material and thickness that holds the fillers alone.

    Returns
    -------
    (Answer, tuple of Unplaced)
        The answer with its fillers, and those that found no room.
    """
    bins = [_bin_left(answer, n, fillers, ask) for n in range(len(answer.supply))]
    layer = Layer(fillers.shapes, bins)
    order = piece_orders(fillers.shapes, [True] * len(fillers.shapes))[0]
    laid = layer.lay(order, range(len(bins)))
    more: list[list[Spot]] = [[] for _ in bins]
    for p, one in zip(laid.places, fillers.spots(laid.places), strict=True):
        more[p.container].append(one)
    late = [one for s, count in enumerate(laid.left_out) for one in fillers.without_place(s, count)]
    left = tuple(Unplaced(item.name, count, NO_ROOM) for item, count in late)
    return replace(answer, fillers=tuple(tuple(spots) for spots in more)), left


def _bin_left(answer: Answer, number: int, fillers: Group, ask: NestAsk) -> Bin:
    """Return what is left of a sheet: its used length where it is the last, without what lies on it."""
    kind = answer.supply[number]
    stock, container = answer.group.stock[kind], answer.group.bins[kind].container
    sheet = answer.sheets[number]
    if number == len(answer.supply) - 1 or is_open(stock):
        end = used_length(sheet, ask.margin_mm) - stock.margins(ask.margin_mm)[1] + ask.spacing_mm / 2.0
        container = _cut_at(container, end + (float(stock.outline[:, 0].min()) if stock.outline is not None else 0.0))
    rings: list[Floats] = []
    for s in sheet.spots[len(answer.group.kept[kind]) :]:
        grown = grow(s.item.part, ask.spacing_mm, windows=ask.windows)
        rings += [s.motion.points(ring + grown.centre) for ring in (grown.outer, *grown.holes)]
    mine = zip(fillers.shapes, fillers.owners, strict=True)
    turns = (turns_of(owners[0].item, s.mirror, stock) for s, owners in mine)
    return Bin(container, tuple(turns), tuple(rings))


def _cut_at(container: Container, x: float) -> Container:
    """Container without what lies right of x."""
    low, high = container.outer.min(axis=0), container.outer.max(axis=0)
    if not container.holes and np.isclose(shapely.Polygon(container.outer).area, float(np.prod(high - low))):
        x = min(x, float(high[0]))
        return Container(np.array([low, [x, low[1]], [x, high[1]], [low[0], high[1]]]))
    return region_container(region_of(container).intersection(shapely.box(low[0], low[1], x, high[1])))
