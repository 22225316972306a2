"""Files that are nearly DXF: nothing in them is lost or misread. Each holds a plate of 80 x 50 with a hole of 20."""

from math import pi

import pytest

from flatprep.drawing.mend import mended
from flatprep.drawing.read import read
from flatprep.drawing.records import records_of

from .draw import PLATE

CORNERS = ((0, 0), (80, 0), (80, 50), (0, 50))
HOLE = [(0, "CIRCLE"), (8, "0"), (10, 40.0), (20, 25.0), (40, 10.0)]
EDGES = [
    tag
    for (x, y), (u, v) in zip(CORNERS, CORNERS[1:] + CORNERS[:1], strict=True)
    for tag in ((0, "LINE"), (8, "0"), (10, x), (20, y), (11, u), (21, v))
]
POINTS = [tag for x, y in CORNERS for tag in ((10, x), (20, y))]
LIGHT = [(90, 4), (70, 1), *POINTS]
OPEN = [(0, "SECTION"), (2, "ENTITIES")]
SHUT = [(0, "ENDSEC"), (0, "EOF")]
OLD = [(0, "POLYLINE"), (8, "0"), (66, 1), (70, 1)]
OLD += [tag for x, y in CORNERS for tag in ((0, "VERTEX"), (8, "0"), (10, x), (20, y))]


def header(version):
    return [(0, "SECTION"), (2, "HEADER"), (9, "$ACADVER"), (1, version), (0, "ENDSEC")]


def text(tags):
    return "".join(f"{code}\n{value}\n" for code, value in tags)


def file(tmp_path, content):
    path = tmp_path / "leaf.dxf"
    path.write_bytes(content if isinstance(content, bytes) else content.encode())
    return path


WHOLE = [*OPEN, *EDGES, *HOLE, *SHUT]
SPLINE = [(70, 8), (71, 1), (72, 7), (73, 5), *((40, k) for k in (0, 0, 1, 2, 3, 4, 4)), *POINTS, (10, 0), (20, 0)]


@pytest.mark.parametrize(
    "content",
    [
        pytest.param(text([*OPEN, (0, "LWPOLYLINE"), (8, "0"), *LIGHT, *HOLE, *SHUT]), id="no class, no header"),
        pytest.param(
            text([*header("AC1015"), *OPEN, (0, "LWPOLYLINE"), (5, "1A"), (8, "0"), *LIGHT, *HOLE, *SHUT]),
            id="no class",
        ),
        pytest.param(
            text([*OPEN, (0, "LWPOLYLINE"), (100, "AcDbPolyline"), (8, "0"), *LIGHT, *HOLE, *SHUT]), id="one class"
        ),
        pytest.param(
            text(
                [*header("AC1009"), *OPEN, (0, "LWPOLYLINE"), (5, "1A"), (100, "AcDbEntity"), (8, "0")]
                + [(100, "AcDbPolyline"), *LIGHT, *HOLE, *SHUT]
            ),
            id="newer than its version",
        ),
        pytest.param(text([*OPEN, (0, "SPLINE"), (8, "0"), *SPLINE, *HOLE, *SHUT]), id="spline without class"),
        pytest.param(text([*OPEN, *OLD, *HOLE, *SHUT]), id="polyline without end"),
        pytest.param(text([*OPEN, *HOLE, *OLD, *SHUT]), id="last polyline without end"),
        pytest.param(text([*OPEN, *EDGES, SHUT[0], *OPEN, *HOLE, *SHUT]), id="section twice"),
        pytest.param(text([(code, f" {value}  ") for code, value in WHOLE]), id="padded values"),
        pytest.param("\n\n" + text(WHOLE), id="begins with blank lines"),
        pytest.param(text(WHOLE).replace("0\nCIRCLE", "\n0\nCIRCLE"), id="blank line before a code"),
        pytest.param(text(WHOLE[:-1]), id="no end of file"),
        pytest.param(text(WHOLE) + "\x1a", id="an old editor's end of file"),
        pytest.param(text(WHOLE).encode("utf-16"), id="UTF-16"),
        pytest.param(
            text(
                [*header("AC1015"), *OPEN]
                + [new for tag in (*EDGES, *HOLE) for new in ([tag, (5, "0")] if tag[0] == 0 else [tag])]
                + SHUT
            ),
            id="handles of 0",
        ),
    ],
)
def test_nothing_is_lost(tmp_path, content):
    drawing = read(file(tmp_path, content))
    assert [p.area_mm2 for p in drawing.parts] == pytest.approx([PLATE])
    assert [f.kind for f in drawing.faults] == ["unknown-units"]


@pytest.mark.parametrize("up", [1.0, -1.0])
def test_an_ellipse_that_names_its_shorter_axis_first(tmp_path, up):
    """Half of an ellipse of 20 x 40, from the end of one long axis to the other, and the chord between them."""
    half = [(0, "ELLIPSE"), (5, "FF"), (100, "AcDbEntity"), (8, "0"), (100, "AcDbEllipse"), (10, 40.0), (20, 25.0)]
    half += [(11, 10.0), (21, 0.0), (210, 0.0), (220, 0.0), (230, up), (40, 2.0), (41, pi / 2), (42, 3 * pi / 2)]
    chord = [(0, "LINE"), (8, "0"), (10, 40.0), (20, 5.0), (11, 40.0), (21, 45.0)]
    (part,) = read(file(tmp_path, text([*header("AC1015"), *OPEN, *EDGES, *half, *chord, *SHUT]))).parts
    (hole,) = part.holes
    assert hole.area_mm2 == pytest.approx(pi * 10 * 20 / 2, rel=1e-4)
    assert hole.bounds == pytest.approx((30, 5, 40, 45), abs=0.002)


def test_a_file_that_ends_early_is_read_and_told(tmp_path):
    drawing = read(file(tmp_path, text([*OPEN, *EDGES, *HOLE, (0, "CIRCLE"), (8, "0"), (10, 70.0)])))
    assert [p.area_mm2 for p in drawing.parts] == pytest.approx([PLATE])
    assert "ends too early" in drawing.faults[1].detail


def test_what_is_right_stays_as_it_is():
    right = text([*header("AC1015"), *WHOLE])
    assert mended(right).tags.text == right


@pytest.mark.parametrize(("version", "becomes"), [("AC1009", "AC1015"), ("AC1015", "AC1015"), ("AC1032", "AC1032")])
def test_a_version_that_knows_the_entities(version, becomes):
    tags = mended(text([*header(version), *OPEN, (0, "LWPOLYLINE"), (8, "0"), *LIGHT, *SHUT])).tags
    assert tags.values[tags.values.index("$ACADVER") + 1] == becomes
    assert records_of(tags.text).kinds == ["SECTION", "ENDSEC", "SECTION", "LWPOLYLINE", "ENDSEC", "EOF"]


def test_what_has_no_group_codes_is_not_put_right():
    with pytest.raises(ValueError, match="invalid literal"):
        mended("words\nand more\n")
