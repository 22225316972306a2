"""Lengths as people write them."""

import pytest

from flatprep.base.units import LengthError, parse_length_mm


@pytest.mark.parametrize(
    ("text", "unit", "mm"),
    [
        # 1 in = 25.4 mm exactly (international yard and pound agreement, 1959)
        ("3", "mm", 3.0),
        ("3mm", "in", 3.0),
        (3, "in", 76.2),
        ("0.125in", "mm", 3.175),
        ("1/8in", "mm", 3.175),
        ("1 1/2in", "mm", 38.1),
        ('1/4"', "mm", 6.35),
        ("2 cm", "mm", 20.0),
        ("1ft", "mm", 304.8),
        (".5m", "mm", 500.0),
        ("1e2mm", "mm", 100.0),
        ("-3", "mm", -3.0),
    ],
)
def test_lengths(text, unit, mm):
    assert parse_length_mm(text, unit) == pytest.approx(mm, rel=1e-12)


@pytest.mark.parametrize(
    "text", ["", "three", "3 furlongs", "1/0in", "1//2", True, float("nan"), float("inf"), "3mm3", None]
)
def test_no_lengths(text):
    with pytest.raises(LengthError):
        parse_length_mm(text)
