"""Drawings read: what lies in space, makes no sense, is too much or damaged."""

import pytest
from ezdxf.math import OCS, Matrix44, Vec3

from flatprep.base.errors import DrawingError
from flatprep.drawing.limits import ReadLimits
from flatprep.drawing.read import ReadOptions, read
from flatprep.model.drawing import UnitsFrom

from .draw import PLATE, box, drawn, kinds, new, plate, save


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
