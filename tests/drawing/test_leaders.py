"""Leaders point from their texts to holes."""

import ezdxf
import pytest
from ezdxf.math import Vec2
from ezdxf.render import mleader

from flatprep.drawing.read import ReadOptions, read
from flatprep.measure.holes import recognise
from flatprep.practice.callout_holes import drawn_work


@pytest.fixture
def sheet():
    doc = ezdxf.new("R2010", setup=True)
    doc.header["$INSUNITS"] = 4
    space = doc.modelspace()
    space.add_lwpolyline([(0, 0), (100, 0), (100, 60), (0, 60)], close=True)
    for x in (20, 80):
        space.add_circle((x, 30), 2.1)
    return doc


def _read(doc, tmp_path):
    doc.saveas(tmp_path / "plate.dxf")
    return read(tmp_path / "plate.dxf", ReadOptions())


def _tapped(drawing):
    (part,) = drawing.parts
    return [work.at for work in drawn_work([recognise(c) for c in part.holes], drawing.texts).work]


def test_a_leader_that_names_its_text(sheet, tmp_path):
    """The text stands beside the left hole; its leader points to the right one."""
    text = sheet.modelspace().add_mtext("M5", {"insert": (24, 34), "char_height": 3})
    leader = sheet.modelspace().add_leader([(80, 32.1), (40, 45), (28, 35)])
    leader.dxf.annotation_handle = text.dxf.handle
    drawing = _read(sheet, tmp_path)
    assert drawing.texts[0].points_to == ((80, 32.1),)
    assert _tapped(drawing) == [((80, 30),)]


def test_a_leader_without_a_name_belongs_to_the_text_at_its_tail(sheet, tmp_path):
    sheet.modelspace().add_text("M5", height=3).set_placement((24, 50))
    sheet.modelspace().add_text("REV A", height=3).set_placement((70, 5))
    sheet.modelspace().add_leader([(80, 30), (30, 51)])
    drawing = _read(sheet, tmp_path)
    assert [text.points_to for text in drawing.texts] == [((80, 30),), ()]
    assert _tapped(drawing) == [((80, 30),)]


def test_a_tail_far_from_any_text_belongs_to_none(sheet, tmp_path):
    sheet.modelspace().add_text("M5", height=3).set_placement((24, 34))
    sheet.modelspace().add_leader([(80, 30), (60, 10)])
    assert _read(sheet, tmp_path).texts[0].points_to == ()


def test_a_leader_with_its_own_text(sheet, tmp_path):
    builder = sheet.modelspace().add_multileader_mtext("Standard")
    builder.set_content("M5 THRU", char_height=3)
    builder.add_leader_line(mleader.ConnectionSide.left, [Vec2(80, 32)])
    builder.build(insert=Vec2(20, 50))
    drawing = _read(sheet, tmp_path)
    assert [text.text for text in drawing.texts] == ["M5 THRU"]
    assert drawing.texts[0].points_to == ((80, 32),)
    assert _tapped(drawing) == [((80, 30),)]


def test_leaders_come_in_the_drawings_unit(sheet, tmp_path):
    sheet.header["$INSUNITS"] = 5  # centimetres
    sheet.modelspace().add_text("M5", height=3).set_placement((24, 50))
    sheet.modelspace().add_leader([(80, 30), (30, 51)])
    assert _read(sheet, tmp_path).texts[0].points_to == ((800, 300),)
