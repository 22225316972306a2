"""Repair: what it puts right, what it tells, what it leaves alone; its own output it leaves as it is."""

from itertools import pairwise
from math import cos, pi, radians, sin

import ezdxf
import pytest
from ezdxf.math import Matrix44

from flatprep.drawing.read import read
from flatprep.model.drawing import Role
from flatprep.repair.clean import repair
from flatprep.repair.values import RepairOptions
from tests.drawing.draw import CIRCLE_10, box, drawn, new, save

WRONG = {"open-contour", "duplicate-line", "off-plane"}


def clean(tmp_path, paint, options=None, **how):
    """Repair a painted drawing; returns the answer and the clean drawing, opened."""
    done = repair(drawn(tmp_path, paint, **how), options)
    out = tmp_path / "clean.dxf"
    out.write_text(done.text)
    return done, out


def kinds(done):
    return [c.kind for c in done.changes if c.kind != "layer"]


def plate(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_circle((40, 25), 10)


def gappy(msp):
    msp.add_line((0, 0), (80, 0))
    msp.add_line((80.03, 0), (80, 50))
    msp.add_line((80, 50.02), (0, 50))
    msp.add_line((0, 50), (0, 0))
    msp.add_circle((40, 25), 10)


def doubled(msp):
    plate(msp)
    msp.add_line((80, 0), (0, 0))
    msp.add_circle((40, 25), 10)
    msp.add_line((10, 0), (30, 0))


def empty_lines(msp):
    plate(msp)
    msp.add_line((80, 50), (80, 50))
    msp.add_line((3, 3), (3, 3))


def two_heights(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_circle((40, 25, 3), 10)


def in_blocks(msp):
    block = msp.doc.blocks.new("HOLE")
    block.add_circle((0, 0), 5)
    outer = msp.doc.blocks.new("PLATE")
    box(outer, 0, 0, 40, 25)
    outer.add_blockref("HOLE", (20, 12.5))
    msp.add_blockref("PLATE", (0, 0), dxfattribs={"xscale": 2, "yscale": 2, "zscale": 2})


def ellipse_hole(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_ellipse((40, 25), (10, 0), 1.0)


@pytest.mark.parametrize(
    ("paint", "expected"),
    [
        (plate, []),
        (gappy, ["joined", "joined"]),
        (doubled, ["double"] * 3),
        (empty_lines, ["no-length"] * 2),
        (two_heights, ["flattened"]),
        (in_blocks, ["exploded"]),
        (ellipse_hole, ["curve"]),
    ],
)
def test_what_is_put_right(tmp_path, paint, expected):
    done, out = clean(tmp_path, paint)
    assert kinds(done) == expected
    after = read(out)
    assert not WRONG & {f.kind for f in after.faults}
    (part,) = after.parts
    assert part.area_mm2 == pytest.approx(4000 - CIRCLE_10, abs=2.0 if paint is gappy else 1e-6)
    assert sorted(e.dxftype() for e in ezdxf.readfile(out).modelspace()) == ["CIRCLE", "LWPOLYLINE"]


def test_changes_say_where(tmp_path):
    done, _ = clean(tmp_path, gappy)
    places = sorted((round(c.at[0], 3), round(c.at[1], 3)) for c in done.changes if c.kind == "joined")
    assert places == [(80.0, 50.01), (80.015, 0.0)]
    done, _ = clean(tmp_path, empty_lines)
    assert {c.at for c in done.changes if c.kind == "no-length"} == {(80.0, 50.0), (3.0, 3.0)}


@pytest.mark.parametrize("paint", [plate, gappy, doubled, two_heights, in_blocks])
def test_the_result_passes_the_audit_and_is_in_mm_on_its_layers(tmp_path, paint):
    _, out = clean(tmp_path, paint)
    doc = ezdxf.readfile(out)
    assert doc.header["$INSUNITS"] == 4
    assert doc.audit().errors == []
    assert {e.dxf.layer for e in doc.modelspace()} == {"CUT"}


def messy(msp):
    gappy(msp)
    n = 24
    msp.add_lwpolyline([(10 + 2 * cos(2 * pi * k / n), 10 + 2 * sin(2 * pi * k / n)) for k in range(n)], close=True)
    msp.add_line((10, 40), (70, 40), dxfattribs={"layer": "fold"})
    msp.add_line((10, 30), (70, 30), dxfattribs={"layer": "engraving"})
    msp.add_line((200, 0), (260, 40))
    msp.add_lwpolyline([(20, 5), (30, 5), (20, 9), (30, 9)], close=True)
    msp.add_text("RIGHT", height=4, dxfattribs={"insert": (60, 10)})
    msp.add_mtext("left\nhand", dxfattribs={"insert": (300, 10), "char_height": 3})


def test_repairing_twice_changes_nothing(tmp_path):
    done, out = clean(tmp_path, messy)
    again = repair(out)
    assert again.text == done.text
    assert again.changes == ()
    assert {f.rule for f in again.left} == {f.rule for f in done.left}


def test_layers_by_use(tmp_path):
    _, out = clean(tmp_path, messy)
    by_layer = {}
    for e in ezdxf.readfile(out).modelspace():
        by_layer.setdefault(e.dxf.layer, []).append(e.dxftype())
    assert by_layer["BEND"] == by_layer["MARK"] == ["LWPOLYLINE"]
    assert sorted(by_layer["CUT"]) == ["CIRCLE", "CIRCLE", *["LWPOLYLINE"] * 3, "TEXT"]
    assert by_layer["NOTE"] == ["MTEXT"]
    (part, *_) = read(out).parts
    assert (len(part.bends), len(part.marks)) == (1, 1)


def test_what_is_not_known_is_left_and_told(tmp_path):
    done, _ = clean(tmp_path, messy)
    assert sorted(f.rule for f in done.left) == ["open-contour", "self-crossing", "text-not-outlined"]
    assert all(f.at is not None and f.remedy for f in done.left)


def test_a_crossing_outline_is_written_as_it_was_drawn(tmp_path):
    _, out = clean(tmp_path, lambda msp: msp.add_lwpolyline([(0, 0), (30, 0), (0, 20), (30, 20)], close=True))
    (line,) = ezdxf.readfile(out).modelspace()
    assert [p[:2] for p in line.get_points("xy")] == [(0, 0), (30, 0), (0, 20), (30, 20)]


def notched(gap):
    def paint(msp):
        points = [(0, gap), (0, 50), (80, 50), (80, 0), (0, 0)]
        for a, b in pairwise(points):
            msp.add_line(a, b)

    return paint


@pytest.mark.parametrize(
    ("gap", "allowed", "closed"),
    [(0.08, 0.1, True), (0.1, 0.1, True), (0.3, 0.1, False), (0.3, 0.35, True), (0.08, 0.07, False)],
)
def test_gaps_are_closed_up_to_the_width_that_is_allowed(tmp_path, gap, allowed, closed):
    done, out = clean(tmp_path, notched(gap), RepairOptions(gap_mm=allowed + 1e-9))
    (line,) = ezdxf.readfile(out).modelspace()
    assert bool(line.closed) is closed
    assert kinds(done) == (["joined"] if closed else [])
    assert [f.rule for f in done.left] == ([] if closed else ["open-contour"])
    if not closed:
        assert done.left[0].measured == pytest.approx(gap)
        assert "--gap" in done.left[0].remedy
        ends = [line.get_points("xy")[k] for k in (0, -1)]
        assert sorted(ends) == [(0, 0), (0, pytest.approx(gap))]


def test_inches_become_millimetres(tmp_path):
    done, out = clean(tmp_path, lambda msp: box(msp, 0, 0, 2, 1), unit=1)
    assert kinds(done) == ["unit"]
    assert read(out).parts[0].size_mm == pytest.approx((50.8, 25.4))
    assert read(out).units == "mm"


def test_an_unknown_unit_is_told_and_an_option_settles_it(tmp_path):
    done, _ = clean(tmp_path, plate, unit=0)
    assert [f.rule for f in done.left] == ["unknown-units"]
    done, out = clean(tmp_path, plate, RepairOptions(units="in"), unit=0)
    assert done.left == ()
    assert read(out).parts[0].size_mm == pytest.approx((80 * 25.4, 50 * 25.4))


def test_layers_said_by_the_user(tmp_path):
    def paint(msp):
        plate(msp)
        msp.add_line((5, 5), (75, 5), dxfattribs={"layer": "L7"})

    done, out = clean(tmp_path, paint, RepairOptions(roles={"L7": Role.BEND}))
    assert done.left == ()
    assert len(read(out).parts[0].bends) == 1


def test_chords_become_circles_and_arcs(tmp_path):
    def paint(msp):
        corner = [(70 + 10 * sin(radians(9 * k)), 10 - 10 * cos(radians(9 * k))) for k in range(11)]
        msp.add_lwpolyline([(0, 0), *corner, (80, 50), (0, 50)], close=True)
        msp.add_lwpolyline(
            [(20 + 4 * cos(2 * pi * k / 36), 20 + 4 * sin(2 * pi * k / 36)) for k in range(36)], close=True
        )

    done, out = clean(tmp_path, paint)
    assert kinds(done) == ["rounded", "rounded"]
    circle, line = sorted(ezdxf.readfile(out).modelspace(), key=lambda e: e.dxftype())
    assert circle.dxf.radius == pytest.approx(4.0, rel=3e-3)
    assert len(line) == 5
    assert done.after[0].area_mm2 == pytest.approx(done.before[0].area_mm2, rel=1e-4)


def test_a_border_within_a_border_is_taken_out_at_once(tmp_path):
    def paint(msp):
        box(msp, -20, -20, 400, 300)
        box(msp, -10, -10, 380, 280)
        for x in (0, 100, 200):
            box(msp, x, 0, 80, 50)
            msp.add_circle((x + 40, 25), 10)

    done, out = clean(tmp_path, paint)
    assert len(read(out).parts) == len(done.after)
    assert repair(out).text == done.text


def test_the_drawing_itself_is_only_read(tmp_path):
    path = drawn(tmp_path, messy)
    before = path.read_bytes()
    repair(path)
    assert path.read_bytes() == before


def test_nothing_to_cut(tmp_path):
    done = repair(save(new(), tmp_path))
    assert [f.rule for f in done.left] == ["empty-drawing"]
    assert repair(drawn(tmp_path, lambda msp: msp.add_line((0, 0), (9, 9)))).left[0].rule == "empty-drawing"


@pytest.mark.parametrize(
    ("words", "layer", "left"), [("RIGHT", "0", True), ("4x M5", "0", False), ("RIGHT", "notes", False)]
)
def test_texts_that_may_have_been_meant_to_be_cut(tmp_path, words, layer, left):
    """A callout, or a layer for notes, says that a text is none of them."""

    def paint(msp):
        plate(msp)
        msp.add_text(words, height=4, dxfattribs={"insert": (60, 10), "layer": layer})

    done, out = clean(tmp_path, paint)
    assert [f.rule for f in done.left] == (["text-not-outlined"] if left else [])
    (text,) = ezdxf.readfile(out).modelspace().query("TEXT")
    assert (text.dxf.layer, text.dxf.text) == ("CUT" if left else "NOTE", words)


def test_coordinates_are_written_to_a_nanometre(tmp_path):
    """So that the clean drawing, read again, holds the same figures."""

    def paint(msp):
        box(msp, 0, 0, 80, 50)
        for line in msp:
            line.transform(Matrix44.z_rotate(radians(33)))

    _, out = clean(tmp_path, paint)
    (line,) = ezdxf.readfile(out).modelspace()
    values = [v for point in line.get_points("xy") for v in point]
    assert values == [round(v, 6) for v in values]


@pytest.mark.parametrize(("linetype", "kind", "layer"), [("CENTER", "left-out", None), ("PHANTOM", "layer", "BEND")])
def test_lines_that_are_not_cut_for_their_linetype_are_told(tmp_path, linetype, kind, layer):
    def paint(msp):
        msp.doc.linetypes.add(linetype, [1.0, 0.75, -0.25])
        plate(msp)
        msp.add_line((10, 5), (70, 5), dxfattribs={"linetype": linetype})

    done, out = clean(tmp_path, paint)
    assert [c.kind for c in done.changes if linetype in c.message] == [kind]
    lines = ezdxf.readfile(out).modelspace().query("LINE LWPOLYLINE")
    assert sorted({e.dxf.layer for e in lines} - {"CUT"}) == ([layer] if layer else [])
