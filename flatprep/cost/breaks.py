"""Quantity breaks: what one set costs when several are nested together."""

from collections.abc import Sequence
from dataclasses import replace
from decimal import Decimal

from flatprep.job.values import Stock
from flatprep.model.estimate import Estimate, QuantityBreak


def bought(stock: Sequence[Stock]) -> tuple[Stock, ...]:
    """Return the stock with as many full sheets as are needed: more can be bought, remnants cannot."""
    return tuple(one if one.outline is not None else replace(one, count=None) for one in stock)


def quantity_breaks(estimates: Sequence[Estimate]) -> tuple[QuantityBreak, ...]:
    """Return one line for each estimate, by rising number of sets; every estimate has a nest of its own."""
    return tuple(_break(one) for one in sorted(estimates, key=lambda e: e.sets))


def _break(estimate: Estimate) -> QuantityBreak:
    unplaced = sum(part.quantity - part.placed for part in estimate.parts if part.placed is not None)
    cost = estimate.material_cost if not unplaced else None
    return QuantityBreak(
        sets=estimate.sets,
        sheets=sum(use.count for use in estimate.stock),
        material_cost=cost,
        cost_per_set=None if cost is None else float(cost / Decimal(estimate.sets)),
        utilisation=estimate.utilisation,
        unplaced=unplaced,
    )
