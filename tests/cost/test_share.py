"""Shares that add up to the bill to the cent."""

from decimal import Decimal
from fractions import Fraction
from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.cost.share import split, to_cents
from tests.reference_tables import table


@pytest.mark.parametrize("row", table("mass_cost")["share"], ids=lambda r: r["name"])
def test_worked_shares(row):
    assert split(Decimal(row["bill"]), row["weights"]) == tuple(map(Decimal, row["shares"]))


cents = st.integers(0, 10**9).map(lambda n: Decimal(n) / 100)
weights = st.lists(st.floats(0.0, 1e12, allow_nan=False), min_size=1, max_size=40)


@given(bill=cents, given_weights=weights)
def test_shares_add_up_and_each_is_within_a_cent(bill, given_weights):
    shares = split(bill, given_weights)
    assert sum(shares) == bill
    assert all(share >= 0 for share in shares)
    whole = sum(map(Fraction, given_weights))
    if whole:
        for share, weight in zip(shares, given_weights, strict=True):
            assert abs(Fraction(share) - Fraction(bill) * Fraction(weight) / whole) < Fraction(1, 100)


@given(bill=cents, given_weights=weights)
def test_a_heavier_line_never_pays_less(bill, given_weights):
    pairs = sorted(zip(given_weights, split(bill, given_weights), strict=True))
    for (light, less), (heavy, more) in pairwise(pairs):
        assert more >= less or light == heavy


def test_weights_of_nothing_are_equal_shares():
    assert split(Decimal("1.00"), [0.0, 0.0]) == (Decimal("0.50"), Decimal("0.50"))
    assert split(Decimal("0.00"), []) == ()


@pytest.mark.parametrize(("amount", "rounded"), [("1.005", "1.01"), ("1.004", "1.00"), ("2.675", "2.68")])
def test_half_a_cent_goes_up(amount, rounded):
    assert to_cents(Decimal(amount)) == Decimal(rounded)
