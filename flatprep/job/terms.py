"""How a job's cost is worked out: what the user says about money, and nothing else."""

from dataclasses import dataclass
from decimal import Decimal
from enum import StrEnum


class Share(StrEnum):
    """What the cost of the stock is shared out by."""

    NET_AREA = "net-area"
    BOX_AREA = "box-area"
    USED_LENGTH = "used-length"


@dataclass(frozen=True, slots=True)
class Discount:
    """`percent` off the whole bill for stock once it reaches `least`."""

    least: Decimal
    percent: Decimal


@dataclass(frozen=True, slots=True)
class CostTerms:
    """The terms of ``[cost]``.

    Attributes
    ----------
    share : Share
        Net area of the parts, area of their boxes as drawn, or (for each sheet) the length they take along x.
    machine_rate : Decimal or None
        Money per hour of cutting; None: the process's own, if it has one.
    offcut_credit : Decimal
        Share of a sheet's price, 0 to 1, that is credited for its usable rest, by area.
    offcut_least_mm : (float, float)
        Sides of the smallest rest that counts as usable.
    scrap_per_kg : Decimal
        What the skeleton brings as scrap.
    discounts : tuple of Discount
        By rising amount; the highest that is reached holds.
    breaks : tuple of int
        Numbers of sets that quantity breaks are asked for.
    """

    share: Share = Share.NET_AREA
    machine_rate: Decimal | None = None
    offcut_credit: Decimal = Decimal(0)
    offcut_least_mm: tuple[float, float] = (300.0, 300.0)
    scrap_per_kg: Decimal = Decimal(0)
    discounts: tuple[Discount, ...] = ()
    breaks: tuple[int, ...] = (1, 2, 5, 10, 25)
