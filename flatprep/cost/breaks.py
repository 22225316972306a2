"""Quantity breaks: what one set costs when several are nested together."""

from collections.abc import Sequence
from decimal import Decimal

from flatprep.model.estimate import Estimate, QuantityBreak


def quantity_breaks(estimates: Sequence[Estimate]) -> tuple[QuantityBreak, ...]:
    """Return one line for each estimate, by rising number of sets; every estimate has a nest of its own."""
    return tuple(_break(one) for one in sorted(estimates, key=lambda e: e.sets))


def _break(estimate: Estimate) -> QuantityBreak:
    cost = estimate.material_cost
    return QuantityBreak(
        sets=estimate.sets,
        sheets=sum(use.count for use in estimate.stock),
        material_cost=cost,
        cost_per_set=None if cost is None else float(cost / Decimal(estimate.sets)),
        utilisation=estimate.utilisation,
    )
