"""The constructive answer for one group: several orders of pieces on several sequences of sheets, the best kept."""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass

import numpy as np
from shapely.geometry import Polygon

from flatprep.model.layout import Unplaced
from flatprep.nest.assemble import FilledSheet, Spot, used_length
from flatprep.nest.construct import Bin, Laid, Layer
from flatprep.nest.group import Group
from flatprep.nest.objective import SheetUse, Value, value
from flatprep.nest.reasons import extra_turn, why_unplaced
from flatprep.nest.shapes import Place, Shape
from flatprep.nest.supply import cheaper, sequences

MOST_LAYS = 24
"""Layouts tried at most."""


@dataclass(frozen=True, slots=True)
class Answer:
    """A nest of one group.

    Attributes
    ----------
    places : tuple of Place
        `container` is an index into `supply`.
    supply : tuple of int
        Kind of each sheet taken: all of them carry something.
    fillers : tuple of tuple of Spot
        Further pieces on each sheet, laid where room was left.
    """

    group: Group
    places: tuple[Place, ...]
    supply: tuple[int, ...]
    unplaced: tuple[Unplaced, ...]
    value: Value
    fillers: tuple[tuple[Spot, ...], ...] = ()

    @property
    def sheets(self) -> tuple[FilledSheet, ...]:
        """True parts on their sheets."""
        filled = self.group.filled(self.places, self.supply)
        if not self.fillers:
            return filled
        return tuple(FilledSheet(f.stock, (*f.spots, *more)) for f, more in zip(filled, self.fillers, strict=True))


def first_answers(group: Group, margin_mm: float, stop: Callable[[], bool]) -> Iterator[Answer]:
    """Yield the first full layout, then only better ones.

    Parameters
    ----------
    stop
        Asked between layouts; the first one is always made.
    """
    layer, fits, group = _layer(group)
    orders = piece_orders(group.shapes, fits)
    whole = sequences(group.stock, sum(len(o) for o in orders[:1]))
    best: Answer | None = None
    tries = [(order, supply) for supply in whole for order in orders][:MOST_LAYS] if group.stock else []
    if not tries:
        yield answer_of(group, (), (), margin_mm)
        return
    lays = 0
    while tries and lays < 2 * MOST_LAYS:
        order, supply = tries.pop(0)
        laid = layer.lay(order, supply, stop if best is not None else lambda: False)
        lays += 1
        made = answer_of(group, laid.places, supply, margin_mm)
        if best is None or made.value < best.value:
            best = made
            yield made
        if stop():
            return
        if not tries and lays < MOST_LAYS + len(orders):
            tries = [(order, other) for other in cheaper(best.supply, group.stock) for order in orders[:2]]
            tries = tries[:MOST_LAYS] if lays <= MOST_LAYS else []


def answer_of(group: Group, places: Sequence[Place], supply: Sequence[int], margin_mm: float) -> Answer:
    """Answer from places: sheets that carry nothing dropped, kept ones first, missing pieces listed with the reason."""
    begun = [k for k, kept in enumerate(group.kept) if kept and k not in supply]
    supply = (*supply, *begun)
    used = {p.container for p in places} | {n for n, kind in enumerate(supply) if group.kept[kind]}
    ordered = sorted(used, key=lambda n: (not group.kept[supply[n]], n))
    number = {n: i for i, n in enumerate(ordered)}
    kept = tuple(
        Place(p.shape, number[p.container], p.turn_deg, p.mirrored, p.x, p.y)
        for p in sorted(places, key=lambda p: (number[p.container], p.shape))
    )
    kinds = tuple(supply[n] for n in ordered)
    sheets = group.filled(kept, kinds)
    uses = [SheetUse(s.stock, used_length(s, margin_mm)) for s in sheets]
    counts = [s.count for s in group.shapes]
    for p in kept:
        counts[p.shape] -= 1
    unplaced = tuple(u for shape, left in enumerate(counts) if left for u in why_unplaced(group, shape, left))
    return Answer(group, kept, kinds, unplaced, value(uses, sum(counts), group.stock))


def piece_orders(shapes: Sequence[Shape], fits: Sequence[bool]) -> list[list[int]]:
    """Orders in which pieces are laid, large ones first by four measures of size; those that fit nowhere left out."""
    area = [float(Polygon(s.outer, s.holes).area) for s in shapes]
    sides = [np.sort(np.ptp(s.outer, axis=0)) for s in shapes]
    measures = [area, [float(a * b) for a, b in sides], [float(b) for _, b in sides], [float(a) for a, _ in sides]]
    orders = []
    for size in measures:
        ranked = sorted((s for s in range(len(shapes)) if fits[s]), key=lambda s: (-size[s], s))
        orders.append([s for s in ranked for _ in range(shapes[s].count)])
    return [o for n, o in enumerate(orders) if o not in orders[:n]]


def _layer(group: Group) -> tuple[Layer, list[bool], Group]:
    """Layer for the group, as coarse as every piece still fits somewhere, with turns at which tight ones fit."""
    every = range(len(group.shapes))
    for attempt, coarse in ((group, True), (group, False), (_with_extra_turns(group), False)):
        layer = Layer(attempt.shapes, attempt.bins, coarse=coarse)
        fits = [any(layer.fits_alone(s, k) for k in range(len(attempt.bins))) for s in every]
        if all(fits):
            break
    return layer, fits, attempt


def _with_extra_turns(group: Group) -> Group:
    """Group in which a piece that turns freely and is tight has a turn at which its box fits."""
    bins = []
    for kind in group.bins:
        turns = [
            extra_turn(s, t, kind.container) if t is None else t for s, t in zip(group.shapes, kind.turns, strict=True)
        ]
        bins.append(Bin(kind.container, tuple(turns)))
    return Group(group.stock, tuple(bins), group.shapes, group.owners, group.kept)


__all__ = ["Answer", "Laid", "answer_of", "first_answers", "piece_orders"]
