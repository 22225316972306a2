"""Sentences in the unit of the job."""

import pytest

from flatprep.report.words import lengths_in


@pytest.mark.parametrize(
    ("mm", "inches"),
    [
        # one more decimal than written, at least three; 25.4 mm an inch
        ("to 11.47 mm at the face, 90°", "to 0.452 in at the face, 90°"),
        ("5 mm wanted", "0.197 in wanted"),
        ("21.972 to 21.993 mm", "0.8650 to 0.8659 in"),
        ("outside 100 x 50 mm", "outside 3.937 x 1.969 in"),
        ("allowance 6.24 mm, deduction 5.76 mm", "allowance 0.246 in, deduction 0.227 in"),
        ("it adds 60 to 120 µm a side", "it adds 60 to 120 µm a side"),
        ("-0.002 to 0.022 mm of play", "-0.0001 to 0.0009 in of play"),
        ("M5 ISO 10642, 8 H7", "M5 ISO 10642, 8 H7"),
    ],
)
def test_lengths(mm, inches):
    assert lengths_in(mm, "in") == inches
    assert lengths_in(mm, "mm") == mm
