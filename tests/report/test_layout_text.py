"""A layout in words."""

from pathlib import Path

import numpy as np
import pytest

from flatprep.model.layout import Layout, Placement, SheetLayout, Unplaced
from flatprep.report.layout_text import layout_text

BORDER = np.array([[0.0, 0], [1016, 0], [1016, 508], [0, 508]])
PLACED = (Placement("leaf", 1, 0.0, False, 10.0, 10.0, first=True), Placement("leaf", 2, 90.0, True, 250.0, 20.0))
SHEET = SheetLayout("steel-4", "mild-steel", 3.175, BORDER, (), 254.0, 0.125, PLACED)
LAYOUT = Layout(2.54, 5.08, (SHEET,), (Unplaced("tray", 3, "longer than 1016 mm"),))


def told(units):
    return layout_text(LAYOUT, Path("out"), {"leaf": ("2 slots made 6.35 mm wide",)}, units).replace("\u00a0", " ")


@pytest.mark.parametrize(
    ("units", "lines"),
    [
        # 1016 mm are 40 in, 508 20, 254 10, 3.175 an eighth, 2.54 a tenth, 5.08 a fifth, 6.35 a quarter
        ("in", ("mild-steel 0.125 in, 40 × 20 in, used length 10 in, 12.5 % of the sheet is parts",
                "NOT PLACED: 3 x tray: longer than 40.000 in",
                "2 slots made 0.250 in wide",
                "2 pieces on 1 sheet, spacing 0.1 in, margin 0.2 in; written to out")),
        ("mm", ("mild-steel 3.17 mm, 1016 × 508 mm, used length 254 mm, 12.5 % of the sheet is parts",
                "NOT PLACED: 3 x tray: longer than 1016 mm",
                "2 slots made 6.35 mm wide",
                "2 pieces on 1 sheet, spacing 2.54 mm, margin 5.08 mm; written to out")),
    ],
)  # fmt: skip
def test_lengths_are_in_the_unit_of_the_job(units, lines):
    for line in lines:
        assert line in told(units)


def test_first_articles_and_changes_are_told():
    assert "  2 x leaf\n  first articles, cut first: leaf 1\n" in told("mm")
    assert "leaf: not cut as drawn, 1 change\n" in told("mm")
