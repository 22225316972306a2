"""Money shared out so that the shares add up to the bill to the cent."""

from collections.abc import Sequence
from decimal import ROUND_HALF_UP, Decimal
from fractions import Fraction

CENT = Decimal("0.01")


def to_cents(amount: Decimal) -> Decimal:
    """Round half up to two decimals."""
    return amount.quantize(CENT, rounding=ROUND_HALF_UP)


def decimal(value: float) -> Decimal:
    """Return the decimal number that a float is written as; numpy's floats too."""
    return Decimal(repr(float(value)))


def split(bill: Decimal, weights: Sequence[float | Decimal]) -> tuple[Decimal, ...]:
    """Share `bill` out in proportion to `weights`, in whole cents that add up to it.

    Parameters
    ----------
    bill
        In whole cents, not negative.
    weights
        Not negative; where all are 0 the shares are equal.

    Returns
    -------
    tuple of Decimal
        Each within one cent of its exact share.

    Notes
    -----
    The largest remainder method: every share is rounded down, the cents left over go to the largest remainders,
    the first of equal ones. Exact fractions, so that no rounding of floats decides.
    """
    if not weights:
        return ()
    exact = [Fraction(w) for w in weights]
    whole = sum(exact)
    if whole == 0:
        exact, whole = [Fraction(1)] * len(exact), Fraction(len(exact))
    cents = int(bill / CENT)
    quotas = [cents * w / whole for w in exact]
    shares = [int(q) for q in quotas]
    by_remainder = sorted(range(len(quotas)), key=lambda i: (shares[i] - quotas[i], i))
    for i in by_remainder[: cents - sum(shares)]:
        shares[i] += 1
    return tuple(Decimal(s) * CENT for s in shares)
