"""Outlines that no chain of ends closes: gaps between straight edges, edges that run past corners, overlap or stop."""

import pytest

from flatprep.drawing.read import read
from flatprep.repair.clean import repair
from flatprep.repair.values import RepairOptions

from .draw import box, drawn

W, H = 100.0, 60.0
CORNERS = ((0.0, 0.0), (W, 0.0), (W, H), (0.0, H))


def edges(msp, before, after):
    """Four edges, each begun `before` its corner and ended `after` it (mm); less than nothing leaves a gap."""
    for k, (x0, y0) in enumerate(CORNERS):
        x1, y1 = CORNERS[(k + 1) % 4]
        size = abs(x1 - x0) + abs(y1 - y0)
        dx, dy = (x1 - x0) / size, (y1 - y0) / size
        msp.add_line((x0 - dx * before, y0 - dy * before), (x1 + dx * after, y1 + dy * after))


def faults(drawing):
    return [(f.kind, f.closed) for f in drawing.faults]


@pytest.mark.parametrize("gap", [0.06, 0.1, 0.3, 1.0])
def test_straight_edges_with_gaps_are_an_outline(tmp_path, gap):
    drawing = read(drawn(tmp_path, lambda msp: edges(msp, -gap, 0.0)))
    (part,) = drawing.parts
    # a bridge cuts each corner off: half of gap x 0 to half of gap x gap, which is nothing to 6000 mm²
    assert part.area_mm2 == pytest.approx(W * H, abs=4 * gap * gap / 2 + 1e-9)
    assert faults(drawing) == [("open-contour", True)] * 4
    assert [f.measured_mm for f in drawing.faults] == pytest.approx([gap] * 4)


def test_a_stroke_closes_a_chain(tmp_path):
    def paint(msp):
        msp.add_lwpolyline([(W, 0), (0, 0), (0, H), (W, H)])
        msp.add_line((W, 0.2), (W, H - 0.2))

    (part,) = read(drawn(tmp_path, paint)).parts
    assert part.area_mm2 == pytest.approx(W * H, abs=0.1)


@pytest.mark.parametrize("past", [0.2, 2.0])
def test_edges_that_run_past_their_corners(tmp_path, past):
    drawing = read(drawn(tmp_path, lambda msp: edges(msp, past, past)))
    (part,) = drawing.parts
    assert part.area_mm2 == pytest.approx(W * H, rel=1e-9)
    (fault,) = drawing.faults
    assert (fault.kind, fault.closed, fault.measured_mm) == ("open-contour", True, pytest.approx(8 * past, rel=1e-6))


def test_edges_that_stop_on_their_neighbours(tmp_path):
    drawing = read(drawn(tmp_path, lambda msp: edges(msp, 0.5, 0.0)))
    assert [p.area_mm2 for p in drawing.parts] == pytest.approx([W * H], rel=1e-9)
    assert faults(drawing) == [("open-contour", True)]


def test_an_edge_in_two_pieces_that_overlap(tmp_path):
    def paint(msp):
        msp.add_line((0, 0), (60, 0))
        msp.add_line((40, 0), (W, 0))
        msp.add_lwpolyline([(W, 0), (W, H), (0, H), (0, 0)])

    drawing = read(drawn(tmp_path, paint))
    assert [p.area_mm2 for p in drawing.parts] == pytest.approx([W * H], rel=1e-9)
    (fault,) = drawing.faults
    assert fault.kind == "duplicate-line"
    assert fault.at == pytest.approx((50, 0), abs=0.01)


def test_a_line_along_an_edge_from_its_corner_is_told(tmp_path):
    def paint(msp):
        box(msp, 0, 0, W, H)
        msp.add_line((0, 0), (50, 0))

    drawing = read(drawn(tmp_path, paint))
    assert [p.area_mm2 for p in drawing.parts] == pytest.approx([W * H])
    assert faults(drawing) == [("duplicate-line", False)]


def test_an_outline_drawn_again_a_hair_beside_is_one(tmp_path):
    def paint(msp):
        for off in (0.0, 0.03):
            msp.add_lwpolyline([(x + off, y + off) for x, y in CORNERS], close=True)

    drawing = read(drawn(tmp_path, paint))
    assert [p.area_mm2 for p in drawing.parts] == pytest.approx([W * H])
    assert faults(drawing) == [("duplicate-line", False)]


def test_lines_that_cross_are_no_outline(tmp_path):
    """Centre marks, and three leaders that enclose a little triangle by chance."""

    def paint(msp):
        box(msp, 0, 0, W, H)
        for a, b in (
            ((45, 30), (55, 30)),
            ((50, 25), (50, 35)),
            ((10, 10), (40, 50)),
            ((40, 10), (10, 50)),
            ((5, 28), (60, 20)),
        ):
            msp.add_line(a, b)

    (part,) = read(drawn(tmp_path, paint)).parts
    assert part.holes == ()


def test_a_net_of_lines_is_no_outline_and_costs_little(tmp_path):
    """150 lines across 300: 45 000 crossings, and an outer border that they would give by chance."""

    def paint(msp):
        for k in range(150):
            msp.add_line((k, -1), (k, 300))
        for k in range(300):
            msp.add_line((-1, k), (150, k))

    drawing = read(drawn(tmp_path, paint))
    assert drawing.parts == ()
    assert len(drawing.loose) == 450


@pytest.mark.parametrize(("before", "after"), [(-0.1, 0.0), (1.0, 1.0)])
def test_repaired_twice_is_repaired_once(tmp_path, before, after):
    first = repair(drawn(tmp_path, lambda msp: edges(msp, before, after)), RepairOptions())
    again = tmp_path / "again.dxf"
    again.write_text(first.text, encoding="utf-8")
    assert repair(again, RepairOptions()).text == first.text
