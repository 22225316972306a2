"""First articles: one piece of each kind on the first sheet of its material, to be measured before the rest is cut.

A layout that has them there by itself is taken as it is. Else one piece of each kind is laid first, on the stock that
the first sheet is of, and the rest around them; that is taken unless it leaves more out or needs more stock.
"""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import replace

from flatprep.base.progress import Progress, Silent
from flatprep.model.layout import Layout, Placement, SheetLayout
from flatprep.nest.allowed import matches
from flatprep.nest.objective import SheetUse, cost_of, is_open, price_per_area
from flatprep.nest.problem import Budget, Item, KeptSheet, NestAsk, StockSheet
from flatprep.nest.solve import nest

Kind = tuple[str, bool]
"""A part, and whether it is its other hand."""
QUIET = Silent()
PLAIN_SHARE = 0.6
"""Share of the budget for a layout that knows nothing of first articles."""
SMALL_SHARE = 0.05
"""Share for one piece of each kind alone."""
MOST_MORE = 0.02
"""What first articles may cost, as a share of the stock's cost: length of an open one, for sheets are whole."""


def nest_first_articles(
    ask: NestAsk,
    budget: Budget,
    progress: Progress = QUIET,
    on_better: Callable[[Layout], None] | None = None,
    stop: Callable[[], bool] = lambda: False,
) -> Layout:
    """Lay a job as `nest` does, with first articles on the first sheets where that needs no more stock; marked.

    Raises
    ------
    ValueError, KeepError
        As `nest`.
    """
    plain = nest(ask, _share(budget, PLAIN_SHARE), progress, on_better, stop)
    if ask.keep or stop() or not late_kinds(plain, ask):
        return marked(plain, ask)
    firsts = tuple(_firsts(plain, ask, _share(budget, SMALL_SHARE)))
    if not firsts:
        return marked(plain, ask)
    other = nest(replace(ask, keep=firsts), _share(budget, 1.0 - PLAIN_SHARE - SMALL_SHARE), progress, None, stop)
    better = len(late_kinds(other, ask)) < len(late_kinds(plain, ask)) and not _needs_more(other, plain, ask)
    return marked(other if better else plain, ask)


def late_kinds(layout: Layout, ask: NestAsk) -> tuple[Kind, ...]:
    """Return the kinds of which no piece lies on the first sheet of its material and thickness, fillers left aside."""
    items = {item.name: item for item in ask.items}
    early = {_kind(p, items) for sheet in _first_sheets(layout.sheets) for p in sheet.placements}
    every = dict.fromkeys(_kind(p, items) for s in layout.sheets for p in s.placements if not items[p.part].filler)
    return tuple(kind for kind in every if kind not in early)


def marked(layout: Layout, ask: NestAsk) -> Layout:
    """Return the layout with one piece of each kind marked as first article: the leftmost on its first sheet."""
    items = {item.name: item for item in ask.items}
    done: set[Kind] = set()
    sheets = []
    for sheet in layout.sheets:
        first: dict[Kind, Placement] = {}
        for p in sorted(sheet.placements, key=lambda p: (p.dx, p.dy)):
            if not items[p.part].filler and _kind(p, items) not in done:
                first.setdefault(_kind(p, items), p)
        done |= first.keys()
        chosen = set(first.values())
        sheets.append(replace(sheet, placements=tuple(replace(p, first=p in chosen) for p in sheet.placements)))
    return replace(layout, sheets=tuple(sheets))


def _kind(p: Placement, items: dict[str, Item]) -> Kind:
    return p.part, p.mirrored and not items[p.part].may_flip


def _first_sheets(sheets: Sequence[SheetLayout]) -> tuple[SheetLayout, ...]:
    first: dict[tuple[str, float], SheetLayout] = {}
    for sheet in sheets:
        first.setdefault((sheet.material, round(sheet.thickness_mm, 6)), sheet)
    return tuple(first.values())


def _firsts(plain: Layout, ask: NestAsk, budget: Budget) -> Iterator[KeptSheet]:
    """Yield one piece of each kind laid on a sheet of the stock that the first sheet of each material is of."""
    stock = {s.name: s for s in ask.stock}
    for sheet in _first_sheets(plain.sheets):
        own = replace(stock[sheet.stock], count=1)
        items = tuple(_one_each(item) for item in ask.items if matches(item, own) and not item.filler)
        few = nest(replace(ask, items=items, stock=(own,)), budget)
        yield from (KeptSheet(s.stock, s.placements) for s in few.sheets if s.placements)


def _one_each(item: Item) -> Item:
    return replace(item, quantity=min(item.quantity, 1), quantity_opposite=min(item.quantity_opposite, 1))


def _needs_more(other: Layout, plain: Layout, ask: NestAsk) -> bool:
    """Tell whether a layout leaves more pieces out, begins more full sheets, or costs more than it may."""
    left, sheets, cost = _needs(other, ask)
    least, fewest, cheapest = _needs(plain, ask)
    return left > least or sheets > fewest or cost > cheapest * (1.0 + MOST_MORE)


def _needs(layout: Layout, ask: NestAsk) -> tuple[int, int, float]:
    stock = {s.name: s for s in ask.stock}
    used = [stock[sheet.stock] for sheet in layout.sheets]
    cost = sum(
        cost_of(SheetUse(own, sheet.used_length_mm), price_per_area(_same_kind(own, ask)))
        for own, sheet in zip(used, layout.sheets, strict=True)
    )
    left = sum(u.count for u in layout.unplaced)
    return left, sum(own.outline is None and not is_open(own) for own in used), cost


def _same_kind(own: StockSheet, ask: NestAsk) -> list[StockSheet]:
    return [
        s for s in ask.stock if (s.material, round(s.thickness_mm, 6)) == (own.material, round(own.thickness_mm, 6))
    ]


def _share(budget: Budget, share: float) -> Budget:
    steps = None if budget.steps is None else max(1, int(budget.steps * share))
    return replace(budget, seconds=budget.seconds * share, steps=steps)
