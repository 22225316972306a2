"""How bends lie to the grain of the sheets: what the nest must keep, had better keep, and what is said of it."""

from collections import Counter
from collections.abc import Iterator
from math import degrees

from flatprep.api.pieces import Piece, ReadJob
from flatprep.measure.bends import bend_lines
from flatprep.model.layout import Layout
from flatprep.nest.across import grain_deg, off_grain_deg
from flatprep.nest.problem import Item, NestAsk
from flatprep.practice.bends import ALONG_DEG
from flatprep.profile.material import BendRule

SAME_DIGITS = 3
"""Directions are told apart to so many digits of a degree."""


def bends_deg(piece: Piece) -> tuple[float, ...]:
    """Return the directions of a part's bend lines where its material minds how they lie to the grain."""
    rule = _rule(piece)
    if rule is None or not rule.bendable or not (rule.across_only or rule.along_grain > 1.0):
        return ()
    lines = bend_lines(piece.part, piece.ask.bends)
    return tuple(sorted({round(degrees(line.direction_rad) % 180.0, SAME_DIGITS) % 180.0 for line in lines}))


def must_cross(piece: Piece) -> bool:
    """Tell whether the part's material cracks where a bend runs along the grain."""
    rule = _rule(piece)
    return rule is not None and rule.across_only


def _rule(piece: Piece) -> BendRule | None:
    return piece.ask.material.bend if piece.ask.material else None


def grain_warnings(ask: NestAsk) -> tuple[str, ...]:
    """Name the sheets of which nobody said how their grain runs though bends on them must cross it."""
    out = []
    for item in ask.items:
        bare = [s.name for s in ask.stock if s.material == item.material and s.grain is None] if _must(item) else []
        if bare:
            out.append(
                f"{item.name}: {item.material} cracks where a bend runs along the grain, and {', '.join(bare)} states "
                'none: mark it on the sheet, and name it with grain = "length" or "width"'
            )
    return tuple(out)


def _must(item: Item) -> bool:
    return item.must_cross and item.minds_grain


def grain_notes(read: ReadJob, ask: NestAsk, layout: Layout) -> tuple[str, ...]:
    """Say for each part with bends how they lie to the grain of the sheets that it was laid on."""
    pieces = {piece.name: piece for piece in read.pieces}
    return tuple(_note(item, pieces[item.name], *found) for item, found in _laid(ask, layout))


def _laid(ask: NestAsk, layout: Layout) -> Iterator[tuple[Item, tuple[int, int]]]:
    """Yield parts that mind the grain: how many pieces lie on sheets with one, and how many of these along it."""
    grain = {s.name: s.grain for s in ask.stock}
    laid: Counter[str] = Counter()
    along: Counter[str] = Counter()
    items = {item.name: item for item in ask.items if item.minds_grain}
    for sheet in layout.sheets:
        known = grain.get(sheet.stock)
        for p in sheet.placements if known else ():
            if known and p.part in items:
                laid[p.part] += 1
                off = off_grain_deg(items[p.part].bends_deg, p.turn_deg, grain_deg(known), mirrored=p.mirrored)
                along[p.part] += off < ALONG_DEG - 1e-6
    yield from ((item, (laid[name], along[name])) for name, item in items.items() if laid[name])


def _note(item: Item, piece: Piece, laid: int, along: int) -> str:
    if item.must_cross:
        return f"{item.name}: turned so that its bends cross the grain, along which {item.material} cracks"
    if not along:
        return f"{item.name}: its bends cross the grain"
    rule = _rule(piece)
    factor = rule.along_grain if rule else 1.0
    return (
        f"{item.name}: {along} of {laid} lie with a bend along the grain, where {item.material} wants {factor:g} times "
        'the radius; grain = "x" or "y" in the part keeps it off'
    )
