"""Plain entities read beside ezdxf: the same drawing as when ezdxf reads all of it."""

import csv
from random import Random

import ezdxf
import pytest
from hypothesis import HealthCheck, given, settings

from flatprep.base.errors import DrawingError
from flatprep.drawing import load as loading
from flatprep.drawing.limits import LIMITS
from flatprep.drawing.load import load
from flatprep.drawing.read import read
from flatprep.drawing.records import NotSiftedError, records_of
from flatprep.drawing.sift import sift
from tests.damage import damaged
from tests.drawing.draw import box, drawn, new, save
from tests.drawing.test_any_drawing import OURS
from tests.strategies import drawings

HOUSE = settings(
    max_examples=60,
    suppress_health_check=[HealthCheck.function_scoped_fixture, HealthCheck.too_slow, HealthCheck.data_too_large],
)


def curve(c):
    return c.xyb.tolist(), c.closed, c.layer, c.handle, c.kind, c.linetype, c.color


def contour(c):
    return c.xyb.tolist(), c.handles, c.layers


def told(path):
    """Everything a reading says, or the message of its error."""
    try:
        d = read(path)
    except DrawingError as err:
        return err.message
    parts = [
        (p.name, p.depth, [contour(c) for c in p.contours], [curve(c) for c in (*p.marks, *p.bends)]) for p in d.parts
    ]
    rest = d.units, d.units_from, d.faults, d.skipped, d.texts, d.roles, d.simplified, d.recovered
    # as text: what is no number is like itself
    return repr((parts, [curve(c) for c in d.loose], [contour(c) for c in d.crossing], rest))


def refuse(*_args, **_options):
    raise NotSiftedError


def both(path):
    """What is told with the plain entities read beside ezdxf, and with ezdxf reading all."""
    beside = told(path)
    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(loading, "sift", refuse)
        return beside, told(path)


def plain_kinds(path):
    return [p.kind for p in load(path, LIMITS).plain]


def lines_and_arcs(msp):
    box(msp, 0, 0, 80, 50, layer="CUT", color=3, linetype="DASHED")
    msp.add_arc((20, 25, 7), 5, 30, 250, dxfattribs={"extrusion": (0, 0, -1)})
    msp.add_arc((-20, 25), 5, 250, 30, dxfattribs={"extrusion": (0, 0, -1), "color": 0})
    msp.add_circle((40, 25), 10, dxfattribs={"layer": "HOLES", "linetype": "BYBLOCK"})
    msp.add_line((0, 0, 0), (0, 0, 9))


def polylines(msp):
    msp.add_lwpolyline([(0, 0), (80, 0, 0, 0, 0.5), (80, 50), (0, 50)], close=True, dxfattribs={"elevation": 3})
    msp.add_lwpolyline([(10, 10), (20, 10, 1, 1, -1), (10, 10)], dxfattribs={"extrusion": (0, 0, -1), "const_width": 2})
    msp.add_lwpolyline([(5, 5)])


def old_polylines(msp):
    msp.add_polyline2d([(0, 0, 1), (80, 0, 0), (80, 50, 0.5), (0, 50, 0)], format="xyb", close=True)
    msp.add_polyline3d([(10, 10, 1), (20, 10, 2), (20, 20, 1)], close=True)
    msp.add_polyline2d([(30, 30), (40, 30), (40, 40)], dxfattribs={"elevation": (0, 0, 4), "extrusion": (0, 0, -1)})


def splines(msp):
    box(msp, 0, 0, 80, 50)
    msp.add_spline(dxfattribs={"layer": "CUT"}).set_closed([(10, 10, 2), (30, 12, 2), (32, 30, 2), (8, 28, 2)])
    msp.add_open_spline([(40, 10), (50, 30), (60, 10), (70, 30), (75, 10)], degree=3)
    msp.add_rational_spline([(40, 40), (50, 45), (60, 40), (70, 45)], weights=[1, 2, 2, 1])
    msp.add_spline(fit_points=[(5, 5), (7, 9), (9, 5)])


def texts_blocks_and_dimensions(msp):
    doc = msp.doc
    box(msp, 0, 0, 80, 50)
    hole = doc.blocks.new("HOLE")
    hole.add_circle((0, 0), 4)
    for name in ("INNER", "UNUSED"):
        doc.blocks.new(name).add_blockref("HOLE", (0, 0))
    msp.add_blockref("INNER", (20, 20))
    msp.add_circle((40, 25), 3)
    msp.add_blockref("hole", (60, 20)).add_auto_attribs({})
    msp.add_text("M5", height=3, dxfattribs={"insert": (41, 26)})
    msp.add_linear_dim(base=(0, -10), p1=(0, 0), p2=(80, 0)).render()
    msp.add_ellipse((60, 40), (4, 0), 0.5)
    msp.add_circle((20, 40), 3)
    doc.layout("Layout1").add_line((0, 0), (1, 1))


def groups_of_other_programs(msp):
    box(msp, 0, 0, 80, 50)
    hole = msp.add_circle((40, 25), 10)
    hole.new_extension_dict().add_dictionary("OURS")
    hole.set_reactors(["1F"])
    msp.add_circle((20, 25), 2).set_xdata("ACAD", [(1000, "words")])


PAINTS = [
    lines_and_arcs,
    polylines,
    old_polylines,
    splines,
    texts_blocks_and_dimensions,
    groups_of_other_programs,
]


@pytest.mark.parametrize("version", ["R12", "R2000", "R2010", "R2018"])
@pytest.mark.parametrize("paint", PAINTS)
def test_both_ways_say_the_same(tmp_path, paint, version):
    if version == "R12" and paint not in (lines_and_arcs, old_polylines):
        pytest.skip("R12 has no such entities")
    path = drawn(tmp_path, paint, version)
    assert plain_kinds(path)
    beside, whole = both(path)
    assert beside == whole


def test_what_is_plain(tmp_path):
    kinds = plain_kinds(drawn(tmp_path, lines_and_arcs)) + plain_kinds(drawn(tmp_path, polylines))
    kinds += plain_kinds(drawn(tmp_path, old_polylines)) + plain_kinds(drawn(tmp_path, splines))
    assert kinds.count("LINE") == 9
    assert [kinds.count(k) for k in ("ARC", "CIRCLE", "LWPOLYLINE", "POLYLINE", "SPLINE")] == [2, 1, 2, 3, 3]


def changed(path, change):
    """The file with each (code, value) of its entities changed, left out (None) or followed by others (a list)."""
    lines = path.read_text().split("\n")
    pairs = list(zip(lines[0::2], lines[1::2], strict=False))
    first = pairs.index(("  2", "ENTITIES")) + 1
    last = pairs.index(("  0", "ENDSEC"), first)
    out = []
    for k, (code, value) in enumerate(pairs):
        new_pairs = change(int(code), value) if first <= k < last else [(code, value)]
        out += new_pairs or []
    path.write_text("".join(f"{code}\n{value}\n" for code, value in out))
    return path


def without_handles(path):
    doc = ezdxf.readfile(path)
    doc.header["$HANDLING"] = 0
    doc.saveas(path)
    return changed(path, lambda code, value: None if code == 5 else [(code, value)])


@pytest.mark.parametrize(("paint", "plain"), [(lines_and_arcs, 8), (old_polylines, 0)])
def test_entities_without_handles_get_those_that_ezdxf_gives(tmp_path, paint, plain):
    path = without_handles(drawn(tmp_path, paint, "R12"))
    assert len([p for p in load(path, LIMITS).plain if p.handle]) == plain
    beside, whole = both(path)
    assert beside == whole


BARE = "0\nSECTION\n2\nENTITIES\n{}0\nENDSEC\n0\nEOF\n"


def bare_line(x0, y0, x1, y1):
    return f"0\nLINE\n8\n0\n10\n{x0}\n11\n{x1}\n20\n{y0}\n21\n{y1}\n"


def test_lines_whose_xs_stand_together(tmp_path):
    path = tmp_path / "leaf.dxf"
    corners = [(0, 0), (80, 0), (80, 50), (0, 50)]
    path.write_text(
        BARE.format("".join(bare_line(*p, *q) for p, q in zip(corners, corners[1:] + corners[:1], strict=True)))
    )
    loaded = load(path, LIMITS)
    assert len(loaded.plain) == 4
    assert loaded.recovered
    (part,) = read(path).parts
    assert part.area_mm2 == pytest.approx(4000.0)
    beside, whole = both(path)
    assert beside == whole


@pytest.mark.parametrize(
    "change",
    [
        pytest.param(lambda code, value: [(code, "1" if code == 62 else value)], id="colour"),
        pytest.param(
            lambda code, value: [(code, value), (67, "1")] if code == 8 else [(code, value)], id="paper-space"
        ),
        pytest.param(lambda code, value: [(code, "0" if code == 5 else value)], id="no-handle-at-all"),
        pytest.param(lambda code, value: [(code, "2A" if code == 5 else value)], id="one-handle-for-all"),
        pytest.param(lambda code, value: [(code, "x" if code == 20 else value)], id="no-number"),
        pytest.param(lambda code, value: [(code, "nan" if code == 20 else value)], id="nan"),
        pytest.param(lambda code, value: [(code, "inf" if code == 30 else value)], id="infinite-height"),
        pytest.param(lambda code, value: [(code, "-3" if code == 40 else value)], id="negative-radius"),
        pytest.param(lambda code, value: [(code, value), (999, "words")], id="comments"),
        pytest.param(lambda code, value: None if code == 30 else [(code, value)], id="flat"),
        pytest.param(lambda code, value: None if code == 20 else [(code, value)], id="no-y"),
        pytest.param(lambda code, value: None if code == 8 else [(code, value)], id="no-layer"),
        pytest.param(lambda code, value: None if code == 100 else [(code, value)], id="no-classes"),
        pytest.param(lambda code, value: [(code, value), (38, "4")] if code == 8 else [(code, value)], id="elevation"),
        pytest.param(lambda code, value: [(code, value), (62, "3.0")] if code == 8 else [(code, value)], id="3.0"),
        pytest.param(lambda code, value: [(code, "POLYLINE" if value == "ARC" else value)], id="open-polyline"),
        pytest.param(lambda code, value: [(code, "INSERT" if value == "ARC" else value)], id="inserts-nothing"),
        pytest.param(lambda code, value: [(code, "EOF" if value == "ARC" else value)], id="ends-early"),
        pytest.param(lambda code, value: [(code, value), ("x", "y")] if code == 8 else [(code, value)], id="no-code"),
        pytest.param(lambda code, value: [(code, value), (420, "999999")] if code == 8 else [(code, value)], id="rgb"),
    ],
)
@pytest.mark.parametrize("version", ["R12", "R2010"])
def test_odd_codes_and_values(tmp_path, change, version):
    beside, whole = both(changed(drawn(tmp_path, lines_and_arcs, version), change))
    assert beside == whole


@pytest.mark.parametrize("end", ["\r\n", "\r"])
def test_line_ends(tmp_path, end):
    path = drawn(tmp_path, polylines)
    path.write_bytes(path.read_bytes().replace(b"\n", end.encode()))
    assert plain_kinds(path)
    beside, whole = both(path)
    assert beside == whole


def test_owner_goes_before_the_flag_of_paper_space(tmp_path):
    """A line that the sheet owns lies on the sheet, flag or not (DXF reference, group 330)."""
    doc = new()
    box(doc.modelspace(), 0, 0, 80, 50)
    path = save(doc, tmp_path)
    sheet = doc.layout("Layout1").layout_key
    space = doc.modelspace().layout_key
    path = changed(path, lambda code, value: [(code, sheet if code == 330 and value == space else value)])
    assert plain_kinds(path) == []
    beside, whole = both(path)
    assert beside == whole
    assert "paper space" in beside


def test_order_of_the_file_is_kept(tmp_path):
    def paint(msp):
        for k in range(5):
            msp.add_circle((10 * k, 0), 3)
            msp.add_ellipse((10 * k, 20), (3, 0), 1.0)

    beside, whole = both(drawn(tmp_path, paint))
    assert beside == whole


@pytest.mark.parametrize(
    "text",
    ["", "0\nEOF", "0\nSECTION\n2\nENTITIES\n0\nEOF", "x\nSECTION\n0\nEOF", BARE.format("")[:-5], "0\nLINE\n0\nEOF"],
)
def test_files_that_are_not_built_as_files_are(text):
    with pytest.raises((NotSiftedError, ValueError, LookupError)):
        sift(text, old=True)


def test_records():
    f = records_of(BARE.format("0\nLINE\n5\n2F\n999\nwords\n8\n0\n0\nPOINT\n8\n0\n"))
    assert f.kinds == ["SECTION", "LINE", "POINT", "ENDSEC", "EOF"]
    assert [f.handle(k) for k in f.section("ENTITIES")] == ["2F", ""]
    assert f.make_up(range(1, 3)) == (0, 5, 8, 0, 8)
    assert f.replaced({1: f.tags(2)}).text == BARE.format(2 * "0\nPOINT\n8\n0\n")


@HOUSE
@given(doc=drawings(most_rows=5))
def test_any_drawing(tmp_path, doc):
    path = tmp_path / "any.dxf"
    doc.saveas(path)
    beside, whole = both(path)
    assert beside == whole


@pytest.mark.parametrize("seed", range(30))
def test_damaged_drawing(tmp_path, seed):
    rng = Random(1000 + seed)
    path = tmp_path / "damaged.dxf"
    path.write_bytes(damaged(rng.choice(OURS).read_bytes(), rng))
    beside, whole = both(path)
    assert beside == whole


@pytest.mark.corpus
def test_real_drawings(shared_data):
    """Small ones of the corpus, both ways."""
    corpus = shared_data / "corpus"
    paths = [corpus / row["path"] for row in csv.DictReader((corpus / "truth.csv").read_text().splitlines())]
    for path in sorted(paths, key=lambda p: p.stat().st_size)[:40]:
        beside, whole = both(path)
        assert beside == whole, path
