"""What the DXF writer writes, read back with ezdxf alone."""

import io
import re
from concurrent.futures import ThreadPoolExecutor
from threading import Barrier

import ezdxf
import numpy as np
import pytest
from ezdxf.math import bulge_to_arc

from flatprep.drawing import write
from flatprep.drawing.words import Words
from flatprep.drawing.write import border_drawing, part_drawing, sheet_drawing
from flatprep.geom.bulge import Similarity, circle, reverse
from flatprep.model.drawing import Contour, Curve, Part
from flatprep.model.layout import Placement, SheetLayout

PLATE = np.array([[0.0, 0, 0], [40, 0, 1], [40, 20, 0], [0, 20, 0]])
HOLE = circle(10.0, 10.0, 3.0)


def part(name="plate", **more):
    return Part(name, Contour(PLATE), (Contour(reverse(HOLE, closed=True)),), **more)


def sheet(*placements, holes=()):
    outline = np.array([[0.0, 0], [300, 0], [300, 200], [0, 200]])
    return SheetLayout("al3", "al-5052-h32", 3.0, outline, holes, 100.0, 0.1, placements)


def read(text):
    return ezdxf.read(io.StringIO(text))


def on(doc, layer):
    return [e for e in doc.modelspace() if e.dxf.layer == layer]


def test_sheet_is_sound_in_millimetres_and_every_contour_one_closed_entity():
    doc = read(sheet_drawing(sheet(Placement("plate", 1, 0.0, False, 20.0, 30.0)), {"plate": part()}))
    assert doc.audit().errors == []
    assert doc.header["$INSUNITS"] == 4
    hole, outer = on(doc, "CUT")
    assert (hole.dxftype(), outer.dxftype()) == ("CIRCLE", "LWPOLYLINE")  # inner before outer
    assert (hole.dxf.center.x, hole.dxf.center.y, hole.dxf.radius) == (30.0, 40.0, 3.0)
    assert outer.closed
    assert [p[4] for p in outer.get_points()] == [0, 1, 0, 0]


def test_mirrored_and_turned_part_lands_where_the_placement_says():
    """(x, y) -> (-x, y) -> turned by 90 -> (-y, -x) -> moved by (100, 100)."""
    doc = read(sheet_drawing(sheet(Placement("plate", 1, 90.0, True, 100.0, 100.0)), {"plate": part()}))
    hole, outer = on(doc, "CUT")
    assert (hole.dxf.center.x, hole.dxf.center.y) == pytest.approx((90.0, 90.0))
    points = outer.get_points("xyb")
    assert [(x, y) for x, y, _ in points] == [(100.0, 100.0), (100.0, 60.0), (80.0, 60.0), (80.0, 100.0)]
    centre, _, _, radius = bulge_to_arc(points[1][:2], points[2][:2], points[1][2])
    assert (centre.x, centre.y, radius) == pytest.approx((90.0, 60.0, 10.0))
    assert points[1][2] == -1.0


def test_the_same_layout_gives_the_same_bytes():
    made = [sheet_drawing(sheet(Placement("plate", 1, 0.0, False, 20.0, 30.0)), {"plate": part()}) for _ in range(2)]
    assert made[0] == made[1]
    assert "2026" not in made[0].split("HANDSEED")[0].split("TDCREATE")[1][:40]


def test_marks_are_marked_and_bend_lines_only_noted():
    mark = Curve(np.array([[5.0, 5, 0], [15, 5, 0]]), closed=False)
    bend = Curve(np.array([[20.0, 0, 0], [20, 20, 0]]), closed=False)
    doc = read(
        sheet_drawing(sheet(Placement("plate", 1, 0.0, False, 0.0, 0.0)), {"plate": part(marks=(mark,), bends=(bend,))})
    )
    assert [e.dxftype() for e in on(doc, "MARK")] == ["LWPOLYLINE"]
    assert sum(e.dxftype() == "LWPOLYLINE" for e in on(doc, "NOTE")) == 1
    assert len(on(doc, "CUT")) == 2


def test_border_holes_and_labels_are_on_layers_of_their_own():
    hole = np.array([[200.0, 100], [220, 100], [220, 120], [200, 120]])
    layout = sheet(Placement("plate", 7, 0.0, False, 0.0, 0.0), holes=(hole,))
    doc = read(sheet_drawing(layout, {"plate": part()}, words=Words(("wheel hoe", "revision B"))))
    assert len(on(doc, "SHEET")) == 2
    assert {e.dxf.text for e in on(doc, "NOTE") if e.dxftype() == "TEXT"} == {"plate 7", "wheel hoe", "revision B"}
    styles = {layer.dxf.name: layer.dxf.linetype for layer in doc.layers}
    assert len({styles[n] for n in ("CUT", "MARK", "SHEET", "NOTE")}) == 4
    assert {doc.layers.get(n).dxf.color for n in ("CUT", "MARK", "SHEET", "NOTE")} == {8}


def test_every_label_and_a_list_under_the_sheet_say_which_drawing_was_cut():
    layout = sheet(*(Placement("plate", k, 0.0, False, 60.0 * k, 0.0) for k in (1, 2)))
    doc = read(sheet_drawing(layout, {"plate": part()}, words=Words(("wheel hoe",), {"plate": "rev. B c6cf1a719c"})))
    texts = [e for e in on(doc, "NOTE") if e.dxftype() == "TEXT"]
    assert [t.dxf.text for t in texts] == [
        "plate 1", "rev. B c6cf1a719c", "plate 2", "rev. B c6cf1a719c", "wheel hoe", "2 x plate  rev. B c6cf1a719c",
    ]  # fmt: skip
    assert texts[1].dxf.height < texts[0].dxf.height
    assert all(t.dxf.insert.y < 0.0 for t in texts[4:])


def test_part_drawing_keeps_the_parts_own_coordinates():
    doc = read(part_drawing([part(), Part("disc", Contour(circle(100.0, 5.0, 8.0)))], notes=("as cut",)))
    assert doc.audit().errors == []
    assert [e.dxftype() for e in on(doc, "CUT")] == ["CIRCLE", "LWPOLYLINE", "CIRCLE"]
    assert [e.dxf.text for e in on(doc, "NOTE")] == ["as cut"]


def test_border_drawing_can_be_read_as_an_outline():
    doc = read(border_drawing(PLATE, (HOLE,), notes=("rest",)))
    assert [e.dxftype() for e in on(doc, "CUT")] == ["LWPOLYLINE", "LWPOLYLINE"]
    assert all(e.closed for e in on(doc, "CUT"))


def test_classes_stand_in_an_order_that_no_hash_seed_changes():
    """What is in use is a set of names in ezdxf, and would be written as it happens to be kept."""
    text = sheet_drawing(sheet(Placement("plate", 1, 0.0, False, 20.0, 30.0)), {"plate": part()})
    section = text.split("CLASSES\n")[1].split("ENDSEC")[0]
    names = re.findall(r"^ *0\nCLASS\n *1\n(.*)$", section, re.MULTILINE)
    assert len(names) > 10
    assert names == sorted(names)


@pytest.mark.parametrize(
    ("layers", "version"), [(("CUT", "MARK", "SHEET", "NOTE"), "R2010"), (("CUT",), "R2010"), (("CUT",), "R12")]
)
@pytest.mark.parametrize("many", [0, 1, 300])
def test_what_all_documents_have_in_common_is_as_ezdxf_writes_it(layers, version, many):
    def document(made=write._document):
        doc = made(layers, version)
        for k in range(many):
            write._polyline(doc, "CUT", PLATE + float(k), closed=True)
            doc.modelspace().add_text(f"Hacke ü {k}", dxfattribs={"layer": layers[-1]})
            doc.modelspace().add_circle((k, 0.0), 1.0)
        return doc

    text = write._written(document())
    assert text == write._whole(document(write._new_document))
    assert text == write._written(document())  # drawn again on what the first one was drawn on
    handles = re.findall(r"\n  5\n([0-9A-F]+)\n", text.partition("$HANDSEED")[2])
    assert len(set(handles)) == len(handles)  # the seed, which is free, among them


def test_threads_draw_on_documents_of_their_own():
    ring = Contour(PLATE)
    both = Barrier(2)

    def drawn(_):
        doc = write._document(("CUT",))
        both.wait(10)  # each has its document before either draws
        write._contour(doc, ring, Similarity())
        both.wait(10)
        return write._written(doc)

    with ThreadPoolExecutor(2) as pool:
        one, other = pool.map(drawn, range(2))
    assert one == other
    assert one.count("\nLWPOLYLINE\n") == 1
