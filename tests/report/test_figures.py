"""Figures as people see them: the rounding that the design asks for, by hand."""

from decimal import Decimal

import pytest

from flatprep.report import figures


@pytest.mark.parametrize(
    ("mm", "units", "text"),
    [
        (12.345678, "mm", "12.35 mm"),
        (40.0, "mm", "40 mm"),
        (-0.001, "mm", "0 mm"),
        (25.4, "in", "1 in"),
        (3.175, "in", "0.125 in"),
        (12.7 / 64, "in", "0.008 in"),
        (1000.0, "m", "1 m"),
        (100.0, "mm", "100 mm"),
        (None, "mm", "–"),
    ],
)
def test_length(mm, units, text):
    assert figures.length(mm, units).replace("\u00a0", " ") == text


@pytest.mark.parametrize(
    ("kg", "text"),
    [(1.5475, "1.55 kg"), (0.0262, "26.2 g"), (12.34, "12.3 kg"), (123.4, "123 kg"), (0.9996, "1.00 kg"), (0.0, "0 g")],
)
def test_mass_has_three_significant_digits(kg, text):
    assert figures.mass(kg).replace("\u00a0", " ") == text


@pytest.mark.parametrize(("value", "text"), [(9.996, "10.0"), (0.09996, "0.100"), (1234.5, "1230"), (-2.345, "-2.35")])
def test_significant_digits_survive_rounding_up(value, text):
    assert figures.significant(value) == text


def test_money_has_two_decimals_and_no_currency_of_its_own():
    assert figures.money(Decimal("81.5"), "EUR") == "81.50\u00a0EUR"
    assert figures.money(Decimal("81.5")) == "81.50"
    assert figures.money(None, "EUR") == "–"


@pytest.mark.parametrize(
    ("seconds", "text"), [(12.4, "12 s"), (59.6, "1 min 0 s"), (200, "3 min 20 s"), (7260, "2 h 1 min"), (None, "–")]
)
def test_duration(seconds, text):
    assert figures.duration(seconds).replace("\u00a0", " ") == text


def test_place_follows_the_unit():
    assert figures.place((25.4, -50.8), "in").replace("\u00a0", " ") == "(1, −2)"


def test_measure_keeps_units_that_are_no_lengths():
    assert figures.measure(1.4567, "mm", "in") == "0.057\u00a0in"
    assert figures.measure(87.0, "deg", "in") == "87\u00a0deg"
    assert figures.measure(None, "mm") == "–"


def test_area():
    assert figures.area(1234.6) == "12.35\u00a0cm²"
    assert figures.area(645.16, "in") == "1\u00a0in²"


@pytest.mark.parametrize(
    ("words", "text"), [("cut it", "Cut it."), ("Cut it. ", "Cut it."), ("why?", "Why?"), ("", "")]
)
def test_a_sentence_ends_once(words, text):
    assert figures.sentence(words) == text


def test_percent_and_counts():
    assert figures.percent(0.8123) == "81.2\u00a0%"
    assert figures.counted(1, "piece") == "1 piece"
    assert figures.counted(2, "box", "boxes") == "2 boxes"
