"""The picture of a sheet."""

from xml.etree import ElementTree

import numpy as np
import pytest
from shapely.geometry import Point, Polygon

from flatprep.geom.bulge import circle
from flatprep.model.drawing import Contour, Curve, Part
from flatprep.model.layout import Placement, SheetLayout
from flatprep.report.sheet_figure import Shape, sheet_figure
from flatprep.report.sheet_svg import OKABE_ITO, Extras, sheet_svg

SVG = "{http://www.w3.org/2000/svg}"
MARK = Curve(np.array([[-5.0, 0, 0], [5, 0, 0]]), closed=False)
PARTS = {n: Part(n, Contour(circle(0, 0, 20.0)), marks=(MARK,)) for n in ("a & b", "wheel")}


def picture(**more):
    outline = np.array([[0.0, 0], [300, 0], [300, 200], [0, 200]])
    places = (Placement("a & b", 1, 30.0, True, 60.0, 50.0), Placement("wheel", 1, 0.0, False, 120.0, 50.0))
    one = SheetLayout("al3", "al-5052-h32", 3.0, outline, (), 148.0, 0.042, places)
    return ElementTree.fromstring(sheet_svg(one, 2, PARTS, margin_mm=8.0, job="wheel hoe", **more))


def texts(root):
    return [t.text for t in root.iter(f"{SVG}text")]


def test_picture_is_true_to_scale():
    root = picture()
    width, height = (float(root.get(k).removesuffix("mm")) for k in ("width", "height"))
    box = [float(v) for v in root.get("viewBox").split(",")] if "," in root.get("viewBox") else None
    box = box or [float(v) for v in root.get("viewBox").split()]
    assert (width, height) == pytest.approx(box[2:], abs=0.002)
    assert box[0] < 0.0
    assert box[0] + box[2] > 300.0


def test_every_piece_is_named_and_escaped():
    root = picture()
    assert {"a & b 1", "wheel 1"} <= {words.partition(": ")[2] for words in texts(root)}
    turns = [words.partition(": ")[0] for words in texts(root) if words.endswith(("a & b 1", "wheel 1"))]
    assert sorted(turns) == ["1", "2"]  # numbered as cut
    titles = {t.text for t in root.iter(f"{SVG}title")}
    assert {"a & b 1", "wheel 1", "wheel hoe sheet 2"} <= titles


@pytest.mark.parametrize(("size", "upright"), [((90.0, 30.0), False), ((30.0, 90.0), True)])
def test_a_name_lies_along_the_piece_and_within_it(size, upright):
    """The run is 90 mm; with letters 0.62 as wide as tall, "1: long name of a bar 1" of 23 letters is 6.3 mm tall."""
    w, h = size
    bar = Part("long name of a bar", Contour(np.array([[0.0, 0, 0], [w, 0, 0], [w, h, 0], [0, h, 0]])))
    outline = np.array([[0.0, 0], [900, 0], [900, 200], [0, 200]])
    one = SheetLayout("al3", "al", 3.0, outline, (), 98.0, 0.1, (Placement(bar.name, 1, 0.0, False, 10.0, 10.0),))
    root = ElementTree.fromstring(sheet_svg(one, 1, {bar.name: bar}, margin_mm=0.0))
    (name,) = [t for t in root.iter(f"{SVG}text") if t.text.startswith("1: long")]
    assert float(name.get("font-size")) == pytest.approx(90.0 / (0.62 * 23 + 0.6), abs=0.01)
    turned = [g for g in root.iter(f"{SVG}g") if "rotate" in (g.get("transform") or "")]
    assert bool(turned) is upright


ELL = np.array([[500.0, 300], [700, 300], [700, 330], [530, 330], [530, 480], [500, 480]])
"""An angle with legs 30 mm wide, drawn far from its origin: most of its box is no material."""


def names_in_the_picture(layout, part):
    """Middles of the names on the picture to print, sheet coordinates; upright ones are turned about theirs."""
    root = ElementTree.fromstring(sheet_svg(layout, 1, {part.name: part}, margin_mm=0.0))
    for group in (root, *root.iter(f"{SVG}g")):
        _, _, about = (group.get("transform") or "").partition("rotate(-90 ")
        for text in group.findall(f"{SVG}text"):
            if (text.text or "").partition(": ")[2].startswith("ell "):
                third = float(text.get("font-size")) / 3.0
                x, y = map(float, about.rstrip(")").split()) if about else (text.get("x"), float(text.get("y")) - third)
                yield float(x), -float(y)


def names_on_the_page(layout, part):
    """The same of the picture on the page."""
    root = ElementTree.fromstring(sheet_figure(layout, {part.name: Shape("shape-1", 1, part)}))
    for group in root.iter():
        if group.get("data-part") == "ell":
            (text,) = [t for t in group if t.tag.endswith("text")]
            yield float(text.get("x")), float(text.get("font-size")) / 3.0 - float(text.get("y"))


@pytest.mark.parametrize("names", [names_in_the_picture, names_on_the_page])
def test_names_stand_on_their_pieces_however_they_lie(names):
    part = Part("ell", Contour(np.column_stack([ELL, np.zeros(len(ELL))])))
    lying = [(0.0, False), (0.0, True), (90.0, False), (90.0, True), (215.0, True), (0.0, True)]
    places = []
    for k, (turn, mirrored) in enumerate(lying):
        there = Placement("ell", k + 1, turn, mirrored, 0.0, 0.0).motion.points(ELL)
        dx, dy = np.array([20.0 + 300.0 * (k % 3), 20.0 + 300.0 * (k // 3)]) - there.min(axis=0)
        places.append(Placement("ell", k + 1, turn, mirrored, float(dx), float(dy)))
    outline = np.array([[0.0, 0], [900, 0], [900, 600], [0, 600]])
    layout = SheetLayout("al3", "al", 3.0, outline, (), 900.0, 0.1, tuple(places))
    found = list(names(layout, part))
    regions = [Polygon(p.motion.points(ELL)) for p in places]
    on = [[k for k, region in enumerate(regions) if region.covers(Point(at))] for at in found]
    assert sorted(on) == [[k] for k in range(len(places))]


def test_the_picture_is_white_to_its_edges():
    """Dark ink would be lost where a viewer's ground is dark."""
    root = picture()
    ground = next(root.iter(f"{SVG}rect"))
    assert ground.get("fill") == "#FFFFFF"
    box = [float(v) for v in root.get("viewBox").replace(",", " ").split()]
    assert [float(ground.get(key)) for key in ("x", "y", "width", "height")] == box


def test_a_list_under_the_sheet_says_which_drawings_were_cut():
    plain, told = picture(), picture(extras=Extras(identity={"a & b": "rev. C 98f7e42cdd"}))
    assert [words for words in texts(told) if "98f7" in words] == ["1 x a & b  rev. C 98f7e42cdd"]
    assert len(texts(told)) == len(texts(plain)) + 1
    at = next(float(t.get("y")) for t in told.iter(f"{SVG}text") if "98f7" in t.text)
    top, height = (float(v) for v in told.get("viewBox").replace(",", " ").split()[1::2])
    assert 0.0 < at < top + height


def test_piece_is_moved_by_its_placement_with_y_turned_over():
    """Mirrored, turned by 30 degrees, moved to (60, 50): the part's origin comes to (60, -50) on the page."""
    group = next(g for g in picture().iter(f"{SVG}g") if g.find(f"{SVG}title") is not None)
    a, b, c, d, e, f = (float(v) for v in group.get("transform").removeprefix("matrix(").removesuffix(")").split())
    assert (e, f) == (60.0, -50.0)
    assert a * d - b * c == pytest.approx(-1.0)
    assert (a, b) == pytest.approx((-np.cos(np.radians(30)), np.sin(np.radians(30))))


def test_sheet_data_used_length_and_scale_bar_are_written():
    words = " | ".join(texts(picture()))
    for part in (
        "wheel hoe",
        "sheet 2",
        "al3",
        "al-5052-h32",
        "300 × 200",
        "2 parts",
        "4.2",
        "used length 148",
        "50 mm",
    ):
        assert part in words.replace("\u00a0", " ")


def test_share_of_the_used_length():
    """4.2 % of 300 mm is 4.2 x 300 / 148 = 8.51 % of 148 mm."""
    assert any("8.5\u00a0% of it parts" in t for t in texts(picture()))


def test_name_stands_upright_in_an_upright_part():
    tall = {"bar": Part("bar", Contour(np.array([[0.0, 0, 0], [10, 0, 0], [10, 90, 0], [0, 90, 0]])))}
    outline = np.array([[0.0, 0], [300, 0], [300, 200], [0, 200]])
    for turn, turned in ((0.0, True), (90.0, False)):
        one = SheetLayout("s", "m", 3.0, outline, (), 148.0, 0.1, (Placement("bar", 1, turn, False, 100.0, 50.0),))
        root = ElementTree.fromstring(sheet_svg(one, 1, tall, margin_mm=0.0))
        groups = [g for g in root.iter(f"{SVG}g") if (g.get("transform") or "").startswith("rotate(-90")]
        assert bool(groups) is turned


def test_inch_job_is_told_in_inches():
    words = " | ".join(texts(picture(extras=Extras(units="in")))).replace("\u00a0", " ")
    assert "used length 5.827 in" in words
    assert "mm" not in words


def test_offcut_is_hatched_within_its_box_and_its_size_written():
    root = picture(extras=Extras(offcut=(150.0, 10.0, 290.0, 190.0)))
    assert any("offcut 140 × 180" in (t or "").replace("\u00a0", " ") for t in texts(root))
    (box,) = [r for r in root.iter(f"{SVG}rect") if r.get("class") == "offcut"]
    assert [float(box.get(k)) for k in ("x", "y", "width", "height")] == [150.0, -190.0, 140.0, 180.0]
    hatch = next(p.get("d") for p in root.iter(f"{SVG}path") if p.get("d").count("M") > 10)
    points = np.array([[float(v) for v in pair.split()] for pair in hatch.replace("M", "L").split("L")[1:]])
    assert points.min(axis=0) == pytest.approx([150.0, -190.0], abs=10.0)
    assert (points >= [150.0 - 1e-3, -190.0 - 1e-3]).all()
    assert (points <= [290.0 + 1e-3, -10.0 + 1e-3]).all()


def test_each_part_has_a_colour_of_the_palette():
    fills = {p.get("fill") for p in picture().iter(f"{SVG}path")} & set(OKABE_ITO)
    assert len(fills) == 2


def test_clamps_and_screws_are_crossed_out_and_margins_drawn_side_by_side():
    """On 300 x 200: margins 20, 10, 5, 0; a clamp 40 x 30 in the corner, a screw of 15 mm at (150, 100)."""
    root = picture(
        extras=Extras(margins_mm=(20.0, 10.0, 5.0, 0.0), keep_out=((0.0, 0.0, 40.0, 30.0), (150.0, 100.0, 15.0)))
    )
    (clamp,) = [r for r in root.iter(f"{SVG}rect") if r.get("class") == "keep-out"]
    assert [float(clamp.get(k)) for k in ("x", "y", "width", "height")] == [0.0, -30.0, 40.0, 30.0]
    (screw,) = [c for c in root.iter(f"{SVG}circle") if c.get("class") == "keep-out"]
    assert [float(screw.get(k)) for k in ("cx", "cy", "r")] == [150.0, -100.0, 15.0]
    (dashed,) = [
        p.get("d") for p in root.iter(f"{SVG}path") if p.get("stroke-dasharray") and p.get("stroke") == "#888888"
    ]
    figures = [float(v) for v in dashed.replace("M", " ").replace("L", " ").replace("Z", " ").replace(",", " ").split()]
    assert sorted(set(figures[0::2])) == [20.0, 290.0]
    assert sorted(set(figures[1::2])) == [-200.0, -5.0]


def test_etched_labels_are_drawn_on_their_pieces():
    line = Curve(np.array([[1.0, 2, 0], [3.0, 4, 0]]), closed=False)
    drawn = picture(extras=Extras(etched={("a & b", True): (line,)}))
    (path,) = [p for p in drawn.iter(f"{SVG}path") if p.get("class") == "etched"]
    assert path.get("d").startswith("M1")
