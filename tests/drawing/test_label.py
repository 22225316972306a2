"""What is written on a remnant's drawing is read from it again."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.base.errors import DrawingError
from flatprep.drawing.label import RemnantLabel, label_lines, read_label, thickness_text
from flatprep.model.drawing import Text
from flatprep.profile.gauges import parse_thickness_mm


def said(*lines):
    return read_label("rest.dxf", [Text(line, (0.0, 0.0), "NOTE", "") for line in lines])


FULL = RemnantLabel("mild-steel", "4 mm", "R0007", "length", "12.50")


@pytest.mark.parametrize("label", [FULL, RemnantLabel("hdpe", "1/2in"), RemnantLabel()])
def test_lines_are_read_as_they_were_written(label):
    assert said(*label_lines(label)) == label
    assert said("\n".join(label_lines(label))) == label


@pytest.mark.parametrize("line", ["Material = 5052", "MATERIAL:5052", "  material :  5052 "])
def test_people_write_them_their_own_way(line):
    assert said(line, "left over from spring", "material") == RemnantLabel(material="5052")


def test_two_lines_must_not_disagree():
    assert said("thickness: 3", "thickness: 3").thickness == "3"
    with pytest.raises(DrawingError, match='both "thickness: 3" and "thickness: 4"'):
        said("thickness: 3", "thickness: 4")


@given(st.floats(0.1, 100.0))
def test_a_thickness_survives_its_text(thickness_mm):
    assert parse_thickness_mm(thickness_text(thickness_mm)) == pytest.approx(thickness_mm, abs=1e-6)
