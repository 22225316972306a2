"""Drawings read: the same part in every way of writing it, and everything that is not a part told."""

from math import cos, pi, radians, sin

import ezdxf
import pytest
from ezdxf.math import OCS, Matrix44, Vec3

from flatprep.base.errors import DrawingError
from flatprep.drawing.limits import ReadLimits
from flatprep.drawing.read import ReadOptions, read
from flatprep.model.drawing import Role, UnitsFrom

from .draw import CIRCLE_10, box, drawn, new, save

PLATE = 80 * 50 - CIRCLE_10


def kinds(drawing):
    return [f.kind for f in drawing.faults]


def plate(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_circle((40, 25), 10)


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


def gappy(gap):
    def paint(msp):
        box(msp, 0, 0, 80, 50)
        for p, q in (((20, 10), (60, 10)), ((60, 10), (60, 40)), ((60, 40), (20, 40)), ((20, 40), (20, 10 + gap))):
            msp.add_line(p, q)

    return paint


def test_tiny_gap_closes_with_a_word(tmp_path):
    drawing = read(drawn(tmp_path, gappy(0.02)))
    assert len(drawing.parts[0].holes) == 1
    (fault,) = drawing.faults
    assert fault.kind == "open-contour"
    assert fault.measured_mm == pytest.approx(0.02)
    assert "closed" in fault.detail


def test_gap_is_measured_placed_and_the_hole_is_not_lost(tmp_path):
    drawing = read(drawn(tmp_path, gappy(0.7)))
    (fault,) = drawing.faults
    assert (fault.kind, fault.measured_mm) == ("open-contour", pytest.approx(0.7))
    assert fault.at == pytest.approx((20, 10.35))
    assert len(fault.handles) == 4
    assert len(drawing.parts[0].holes) == 1


def test_missing_edge_is_reported_with_both_ends(tmp_path):
    def paint(msp):
        box(msp, 0, 0, 80, 50)
        msp.add_lwpolyline([(20, 10), (60, 10), (60, 40), (20, 40)])

    drawing = read(drawn(tmp_path, paint))
    (fault,) = drawing.faults
    assert fault.measured_mm == pytest.approx(30)
    assert "(20.00, 10.00) and (20.00, 40.00)" in fault.detail
    assert len(drawing.loose) == 1
    assert drawing.parts[0].holes == ()


def test_small_true_fillet_is_not_swallowed(tmp_path):
    def paint(msp):
        msp.add_lwpolyline(
            [(0, 0), (79.96, 0, 0.4142135623730951), (80, 0.04), (80, 50), (0, 50)], format="xyb", close=True
        )
        for piece in list(msp):
            piece.explode()

    (part,) = read(drawn(tmp_path, paint)).parts
    assert len(part.outer.xyb) == 5


def test_parallel_bend_lines_side_by_side_are_no_outline(tmp_path):
    def paint(msp):
        box(msp, 0, 0, 80, 50)
        for x in (40, 41):
            msp.add_line((x, 1), (x, 49))

    drawing = read(drawn(tmp_path, paint))
    assert drawing.parts[0].holes == ()
    assert kinds(drawing) == ["open-contour", "open-contour"]
    assert all("single line" in f.detail for f in drawing.faults)


def test_doubles_are_taken_out_and_told(tmp_path):
    def paint(msp):
        plate(msp)
        msp.add_line((80, 0), (0, 0))
        msp.add_circle((40, 25), 10)

    drawing = read(drawn(tmp_path, paint))
    assert kinds(drawing) == ["duplicate-line", "duplicate-line"]
    assert drawing.parts[0].area_mm2 == pytest.approx(PLATE)


def test_line_along_part_of_an_edge_is_a_double(tmp_path):
    def paint(msp):
        plate(msp)
        msp.add_line((70, 0), (20, 0))

    drawing = read(drawn(tmp_path, paint))
    assert kinds(drawing) == ["duplicate-line"]
    assert drawing.loose == ()


def test_bow_tie_crosses_itself(tmp_path):
    def paint(msp):
        box(msp, 0, 0, 80, 50)
        msp.add_lwpolyline([(28, 17), (52, 33), (52, 17), (28, 33)], close=True)

    drawing = read(drawn(tmp_path, paint))
    (fault,) = drawing.faults
    assert fault.kind == "self-crossing"
    assert fault.at == pytest.approx((40, 25))
    # two triangles of 12 x 16 / 2
    assert drawing.parts[0].area_mm2 == pytest.approx(80 * 50 - 2 * 12 * 16 / 2)


def test_two_outlines_that_cross(tmp_path):
    def paint(msp):
        box(msp, 0, 0, 80, 50)
        msp.add_circle((80, 25), 10)

    assert "self-crossing" in kinds(read(drawn(tmp_path, paint)))


@pytest.mark.parametrize("panel", [False, True])
@pytest.mark.parametrize("exploded", [False, True])
def test_the_panel_between_flaps_is_material(tmp_path, exploded, panel):
    """A flat pattern drawn as flaps and strips, the panel in the middle with or without a contour of its own."""

    def paint(msp):
        for x, y, w, h in ((0, 20, 20, 60), (80, 20, 20, 60), (20, 0, 60, 20), (20, 80, 60, 20)):
            msp.add_lwpolyline([(x, y), (x + w, y), (x + w, y + h), (x, y + h)], close=True)
        for x, y in ((20, 20), (77, 20), (20, 77), (77, 77)):
            msp.add_lwpolyline([(x, y), (x + 3, y), (x + 3, y + 3), (x, y + 3)], close=True)
        if panel:  # its own contour, inside a rectangle of bend lines that runs along the middle of the strips
            msp.add_lwpolyline([(20, 20), (80, 20), (80, 80), (20, 80)], close=True)
        msp.add_circle((50, 50), 10)
        if exploded:
            for line in msp.query("LWPOLYLINE"):
                line.explode()

    (part,) = read(drawn(tmp_path, paint)).parts
    assert part.area_mm2 == pytest.approx(4 * 1200 + 3600 - CIRCLE_10)


def test_strips_that_share_edges_are_one_part(tmp_path):
    def paint(msp):
        box(msp, 0, 0, 30, 50)
        msp.add_lwpolyline([(30, 0), (33, 0), (33, 50), (30, 50)], close=True)
        msp.add_lwpolyline([(33, 0), (80, 0), (80, 50), (33, 50)], close=True)
        msp.add_circle((60, 25), 10)

    drawing = read(drawn(tmp_path, paint))
    (part,) = drawing.parts
    assert part.area_mm2 == pytest.approx(PLATE, rel=1e-9)
    assert set(kinds(drawing)) == {"duplicate-line"}


def test_branching_lines_give_the_outline_and_an_inner_edge(tmp_path):
    def paint(msp):
        box(msp, 0, 0, 30, 50)
        for p, q in (((30, 0), (80, 0)), ((80, 0), (80, 50)), ((80, 50), (30, 50))):
            msp.add_line(p, q)

    drawing = read(drawn(tmp_path, paint))
    (part,) = drawing.parts
    assert part.area_mm2 == pytest.approx(80 * 50)
    assert len(part.marks) == 1
    assert kinds(drawing) == ["open-contour"]


def test_arcs_survive_the_planar_graph(tmp_path):
    def paint(msp):
        msp.add_arc((0, 0), 30, 0, 180)
        msp.add_line((-30, 0), (30, 0))
        msp.add_arc((0, 0), 30, 180, 360)

    (part,) = read(drawn(tmp_path, paint)).parts
    assert part.area_mm2 == pytest.approx(pi * 900, rel=1e-9)


def test_depth_two_is_a_part_of_its_own(tmp_path):
    def paint(msp):
        box(msp, 0, 0, 200, 150)
        box(msp, 20, 20, 160, 110)
        msp.add_circle((60, 60), 30)
        msp.add_circle((60, 60), 10)

    drawing = read(drawn(tmp_path, paint))
    assert [(p.name, p.depth, len(p.holes)) for p in drawing.parts] == [("leaf#1", 0, 1), ("leaf#2", 2, 1)]
    assert drawing.parts[1].area_mm2 == pytest.approx(pi * (900 - 100))


@pytest.mark.parametrize("turned", [False, True])
def test_ends_that_do_not_meet_are_joined_midway(tmp_path, turned):
    """Whichever line was drawn first, and whichever way it runs."""

    def paint(msp):
        lines = [((0, 0), (80, 0)), ((80.02, 0), (80.02, 50)), ((80.02, 50), (0, 50)), ((0, 50), (0, 0))]
        for a, b in reversed(lines) if turned else lines:
            msp.add_line(*((b, a) if turned else (a, b)))

    (part,) = read(drawn(tmp_path, paint)).parts
    corners = sorted((round(x, 6), round(y, 6)) for x, y, _ in part.outer.xyb.tolist())
    assert corners == [(0, 0), (0, 50), (80.01, 0), (80.02, 50)]


def test_outer_runs_left_and_holes_run_right(tmp_path):
    from flatprep.geom.bulge import signed_area

    (part,) = read(drawn(tmp_path, plate)).parts
    assert signed_area(part.outer.xyb) > 0 > signed_area(part.holes[0].xyb)


@pytest.mark.parametrize("turn_deg", [0, 33.7])
def test_sheet_border_around_parts_is_not_cut(tmp_path, turn_deg):
    def paint(msp):
        box(msp, -10, -10, 400, 200)
        for x in (0, 100, 200):
            box(msp, x, 0, 80, 50)
            msp.add_circle((x + 40, 25), 10)
        for entity in msp:
            entity.transform(Matrix44.z_rotate(radians(turn_deg)))

    drawing = read(drawn(tmp_path, paint))
    assert [p.area_mm2 for p in drawing.parts] == pytest.approx([PLATE] * 3)
    assert "sheet's border" in drawing.faults[0].detail


def test_a_plate_with_counterbores_is_no_border(tmp_path):
    def paint(msp):
        box(msp, 0, 0, 100, 60)
        for x, y in ((10, 10), (90, 10), (90, 50), (10, 50)):
            msp.add_circle((x, y), 5)
            msp.add_circle((x, y), 3)

    drawing = read(drawn(tmp_path, paint))
    assert "layer-role" not in kinds(drawing)
    whole = max(p.area_mm2 for p in drawing.parts)
    assert whole == pytest.approx(100 * 60 - 4 * pi * 25)


@pytest.mark.parametrize(
    ("borders", "layer", "hole"),
    [
        pytest.param([(-60, -70, 297, 210), (-50, -60, 277, 190)], "0", 10, id="A4 and the frame on it"),
        pytest.param([(-60, -70, 250, 180)], "SHEET_1", 0, id="called a sheet"),
    ],
)
def test_paper_around_one_part_is_not_cut(tmp_path, borders, layer, hole):
    def paint(msp):
        box(msp, 0, 0, 80, 50)
        if hole:
            msp.add_circle((40, 25), hole)
        for border in borders:
            box(msp, *border, layer=layer)

    drawing = read(drawn(tmp_path, paint))
    (part,) = drawing.parts
    assert part.area_mm2 == pytest.approx(80 * 50 - pi * hole**2)
    assert kinds(drawing) == ["layer-role"] * len(borders)


@pytest.mark.parametrize(
    ("layer", "role"),
    [
        ("BEND", Role.BEND),
        ("bend_lines", Role.BEND),
        ("Biegelinien", Role.BEND),
        ("Engraving", Role.MARK),
        ("etch-front", Role.MARK),
        ("DIM", Role.IGNORE),
        ("centerlines", Role.IGNORE),
        ("0", Role.CUT),
        ("Cut", Role.CUT),
        ("Bracket", Role.CUT),  # no word within another
        ("Kanten", Role.CUT),
        ("X-Axis guide", Role.CUT),
        ("GIĘCIE", Role.BEND),
        ("Línea de doblez", Role.BEND),
        ("Piegature", Role.BEND),
        ("laserfold", Role.BEND),
        ("折弯", Role.BEND),
        ("Gravírování", Role.MARK),
        ("GRAVAÇÃO", Role.MARK),
        ("Гравировка", Role.MARK),
        ("half-cut", Role.MARK),
        ("2_RASTER", Role.MARK),
        ("COUNTERBORE", Role.MARK),
        ("Text", Role.MARK),
        ("Bemaßung", Role.IGNORE),
        ("COTES", Role.IGNORE),
        ("Cięcie", Role.CUT),
    ],
)
def test_roles_by_layer_name(tmp_path, layer, role):
    def paint(msp):
        plate(msp)
        msp.add_line((10, 5), (70, 5), dxfattribs={"layer": layer})

    drawing = read(drawn(tmp_path, paint))
    assert {n: r for n, r, _ in drawing.roles}[layer] is role
    told = [f.detail for f in drawing.faults if f.kind == "layer-role"]
    assert len(told) == (role is not Role.CUT)


@pytest.mark.parametrize(
    ("name", "dashes", "role"),
    [
        ("CENTER2", [1.0, 0.75, -0.125, 0.0, -0.125], Role.IGNORE),
        ("Strich", [1.0, 0.5, -0.5], Role.MARK),  # dashed, ISO 128-2 line 02
        ("Punkt", [0.2, 0.0, -0.2], Role.MARK),  # dotted, line 07
        ("Strichpunkt", [2.0, 1.5, -0.2, 0.1, -0.2], Role.IGNORE),  # long-dashed short-dashed, line 08
        ("Zweipunkt", [2.0, 1.2, -0.2, 0.0, -0.2, 0.0, -0.2], Role.BEND),  # long-dashed double-dotted, line 05
        ("Voll", [0.0], Role.CUT),
    ],
)
def test_linetypes_on_a_layer_that_is_cut(tmp_path, name, dashes, role):
    """Named or not: what is not cut is told, and stays with the part."""
    doc = new()
    doc.linetypes.add(name, dashes)
    plate(doc.modelspace())
    box(doc.modelspace(), 5, 5, 10, 10, linetype=name)
    drawing = read(save(doc, tmp_path))
    assert [p.area_mm2 for p in drawing.parts] == pytest.approx([PLATE - (100 if role is Role.CUT else 0)])
    assert len(drawing.parts[0].marks) == 4 * (role is Role.MARK)
    assert len(drawing.parts[0].bends) == 4 * (role is Role.BEND)
    told = [f.detail for f in drawing.faults if f.kind == "layer-role"]
    assert len(told) == (role is not Role.CUT)
    assert all(f"{name.upper()} lines on layer “0” are taken as {role}" in words for words in told)
    assert {n: r for n, r, _ in drawing.roles} == {"0": Role.CUT}


def test_said_roles_go_before_guesses(tmp_path):
    def paint(msp):
        box(msp, 0, 0, 80, 50)
        msp.add_circle((40, 25), 10, dxfattribs={"layer": "Engraving"})

    assert read(drawn(tmp_path, paint)).parts[0].holes == ()
    said = read(drawn(tmp_path, paint), ReadOptions(roles={"engraving": Role.CUT}))
    assert len(said.parts[0].holes) == 1
    assert kinds(said) == []


def test_guesses_that_leave_nothing_to_cut_are_taken_back(tmp_path):
    drawing = read(drawn(tmp_path, lambda m: box(m, 0, 0, 80, 50, layer="Notes")))
    assert len(drawing.parts) == 1


def test_layer_switched_off_is_not_cut(tmp_path):
    doc = new()
    doc.layers.add("hidden helper").off()
    plate(doc.modelspace())
    doc.modelspace().add_circle((10, 10), 3, dxfattribs={"layer": "hidden helper"})
    assert len(read(save(doc, tmp_path)).parts[0].holes) == 1


def test_what_is_not_shown_is_not_cut(tmp_path):
    """An invisible entity, in model space and in a block, and a block inserted on a frozen layer."""
    doc = new()
    doc.layers.add("old").freeze()
    block = doc.blocks.new("ALL")
    plate(block)
    block.add_circle((10, 10), 3, dxfattribs={"invisible": 1, "layer": "A"})
    msp = doc.modelspace()
    msp.add_blockref("ALL", (0, 0))
    msp.add_blockref("ALL", (200, 0), dxfattribs={"layer": "old"})
    msp.add_line((5, 40), (9, 40), dxfattribs={"invisible": 1})
    drawing = read(save(doc, tmp_path))
    assert [p.area_mm2 for p in drawing.parts] == pytest.approx([PLATE])
    assert sorted((s.kind, s.layer) for s in drawing.skipped) == [
        ("INVISIBLE", "0"),
        ("INVISIBLE", "A"),
        ("INVISIBLE", "old"),
    ]
    assert [f.kind for f in drawing.faults] == ["layer-role"]


def test_texts_and_annotation_are_listed(tmp_path):
    def paint(msp):
        plate(msp)
        msp.add_text("4x M5", height=3, dxfattribs={"insert": (5, 5)})
        msp.add_mtext("note\\Ptwo lines", dxfattribs={"insert": (5, 15), "char_height": 2})
        msp.add_point((1, 1))
        msp.add_hatch()

    drawing = read(drawn(tmp_path, paint))
    assert [(t.text, t.at) for t in drawing.texts] == [("4x M5", (5, 5)), ("note\ntwo lines", (5, 15))]
    assert sorted(s.kind for s in drawing.skipped) == ["HATCH", "POINT"]


def test_paper_space_is_mentioned(tmp_path):
    doc = new()
    plate(doc.modelspace())
    doc.layout("Layout1").add_line((0, 0), (1, 1))
    assert "paper space" in read(save(doc, tmp_path)).skipped[-1].reason


def test_body_drawn_as_wires_gives_its_outline_once(tmp_path):
    def paint(msp):
        for z in (0, -5):
            for a, b in (((0, 0), (80, 0)), ((80, 0), (80, 50)), ((80, 50), (0, 50)), ((0, 50), (0, 0))):
                msp.add_line((*a, z), (*b, z))
        for x, y in ((0, 0), (80, 0), (80, 50), (0, 50)):
            msp.add_line((x, y, 0), (x, y, -5))

    drawing = read(drawn(tmp_path, paint))
    assert drawing.parts[0].area_mm2 == pytest.approx(4000)
    assert kinds(drawing)[0] == "off-plane"


@pytest.mark.parametrize("right", [False, True])
def test_a_part_that_stands_upright_is_laid_flat(tmp_path, right):
    """Seen from the front x runs to the right, seen from the right y does; z goes up."""

    def at(u, v):
        return (3, u, v) if right else (u, 3, v)

    def paint(msp):
        for a, b in (((0, 0), (80, 0)), ((80, 0), (80, 50)), ((80, 50), (0, 50)), ((0, 50), (0, 0))):
            msp.add_line(at(*a), at(*b))
        # a hole at (20, 25): the plane of a circle has its own axes (arbitrary axis algorithm)
        look = (1, 0, 0) if right else (0, -1, 0)
        msp.add_circle(OCS(look).from_wcs(Vec3(at(20, 25))), 10, dxfattribs={"extrusion": look})

    drawing = read(drawn(tmp_path, paint))
    (part,) = drawing.parts
    assert part.area_mm2 == pytest.approx(PLATE)
    assert part.outer.bounds == pytest.approx((0, 0, 80, 50))
    assert part.holes[0].circle == pytest.approx((20, 25, 10))
    assert [f.kind for f in drawing.faults] == ["off-plane", "off-plane"]


def test_tilted_circle_is_told(tmp_path):
    def paint(msp):
        plate(msp)
        msp.add_circle((0, 0), 5, dxfattribs={"extrusion": (1, 0, 1)})

    (skipped,) = read(drawn(tmp_path, paint)).skipped
    assert "tilted" in skipped.reason


@pytest.mark.parametrize("radius", [0, -5, float("nan")])
def test_senseless_circles_are_told(tmp_path, radius):
    def paint(msp):
        plate(msp)
        msp.add_circle((0, 0), radius)

    drawing = read(drawn(tmp_path, paint))
    assert len(drawing.parts) == 1
    assert "unusable" in drawing.skipped[0].reason


def test_entity_without_length_is_told(tmp_path):
    def paint(msp):
        plate(msp)
        msp.add_line((3, 3), (3, 3))

    (fault,) = read(drawn(tmp_path, paint)).faults
    assert (fault.kind, fault.at) == ("tiny-segment", (3, 3))


def test_far_from_the_origin(tmp_path):
    doc = new()
    plate(doc.modelspace())
    for e in doc.modelspace():
        e.transform(Matrix44.translate(-15000, 4.2e6, 0))
    (part,) = read(save(doc, tmp_path)).parts
    assert part.area_mm2 == pytest.approx(PLATE, rel=1e-6)


def test_block_that_inserts_itself_is_refused(tmp_path):
    doc = new()
    doc.blocks.new("A").add_blockref("A", (1, 1))
    doc.modelspace().add_blockref("A", (0, 0))
    with pytest.raises(DrawingError, match="inserts itself"):
        read(save(doc, tmp_path))


def test_kinds_that_nobody_knows_cost_themselves(tmp_path):
    file = drawn(tmp_path, plate, "R12")
    whole = file.read_text()
    stranger = "  0\nSTRANGER\n  5\nFFF\n  8\nX\n 10\n1.0\n 20\n2.0\n  0\nCIRCLE\n"
    assert whole.count("  0\nCIRCLE\n") == 1
    file.write_text(whole.replace("  0\nCIRCLE\n", stranger))
    drawing = read(file)
    assert [p.area_mm2 for p in drawing.parts] == pytest.approx([PLATE])
    assert [(s.kind, s.layer) for s in drawing.skipped] == [("STRANGER", "X")]


def test_a_block_of_no_size_costs_itself(tmp_path):
    doc = new()
    plate(doc.modelspace())
    plate(doc.blocks.new("NIL"))
    doc.modelspace().add_blockref("NIL", (0, 0), dxfattribs={"xscale": 0.5})
    file = save(doc, tmp_path)
    whole = file.read_text()
    assert whole.count(" 41\n0.5\n") == 1
    file.write_text(whole.replace(" 41\n0.5\n", " 41\n0.0\n"))
    drawing = read(file)
    assert [p.area_mm2 for p in drawing.parts] == pytest.approx([PLATE])
    assert [s.kind for s in drawing.skipped] == ["INSERT"]


def test_nothing_but_a_block_of_no_size(tmp_path):
    doc = new()
    plate(doc.blocks.new("NIL"))
    doc.modelspace().add_blockref("NIL", (0, 0), dxfattribs={"xscale": 0.5, "yscale": 0.5, "zscale": 0.5})
    file = save(doc, tmp_path)
    file.write_text(file.read_text().replace("\n0.5\n", "\n0.0\n"))
    drawing = read(file)
    assert drawing.parts == ()
    assert [s.kind for s in drawing.skipped] == ["INSERT"]


def test_a_million_copies_are_refused_before_they_are_made(tmp_path):
    doc = new()
    doc.blocks.new("C").add_circle((0, 0), 1)
    at = {"row_count": 1000, "column_count": 1000, "row_spacing": 3, "column_spacing": 3}
    doc.modelspace().add_blockref("C", (0, 0), dxfattribs=at)
    with pytest.raises(DrawingError, match="entities once its blocks"):
        read(save(doc, tmp_path))


def test_caps_are_values(tmp_path):
    path = drawn(tmp_path, plate)
    with pytest.raises(DrawingError, match="more than the 4"):
        read(path, ReadOptions(limits=ReadLimits(entities=4)))
    with pytest.raises(DrawingError, match="vertices"):
        read(path, ReadOptions(limits=ReadLimits(vertices=6)))


@pytest.mark.parametrize(
    ("content", "words"),
    [
        (b"", "empty"),
        (b"\0" * 1000, "empty"),
        (b"%PDF-1.7\nrubbish", "not a DXF"),
        (b"hello world\n" * 30, "not readable as DXF"),
    ],
)
def test_no_drawing_at_all(tmp_path, content, words):
    path = tmp_path / "x.dxf"
    path.write_bytes(content)
    with pytest.raises(DrawingError, match=words):
        read(path)


def test_missing_file(tmp_path):
    with pytest.raises(DrawingError, match=r"none\.dxf"):
        read(tmp_path / "none.dxf")


@pytest.mark.parametrize("end", [b"\r", b"\r\n"])
def test_line_ends(tmp_path, end):
    path = drawn(tmp_path, plate)
    path.write_bytes(path.read_bytes().replace(b"\r\n", b"\n").replace(b"\n", end))
    drawing = read(path)
    assert drawing.units_from is UnitsFrom.HEADER
    assert drawing.parts[0].area_mm2 == pytest.approx(PLATE)


def test_conflict_markers_are_read_past(tmp_path):
    path = drawn(tmp_path, plate)
    text = path.read_text()
    path.write_text(text.replace("ENTITIES\n", "ENTITIES\n<<<<<<< ours\n=======\n  0\nCIRCLE\n>>>>>>> theirs\n", 1))
    drawing = read(path)
    assert drawing.parts[0].area_mm2 == pytest.approx(PLATE)
    assert "conflict" in drawing.faults[0].detail


@pytest.mark.parametrize(
    ("unit", "size", "hole", "likely"),
    [
        pytest.param(1, 370, 3.4, "mm", id="inch header, mm values"),
        pytest.param(6, 150, 3.0, "mm", id="metre header, mm values"),
        pytest.param(1, 90, 5.0, "mm", id="inch header, only the holes give it away"),
        pytest.param(4, 2.5, 0.2, "in", id="mm header, inch values"),
        pytest.param(4, 370, 3.4, None, id="sound"),
        pytest.param(1, 12, 0.25, None, id="sound inches"),
    ],
)
def test_unit_held_against_sizes(tmp_path, unit, size, hole, likely):
    def paint(msp):
        box(msp, 0, 0, size, size / 2)
        for k in (1, 2, 3):
            msp.add_circle((k * size / 4, size / 4), hole / 2)

    drawing = read(drawn(tmp_path, paint, unit=unit))
    told = [f.detail for f in drawing.faults if f.kind == "doubtful-units"]
    assert len(told) == (likely is not None)
    assert all(f"drawn in {likely}" in words for words in told)
    said = read(drawn(tmp_path, paint, unit=unit), ReadOptions(units="in"))
    assert said.faults == ()


def test_frozen_layer_that_is_called_outline_is_cut(tmp_path):
    doc = new()
    for name in ("outline", "outline-old"):
        doc.layers.add(name).freeze()
    box(doc.modelspace(), 0, 0, 80, 50, layer="outline")
    box(doc.modelspace(), 0, 0, 90, 60, layer="outline-old")
    doc.modelspace().add_circle((40, 25), 10)
    (part,) = read(save(doc, tmp_path)).parts
    assert part.area_mm2 == pytest.approx(PLATE)
