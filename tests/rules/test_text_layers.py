"""Texts on layers that hold texts only: the layer's name says whether they may have been meant to be cut."""

import pytest

from flatprep.drawing.read import read
from flatprep.model.finding import Severity
from flatprep.rules import text_not_outlined
from flatprep.rules.base import Context
from tests.drawing.draw import box, drawn


@pytest.mark.parametrize(
    ("layer", "severity"),
    [("NOTE", Severity.NOTE), ("dimensions", Severity.NOTE), ("0", Severity.WARNING), ("plate", Severity.WARNING)],
)
def test_a_layer_for_notes_is_known_by_its_name(tmp_path, layer, severity):
    def paint(msp):
        box(msp, 0, 0, 80, 50)
        msp.add_text("LEFT", height=4, dxfattribs={"insert": (20, 20), "layer": layer})

    (finding,) = text_not_outlined.check(Context(read(drawn(tmp_path, paint))))
    assert finding.severity is severity
