"""Drawings read: which lines are the part."""

from math import pi, radians

import pytest
from ezdxf.math import Matrix44

from flatprep.drawing.read import ReadOptions, read
from flatprep.model.drawing import Role

from .draw import PLATE, box, drawn, kinds, new, plate, save


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


@pytest.mark.parametrize("layer", ["Sheet metal", "sheet-metal", "stock"])
def test_a_plate_on_a_layer_called_after_sheets_is_no_border(tmp_path, layer):
    def paint(msp):
        box(msp, 0, 0, 100, 60, layer=layer)
        for x in (20, 80):
            msp.add_circle((x, 30), 5, dxfattribs={"layer": "holes"})
        if layer != "stock":
            box(msp, 30, 10, 40, 40, layer="windows")

    window = 40 * 40 if layer != "stock" else 0
    (part,) = read(drawn(tmp_path, paint)).parts
    assert part.area_mm2 == pytest.approx(100 * 60 - 2 * pi * 25 - window)


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
        ("INVISIBLE", "A"),
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
