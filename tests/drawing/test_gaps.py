"""Sheets with gaps where tabs stand, read back with ezdxf alone."""

import io

import ezdxf
import numpy as np
import pytest

from flatprep.drawing.forms import with_kerf
from flatprep.drawing.gaps import tabbed
from flatprep.drawing.write import lines_drawing, sheet_drawing
from flatprep.geom.bulge import circle, reverse
from flatprep.model.drawing import Contour, Part
from flatprep.model.layout import Placement, SheetLayout
from flatprep.model.tab import Tab

BOX = np.array([[0.0, 0, 0], [24, 0, 0], [24, 12, 0], [0, 12, 0]])
SLIDER = Part("slider", Contour(BOX), (Contour(reverse(circle(12, 6, 2), closed=True)),))
DISC = Part("disc", Contour(circle(0, 0, 40)))
TABS = (Tab((12.0, 0.0), (0.0, -1.0), 0.5), Tab((12.0, 12.0), (0.0, 1.0), 0.5))
OUTLINE = np.array([[0.0, 0], [300, 0], [300, 200], [0, 200]])


def sheet(*placements):
    return SheetLayout("al3", "al-5052-h32", 3.0, OUTLINE, (), 100.0, 0.1, placements)


def drawn(mirrored=False):
    kerf = 0.2
    paths = {p.name: with_kerf(p, kerf) for p in (SLIDER, DISC)}
    one = sheet(Placement("slider", 1, 0.0, mirrored, 100.0, 50.0), Placement("disc", 1, 0.0, False, 200.0, 100.0))
    lines = tabbed(one, paths, {"slider": TABS}, {"slider": kerf, "disc": kerf})
    return list(ezdxf.read(io.StringIO(lines_drawing(lines))).modelspace())


@pytest.mark.parametrize("mirrored", [False, True])
def test_the_outline_is_open_by_the_tab_and_the_kerf_and_everything_else_is_closed(mirrored):
    hole, one, other, disc = drawn(mirrored)
    assert {e.dxf.layer for e in (hole, one, other, disc)} == {"CUT"}
    assert (hole.dxftype(), hole.dxf.radius) == ("CIRCLE", pytest.approx(1.9))
    assert (disc.dxftype(), disc.dxf.radius) == ("CIRCLE", pytest.approx(40.1))
    assert not one.closed
    assert not other.closed
    sign = -1 if mirrored else 1
    points = [line.get_points("xy")[k] for line in (one, other) for k in (0, -1)]
    ends = sorted((round(float(x), 6), round(float(y), 6)) for x, y in points)
    # the cut runs 0.1 outside; gaps of 0.5 + 0.2 about x = 12 leave 0.5 standing between the cut's round ends
    at = sorted((100 + sign * x, y) for x in (11.65, 12.35) for y in (49.9, 62.1))
    assert ends == [pytest.approx(p, abs=1e-6) for p in at]


def test_the_sheet_itself_keeps_closed_contours_and_notes_the_tabs():
    one = sheet(Placement("slider", 1, 0.0, False, 100.0, 50.0))
    doc = ezdxf.read(io.StringIO(sheet_drawing(one, {"slider": SLIDER}, tabs={"slider": TABS})))
    cut = [e for e in doc.modelspace() if e.dxf.layer == "CUT"]
    assert [e.dxftype() for e in cut] == ["CIRCLE", "LWPOLYLINE"]
    assert cut[1].closed
    strokes = [e.get_points("xy") for e in doc.modelspace() if e.dxf.layer == "NOTE" and e.dxftype() == "LWPOLYLINE"]
    assert [[tuple(p) for p in s] for s in strokes] == [
        [pytest.approx((112, 51.5)), pytest.approx((112, 48.5))],
        [pytest.approx((112, 60.5)), pytest.approx((112, 63.5))],
    ]
