"""A changed copy of a part is read back as the same part."""

import numpy as np
import pytest

from flatprep.base.files import write_whole
from flatprep.drawing.read import read
from flatprep.drawing.write import part_drawing
from flatprep.geom.bulge import circle, reverse
from flatprep.model.drawing import Contour, Curve, Part

OUTER = np.array([[0.0, 0, 0], [80, 0, 0], [80, 50, 0], [0, 50, 0]])
HOLE = reverse(circle(20, 25, 5), closed=True)


def line(x):
    return Curve(np.array([[x, 0.0, 0.0], [x, 50.0, 0.0]]), closed=False)


def test_contours_marks_and_bends_come_back(tmp_path):
    part = Part("leaf", Contour(OUTER), (Contour(HOLE),), marks=(line(40.0),), bends=(line(60.0),))
    write_whole(tmp_path / "leaf.dxf", part_drawing(part))
    (back,) = read(tmp_path / "leaf.dxf").parts
    assert back.area_mm2 == pytest.approx(4000 - np.pi * 25)
    assert [c.xyb[0, 0] for c in back.marks] == [40.0]
    assert [c.xyb[0, 0] for c in back.bends] == [60.0]
