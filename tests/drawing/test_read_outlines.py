"""Drawings read: gaps, doubles, crossings and branches, contours in each other."""

from math import pi

import pytest

from flatprep.drawing.read import read

from .draw import CIRCLE_10, PLATE, box, drawn, kinds, plate


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
