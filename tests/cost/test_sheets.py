"""Area, price and rests of sheets."""

from dataclasses import replace
from decimal import Decimal

import numpy as np
import pytest

from flatprep.cost.sheets import discount_percent, gross_price, rest_area_mm2, sheet_area_mm2
from flatprep.job.terms import Discount
from tests.cost.shapes import sheet, stock

FULL = stock("full", "96.50")


@pytest.mark.parametrize("at", [(0.0, 0.0), (500.0, -300.0), (1e6, 1e6)])
@pytest.mark.parametrize("step", [1, -1])
def test_a_remnant_is_its_border_less_its_holes(at, step):
    # an L of 400 x 300 less 200 x 100 at a corner, less a triangle of 60 x 80 / 2, run either way round
    border = np.array([[0, 0], [400, 0], [400, 200], [200, 200], [200, 300], [0, 300]], dtype=float)[::step] + at
    hole = np.array([[50, 50], [110, 50], [50, 130]], dtype=float) + at
    remnant = replace(sheet(FULL), outline=border, holes=(hole,))
    assert sheet_area_mm2(remnant) == pytest.approx(400 * 300 - 200 * 100 - 60 * 80 / 2, rel=1e-9)


def test_prices():
    remnant = replace(FULL, length_mm=None, width_mm=None, outline=((0.0, 0.0), (9.0, 0.0), (0.0, 9.0)))
    strip = stock("strip", length=None, metre="17.50")
    assert gross_price(sheet(FULL), FULL) == Decimal("96.50")
    assert gross_price(sheet(FULL), remnant) == Decimal("96.50")  # a remnant at the value the user gives it
    assert gross_price(sheet(strip, used=594.4), strip) == Decimal("10.402")  # 0.5944 m
    assert gross_price(sheet(FULL), stock("x")) is None


@pytest.mark.parametrize(
    ("used", "least", "area"),
    [
        # 1000 x 500, used 400: the rest is 600 x 500
        (400.0, (300.0, 300.0), 300000.0),
        (700.0, (300.0, 300.0), 150000.0),
        (700.001, (300.0, 300.0), 0.0),
        # the longer side of the rest counts against the longer least side, whichever way round
        (400.0, (600.0, 500.0), 300000.0),
        (400.0, (500.0, 600.0), 300000.0),
        (400.0, (601.0, 100.0), 0.0),
        (400.0, (100.0, 601.0), 0.0),
        (1000.0, (0.1, 0.1), 0.0),
    ],
)
def test_the_rest_of_a_sheet(used, least, area):
    assert rest_area_mm2(sheet(FULL, "a", used=used), FULL, least) == pytest.approx(area)


def test_open_stock_leaves_no_rest():
    strip = stock("strip", length=None, metre="1")
    assert rest_area_mm2(sheet(strip, "a", used=100.0), strip, (1.0, 1.0)) == 0.0


@pytest.mark.parametrize(("bill", "percent"), [("99.99", 0), ("100", 2), ("499.99", 2), ("500", 5), ("9999", 5)])
def test_discounts_from_an_amount_on(bill, percent):
    steps = (Discount(Decimal(100), Decimal(2)), Discount(Decimal(500), Decimal(5)))
    assert discount_percent(Decimal(bill), steps) == percent
