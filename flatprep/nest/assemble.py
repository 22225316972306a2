"""From places back to a layout: true parts on numbered sheets, lengths, utilisation."""

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from flatprep.geom import bulge
from flatprep.geom.bulge import Floats, Similarity
from flatprep.model.drawing import Part
from flatprep.model.layout import Layout, Placement, SheetLayout, Unplaced
from flatprep.nest.objective import area_mm2, is_open
from flatprep.nest.problem import Item, NestAsk, StockSheet


@dataclass(frozen=True, slots=True)
class Spot:
    """A piece of an item on a sheet: the motion is that of a `Placement`."""

    item: Item
    motion: Similarity


@dataclass(frozen=True, slots=True)
class FilledSheet:
    """A sheet of some stock and the pieces on it."""

    stock: StockSheet
    spots: tuple[Spot, ...]


def layout_of(ask: NestAsk, sheets: Sequence[FilledSheet], unplaced: Sequence[Unplaced]) -> Layout:
    """Layout of filled sheets, in their order; copies are numbered as they lie, part by part."""
    copies: Counter[str] = Counter()
    done = []
    for sheet in sheets:
        placements = []
        for s in sheet.spots:
            copies[s.item.name] += 1
            m = s.motion
            placements.append(Placement(s.item.name, copies[s.item.name], m.turn_deg, m.mirrored, m.dx, m.dy))
        done.append(_sheet_layout(sheet, tuple(placements), ask.margin_mm))
    return Layout(ask.spacing_mm, ask.margin_mm, tuple(done), tuple(unplaced))


def _sheet_layout(sheet: FilledSheet, placements: tuple[Placement, ...], margin_mm: float) -> SheetLayout:
    stock = sheet.stock
    length = used_length(sheet, margin_mm)
    outline = border(stock, length)
    area = length * stock.width_mm if is_open(stock) else area_mm2(stock)
    net = sum(s.item.part.area_mm2 for s in sheet.spots)
    return SheetLayout(
        stock.name, stock.material, stock.thickness_mm, outline, stock.holes, length, net / area, placements
    )


def border(stock: StockSheet, used_length_mm: float) -> Floats:
    """Border of a sheet, shape (n, 2); of open length, the rectangle used."""
    if stock.outline is not None:
        return stock.outline
    length = stock.length_mm if stock.length_mm is not None else used_length_mm
    return np.array([[0.0, 0.0], [length, 0.0], [length, stock.width_mm], [0.0, stock.width_mm]])


def used_length(sheet: FilledSheet, margin_mm: float) -> float:
    """Length along x from the sheet's left end to the last piece and its margin; at most the whole sheet."""
    reach = max(bulge.bounds(s.motion.polyline(s.item.part.outer.xyb), closed=True)[2] for s in sheet.spots)
    stock = sheet.stock
    end = reach + stock.margins(margin_mm)[1]
    if is_open(stock):
        return end
    edge = border(stock, 0.0)
    left, right = float(edge[:, 0].min()), float(edge[:, 0].max())
    return min(end, right) - left


def parts_by_name(items: Sequence[Item]) -> dict[str, Part]:
    """Return the true shape of each part, by the name that placements use."""
    return {item.name: item.part for item in items}
