"""What flatprep writes goes through LibreCAD, which opens it and saves it anew: the same layers, the same areas.

Needs Debian's librecad, xvfb and xdotool; skipped where one of them is not installed.
"""

from math import pi

import ezdxf
import numpy as np
import pytest
from ezdxf.math import area, bulge_to_arc

from flatprep.drawing.forms import FORMS, Form
from flatprep.drawing.write import border_drawing, sheet_drawing
from flatprep.geom.bulge import circle, reverse
from flatprep.model.drawing import Contour, Curve, Part
from flatprep.model.layout import Placement, SheetLayout
from flatprep.repair.clean import repair
from flatprep.repair.values import RepairOptions
from tests.drawing.draw import box, drawn
from tests.librecad import LibreCad, missing, screen

pytestmark = pytest.mark.skipif(bool(missing()), reason=f"not installed: {', '.join(missing())}")

PLATE = np.array([[0.0, 0, 0], [40, 0, 1], [40, 20, 0], [0, 20, 0]])
PLATE_MM2 = 40.0 * 20.0 + pi * 10.0**2 / 2.0
BORDER = np.array([[0.0, 0], [300, 0], [300, 200], [0, 200]])


@pytest.fixture(scope="module")
def librecad(tmp_path_factory):
    with screen() as display:
        yield LibreCad(display, tmp_path_factory.mktemp("librecad"))


def sheet():
    """A plate as drawn, turned by 30 degrees, and turned over; each with a hole and a mark."""
    mark = Curve(np.array([[5.0, 5, 0], [15, 5, 0]]), closed=False)
    plate = Part("plate", Contour(PLATE), (Contour(reverse(circle(10, 10, 3), closed=True)),), marks=(mark,))
    placements = [("plate", 1, 0.0, False, 20.0, 30.0), ("plate", 2, 30.0, False, 120.0, 30.0),
                  ("plate", 3, 90.0, True, 250.0, 100.0)]  # fmt: skip
    return SheetLayout("al3", "al", 3.0, BORDER, (), 260.0, 0.1, tuple(Placement(*p) for p in placements)), plate


def areas(path):
    """Areas of the closed contours of each layer, mm², smallest first, by ezdxf alone."""
    found: dict[str, list[float]] = {}
    doc = ezdxf.readfile(path)
    assert doc.audit().errors == []
    for entity in doc.modelspace():
        kind = entity.dxftype()
        if kind == "CIRCLE":
            found.setdefault(entity.dxf.layer, []).append(pi * entity.dxf.radius**2)
        elif kind in ("LWPOLYLINE", "POLYLINE") and entity.is_closed:
            found.setdefault(entity.dxf.layer, []).append(polyline_area(corners(entity)))
    return {layer: sorted(values) for layer, values in found.items()}


def corners(entity):
    if entity.dxftype() == "LWPOLYLINE":
        return entity.get_points("xyb")
    return [(v.dxf.location.x, v.dxf.location.y, v.dxf.bulge) for v in entity.vertices]


def polyline_area(points):
    """Polygon of the corners, and the segment of the circle that each bulge adds or takes."""
    total, turn = area([p[:2] for p in points]), np.sign(signed([p[:2] for p in points]))
    for (x0, y0, b), (x1, y1, _) in zip(points, points[1:] + points[:1], strict=True):
        if b:
            _, _, _, radius = bulge_to_arc((x0, y0), (x1, y1), b)
            sweep = 4.0 * np.arctan(abs(b))
            total += turn * np.sign(b) * radius**2 / 2.0 * (sweep - np.sin(sweep))
    return float(total)


def signed(ring):
    return sum(a[0] * b[1] - b[0] * a[1] for a, b in zip(ring, ring[1:] + ring[:1], strict=True))


def through(librecad, tmp_path, text):
    """Areas before and after."""
    (tmp_path / "written.dxf").write_text(text)
    librecad.save_as(tmp_path / "written.dxf", tmp_path / "saved.dxf")
    assert "dxfrw" in (tmp_path / "saved.dxf").read_text()[:20], "not written by LibreCAD's own library"
    return areas(tmp_path / "written.dxf"), areas(tmp_path / "saved.dxf")


def test_the_area_of_this_test_is_that_of_the_plate():
    assert polyline_area([tuple(p) for p in PLATE.tolist()]) == pytest.approx(PLATE_MM2)
    assert polyline_area([tuple(p) for p in reverse(PLATE, closed=True).tolist()]) == pytest.approx(PLATE_MM2)


@pytest.mark.parametrize("form", [None, Form.CUT_ONLY, Form.R12])
def test_sheet(librecad, tmp_path, form):
    layout, plate = sheet()
    more = {} if form is None else {"form": FORMS[form]}
    written, saved = through(librecad, tmp_path, sheet_drawing(layout, {"plate": plate}, **more))
    wanted = [pi * 9.0] * 3 + [PLATE_MM2] * 3
    assert written["CUT"] == pytest.approx(wanted, rel=1e-9)
    assert saved["CUT"] == pytest.approx(wanted, rel=1e-9)
    assert saved.keys() == written.keys()
    if form is not Form.CUT_ONLY:
        assert saved["SHEET"] == pytest.approx([60_000.0])


def test_rest_of_a_sheet(librecad, tmp_path):
    hole = np.array([[200.0, 100], [220, 100], [220, 120], [200, 120]])
    _, saved = through(librecad, tmp_path, border_drawing(BORDER, (hole,), notes=("mild-steel 3 mm",)))
    assert sorted(a for layer in saved.values() for a in layer) == pytest.approx([400.0, 60_000.0])


def test_repaired_drawing(librecad, tmp_path):
    """Four lines, one of them twice, and a hole as two half circles: one rectangle with a hole comes back."""

    def untidy(msp):
        box(msp, 0, 0, 80, 50)
        msp.add_line((0, 0), (80, 0))
        msp.add_arc((30, 20), 6, 0, 180)
        msp.add_arc((30, 20), 6, 180, 360)

    repaired = repair(drawn(tmp_path, untidy), RepairOptions())
    written, saved = through(librecad, tmp_path, repaired.text)
    assert [a for layer in written.values() for a in layer] == pytest.approx([pi * 36.0, 4000.0], rel=1e-9)
    assert saved == {layer: pytest.approx(values, rel=1e-9) for layer, values in written.items()}
