"""The cost of the sheets of a layout, shared out to the parts on them."""

from collections import Counter, defaultdict
from collections.abc import Collection, Mapping, Sequence
from dataclasses import dataclass
from decimal import Decimal

from flatprep.base.errors import JobError
from flatprep.cost.share import split, to_cents
from flatprep.cost.sheets import SheetBill, bill_sheets
from flatprep.geom import bulge
from flatprep.job.terms import CostTerms, Share
from flatprep.job.values import Stock
from flatprep.model.drawing import Part
from flatprep.model.layout import Layout, Placement, SheetLayout

Key = tuple[str, float]
"""Material and thickness: parts of one kind of sheet share its cost."""


@dataclass(frozen=True, slots=True)
class Lines:
    """Cost of the placed pieces: by part for one piece (exact) and for all (in cents), by stock, and in all."""

    piece: Mapping[str, float]
    line: Mapping[str, Decimal]
    stock: Mapping[str, Decimal]
    total: Decimal | None
    percent: Decimal
    bills: tuple[SheetBill, ...]


def share_out(parts: Sequence[Part], stock: Sequence[Stock], layout: Layout, terms: CostTerms) -> Lines:
    """Share the cost of the sheets out: within each material and thickness, by the rule of `terms`.

    Raises
    ------
    JobError
        When the layout holds a part or a stock that the job does not have.
    """
    shapes = {part.name: part for part in parts}
    _check(layout, shapes, {s.name for s in stock})
    used = [s for s in layout.sheets if s.placements]
    net = [sum(shapes[p.part].area_mm2 for p in s.placements) for s in used]
    bills, percent = bill_sheets(used, {s.name: s for s in stock}, net, terms)
    groups = _groups(used, bills, shapes, terms.share)
    known = {key: group for key, group in groups.items() if group.net is not None}
    total = to_cents(sum((g.net for g in known.values() if g.net is not None), Decimal(0)))
    shares = split(total, [g.net or Decimal(0) for g in known.values()])
    piece: dict[str, float] = {}
    line: dict[str, Decimal] = {}
    for group, share in zip(known.values(), shares, strict=True):
        names = list(group.weight)
        line |= dict(zip(names, split(share, [group.weight[n] for n in names]), strict=True))
        whole = sum(group.weight.values())
        piece |= {n: float(group.net or 0) * group.weight[n] / whole / group.count[n] for n in names}
    complete = len(known) == len(groups)
    return Lines(piece, line, _by_stock(bills, total) if complete else {}, total if complete else None, percent, bills)


def _check(layout: Layout, shapes: Mapping[str, Part], stock: Collection[str]) -> None:
    for number, sheet in enumerate(layout.sheets, 1):
        unknown = [p.part for p in sheet.placements if p.part not in shapes]
        if unknown:
            raise JobError(
                f'layout, sheet {number}: part "{unknown[0]}" is not in this job',
                "give the layout that was made from this job, or nest again",
            )
        if sheet.placements and sheet.stock not in stock:
            raise JobError(
                f'layout, sheet {number}: stock "{sheet.stock}" is not in this job',
                "give the layout that was made from this job, or nest again",
            )


@dataclass(frozen=True, slots=True)
class _Group:
    net: Decimal | None
    weight: Mapping[str, float]
    count: Mapping[str, int]


def _groups(
    sheets: Sequence[SheetLayout], bills: Sequence[SheetBill], parts: Mapping[str, Part], rule: Share
) -> dict[Key, _Group]:
    nets: dict[Key, list[Decimal | None]] = defaultdict(list)
    weights: dict[Key, dict[str, float]] = defaultdict(lambda: defaultdict(float))
    counts: dict[Key, Counter[str]] = defaultdict(Counter)
    for sheet, bill in zip(sheets, bills, strict=True):
        key = (sheet.material, round(sheet.thickness_mm, 6))
        nets[key].append(bill.net)
        for placement in sheet.placements:
            weights[key][placement.part] += _weight(parts[placement.part], placement, rule)
            counts[key][placement.part] += 1
    return {key: _Group(_all(values), dict(weights[key]), counts[key]) for key, values in nets.items()}


def _all(values: Sequence[Decimal | None]) -> Decimal | None:
    known = [v for v in values if v is not None]
    return sum(known, Decimal(0)) if len(known) == len(values) else None


def _weight(part: Part, placement: Placement, rule: Share) -> float:
    """Return what a placed piece counts: its net area, its box as drawn, or its length along the sheet."""
    if rule is Share.NET_AREA:
        return part.area_mm2
    if rule is Share.BOX_AREA:
        width, height = part.size_mm
        return width * height
    x0, _, x1, _ = bulge.bounds(placement.motion.polyline(part.outer.xyb), closed=True)
    return x1 - x0


def _by_stock(bills: Sequence[SheetBill], total: Decimal) -> dict[str, Decimal]:
    nets: dict[str, Decimal] = defaultdict(Decimal)
    for bill in bills:
        nets[bill.stock] += bill.net or Decimal(0)
    return dict(zip(nets, split(total, list(nets.values())), strict=True))
