"""Drawings read: the same part in every way of writing it, and everything that is not a part told."""

from math import cos, pi, radians, sin

import ezdxf
import pytest

from flatprep.drawing.read import ReadOptions, read
from flatprep.model.drawing import UnitsFrom

from .draw import CIRCLE_10, PLATE, box, drawn, kinds, new, plate, save


def circle_of_arcs(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_arc((40, 25), 10, 10, 190)
    msp.add_arc((40, 25), 10, 190, 370)


def full_turn_arc(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_arc((40, 25), 10, 0, 360)


def bulges(msp):
    msp.add_lwpolyline([(0, 0), (80, 0), (80, 50), (0, 50), (0, 0)], close=True)  # closed twice over
    msp.add_lwpolyline([(30, 25, 1), (50, 25, 1)], format="xyb", close=True)


def old_polyline(msp):
    msp.add_polyline2d([(0, 0), (80, 0), (80, 50), (0, 50)], close=True)
    msp.add_polyline2d([(30, 25, 1), (50, 25, 1)], format="xyb", close=True)


def full_ellipse_in_five_decimals(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_ellipse((40, 25), (-7e-8, -10), 1.0, 0, 6.28318)


def full_turn_arc_in_four_decimals(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_arc((40, 25), 10, 0.0, 359.9999)


def full_ellipse_a_hair_too_long(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_ellipse((40, 25), (10, 0), 1.0, 0, 6.2832)


def full_turn_arc_a_hair_too_long(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_arc((40, 25), 10, 0, 360.001)


def full_ellipse(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_ellipse((40, 25), (0, 10), 1.0)


def half_ellipses(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_ellipse((40, 25), (10, 0), 1.0, 0, pi)
    msp.add_ellipse((40, 25), (10, 0), 1.0, pi, 2 * pi)


def rational_spline(msp):
    box(msp, 0, 0, 80, 50)
    s = msp.add_spline(degree=2)
    ring = [(1, 0), (1, 1), (0, 1), (-1, 1), (-1, 0), (-1, -1), (0, -1), (1, -1), (1, 0)]
    s.control_points = [(40 + 10 * x, 25 + 10 * y) for x, y in ring]
    s.knots = [0, 0, 0, 1, 1, 2, 2, 3, 3, 4, 4, 4]
    s.weights = [1, 0.5**0.5] * 4 + [1]


def mirrored_plane(msp):
    for a, b in (((0, 0), (-80, 0)), ((-80, 0), (-80, 50)), ((-80, 50), (0, 50)), ((0, 50), (0, 0))):
        msp.add_lwpolyline([a, b], dxfattribs={"extrusion": (0, 0, -1)})
    msp.add_arc((-40, 25), 10, 0, 90, dxfattribs={"extrusion": (0, 0, -1)})
    msp.add_arc((-40, 25), 10, 90, 360, dxfattribs={"extrusion": (0, 0, -1)})


@pytest.mark.parametrize(
    "paint",
    [
        plate,
        circle_of_arcs,
        full_turn_arc,
        bulges,
        old_polyline,
        full_ellipse,
        full_ellipse_in_five_decimals,
        full_turn_arc_in_four_decimals,
        full_ellipse_a_hair_too_long,
        full_turn_arc_a_hair_too_long,
        half_ellipses,
        rational_spline,
        mirrored_plane,
    ],
)
def test_same_part_however_written(tmp_path, paint):
    drawing = read(drawn(tmp_path, paint))
    assert kinds(drawing) == []
    (part,) = drawing.parts
    assert part.name == "leaf"
    assert part.area_mm2 == pytest.approx(PLATE, rel=1e-6)
    assert part.cut_length_mm == pytest.approx(260 + 20 * pi, rel=1e-6)
    assert len(part.holes) == 1
    assert part.holes[0].circle == pytest.approx((40, 25, 10), abs=1e-5)
    assert part.moments.centroid == pytest.approx((40, 25), abs=1e-5)


def test_an_arc_across_its_own_zero_is_no_circle(tmp_path):
    """A fillet of a thousandth of a degree on either side of 0, as reversed outlines have them."""
    drawing = read(drawn(tmp_path, lambda msp: msp.add_arc((40, 25), 10, 359.999, 0.001)))
    assert drawing.parts == ()


@pytest.mark.parametrize("version", ["R12", "R2000", "R2004", "R2007", "R2010", "R2013", "R2018"])
def test_every_version(tmp_path, version):
    (part,) = read(drawn(tmp_path, circle_of_arcs, version)).parts
    assert part.area_mm2 == pytest.approx(PLATE)


@pytest.mark.parametrize(("flip", "turn", "scale"), [(1, 0, 1), (1, 33, 1), (-1, 90, 1), (1, -60, 2), (-1, 12, 0.5)])
def test_blocks_nested_turned_mirrored_scaled(tmp_path, flip, turn, scale):
    doc = new()
    plate(doc.blocks.new("INNER"))
    doc.blocks.new("OUTER", base_point=(5, 5)).add_blockref("INNER", (10, 0), dxfattribs={"rotation": 20})
    at = {"rotation": turn, "xscale": flip * scale, "yscale": scale, "zscale": scale}
    doc.modelspace().add_blockref("OUTER", (300, -40), dxfattribs=at)
    (part,) = read(save(doc, tmp_path)).parts
    assert part.area_mm2 == pytest.approx(PLATE * scale**2, rel=1e-9)
    # the hole's centre by hand: turn by 20, move, take off the base point, scale, turn, move
    x = 40 * cos(radians(20)) - 25 * sin(radians(20)) + 10 - 5
    y = 40 * sin(radians(20)) + 25 * cos(radians(20)) - 5
    x, y = flip * scale * x, scale * y
    t = radians(turn)
    expected = (x * cos(t) - y * sin(t) + 300, x * sin(t) + y * cos(t) - 40, 10 * scale)
    assert part.holes[0].circle == pytest.approx(expected, abs=1e-6)


def test_closed_spline_of_fit_points_alone(tmp_path):
    """Twelve points of a circle, the first not said again: a smooth curve through them has its area to 0.5 %."""

    def paint(msp):
        at = [(10 * cos(k * pi / 6), 10 * sin(k * pi / 6), 0) for k in range(12)]
        msp.add_spline(at).closed = True

    (part,) = read(drawn(tmp_path, paint)).parts
    assert part.area_mm2 == pytest.approx(CIRCLE_10, rel=5e-3)


def test_array_of_blocks(tmp_path):
    doc = new()
    doc.blocks.new("HOLE").add_circle((0, 0), 2)
    box(doc.modelspace(), 0, 0, 80, 50)
    at = {"row_count": 3, "column_count": 4, "row_spacing": 15, "column_spacing": 20}
    doc.modelspace().add_blockref("HOLE", (10, 10), dxfattribs=at)
    (part,) = read(save(doc, tmp_path)).parts
    assert sorted(h.circle[:2] for h in part.holes) == [(10 + 20 * i, 10 + 15 * j) for i in range(4) for j in range(3)]


def test_block_stretched_one_way_makes_an_ellipse(tmp_path):
    doc = new()
    doc.blocks.new("ROUND").add_circle((0, 0), 10)
    doc.modelspace().add_blockref("ROUND", (0, 0), dxfattribs={"xscale": 3, "yscale": 1})
    (part,) = read(save(doc, tmp_path)).parts
    assert part.area_mm2 == pytest.approx(pi * 30 * 10, rel=1e-4)


def test_block_content_on_layer_0_takes_the_layer_of_the_insertion(tmp_path):
    doc = new()
    doc.blocks.new("LINE").add_line((10, 5), (70, 5))
    box(doc.modelspace(), 0, 0, 80, 50)
    doc.modelspace().add_blockref("LINE", (0, 0), dxfattribs={"layer": "Bend"})
    (part,) = read(save(doc, tmp_path)).parts
    assert [c.layer for c in part.bends] == ["Bend"]


@pytest.mark.parametrize(("code", "mm"), [(1, 25.4), (2, 304.8), (4, 1.0), (5, 10.0), (6, 1000.0)])
def test_units_of_the_header(tmp_path, code, mm):
    """$INSUNITS codes: DXF reference, header section; 1 in = 25.4 mm exactly."""
    drawing = read(drawn(tmp_path, lambda m: box(m, 0, 0, 2, 1), unit=code))
    assert drawing.units_from is UnitsFrom.HEADER
    assert drawing.parts[0].size_mm == pytest.approx((2 * mm, mm))


@pytest.mark.parametrize("version", ["R2010", "R12"])
def test_no_unit_is_assumed_and_told(tmp_path, version):
    drawing = read(drawn(tmp_path, plate, version, unit=0))
    assert (drawing.units, drawing.units_from) == ("mm", UnitsFrom.ASSUMED)
    assert kinds(drawing) == ["unknown-units"]


def test_the_reading_librarys_own_default_is_no_unit(tmp_path):
    """A file without $INSUNITS is loaded as if it said metres (code 6)."""
    path = drawn(tmp_path, plate)
    text = path.read_text().replace("$INSUNITS", "$ANGBASE", 1)
    path.write_text(text)
    assert ezdxf.readfile(path).header.get("$INSUNITS", 6) == 6
    assert read(path).units_from is UnitsFrom.ASSUMED


def test_option_goes_before_the_header(tmp_path):
    drawing = read(drawn(tmp_path, plate, unit=1), ReadOptions(units="mm"))
    assert (drawing.units, drawing.units_from) == ("mm", UnitsFrom.OPTION)
    assert drawing.parts[0].size_mm == pytest.approx((80, 50))
