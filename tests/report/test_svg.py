"""Pictures: paths against the curves they stand for, placements against the contract's rule, escaping."""

import re
import xml.etree.ElementTree as ET

import numpy as np
import pytest
from shapely.geometry import box

from flatprep.geom import bulge
from flatprep.geom.bulge import Similarity
from flatprep.geom.polygons import polygon
from flatprep.report.badges import MOST_BADGES, finding_badges, spread, step_badges
from flatprep.report.bundle import Offcut
from flatprep.report.label_spot import Spot, spot_anywhere, spot_on_material
from flatprep.report.part_figure import frame, nice_length_mm, part_figure
from flatprep.report.sheet_figure import Shape, hatch, shape_defs, sheet_figure, svg_matrix
from flatprep.report.svg_path import path_data
from flatprep.report.svg_tag import tag, text


def arc_middle(x0, y0, r, large, sweep, x1, y1):
    """Middle point of an SVG arc by the endpoint conversion of the SVG specification (appendix B.2.4, equal radii)."""
    hx, hy = (x0 - x1) / 2, (y0 - y1) / 2
    k = np.sqrt(max(0.0, (r * r - hx * hx - hy * hy) / (hx * hx + hy * hy))) * (-1 if large == sweep else 1)
    cx, cy = k * hy + (x0 + x1) / 2, -k * hx + (y0 + y1) / 2
    a = np.arctan2(y0 - cy, x0 - cx)
    b = np.arctan2(y1 - cy, x1 - cx)
    turn = (b - a) % (2 * np.pi) if sweep else -((a - b) % (2 * np.pi))
    return cx + r * np.cos(a + turn / 2), cy + r * np.sin(a + turn / 2)


@pytest.mark.parametrize("b", [0.3, -0.3, 0.99, -0.7, np.tan(np.pi / 8)])
def test_an_arc_of_the_path_is_the_arc_of_the_polyline(b):
    xyb = np.array([[10.0, 5.0, b], [40.0, 25.0, 0.0]])
    numbers = [float(v) for v in re.findall(r"-?\d+\.?\d*", path_data(xyb, closed=False, decimals=6))]
    x0, y0, r, r2, _, large, sweep, x1, y1 = numbers
    assert r == r2
    middle = arc_middle(x0, y0, r, int(large), int(sweep), x1, y1)
    # the top of an arc lies bulge times half a chord to the right of the chord's middle
    chord = xyb[1, :2] - xyb[0, :2]
    top = (xyb[0, :2] + xyb[1, :2]) / 2 + b / 2 * np.array([chord[1], -chord[0]])
    assert middle == pytest.approx((top[0], -top[1]), abs=1e-3)


def test_a_closed_path_does_not_draw_its_last_line_twice():
    square = np.array([[0.0, 0, 0], [10, 0, 0], [10, 10, 0], [0, 10, 0]])
    assert path_data(square, closed=True) == "M0 0L10 0L10 -10L0 -10Z"


def test_round_figures_keep_their_zeros():
    assert path_data(np.array([[100.0, 200, 0], [30, 0, 0]]), closed=False, decimals=0) == "M100 -200L30 0"


@pytest.mark.parametrize("turn", [0.0, 90.0, 33.0, 270.0])
@pytest.mark.parametrize("mirrored", [False, True])
def test_the_matrix_places_as_the_contract_says(turn, mirrored):
    motion = Similarity(turn_deg=turn, dx=11.0, dy=-7.0, mirrored=mirrored)
    a, b, c, d, e, f = (float(v) for v in re.findall(r"-?\d+\.?\d*", svg_matrix(motion)))
    x, y = 3.0, 5.0
    # by hand: mirror, turn anticlockwise, move; then turn y over for the picture
    mx = -x if mirrored else x
    t = np.radians(turn)
    there = mx * np.cos(t) - y * np.sin(t) + 11.0, mx * np.sin(t) + y * np.cos(t) - 7.0
    assert (a * x + c * -y + e, b * x + d * -y + f) == pytest.approx((there[0], -there[1]), abs=1e-4)


def test_elements_escape_what_strangers_write():
    hostile = '"><script>alert(1)</script>'
    element = ET.fromstring(tag("g", text(hostile, 0, 0, 3), data_part=hostile))
    assert element.get("data-part") == hostile
    assert element[0].text == hostile


@pytest.mark.parametrize(
    ("about", "units", "mm"),
    [(22.0, "mm", 20.0), (9.99, "mm", 5.0), (10.0, "mm", 10.0), (30.0, "in", 25.4), (60.0, "in", 50.8)],
)
def test_scale_bars_are_1_2_or_5_of_their_unit(about, units, mm):
    assert nice_length_mm(about, units) == pytest.approx(mm)


def test_a_part_picture_holds_the_part_its_lines_and_a_mark_for_each_place(card):
    badges = (*finding_badges(card.findings), *step_badges(card.steps))
    svg = ET.fromstring(part_figure(card.part, badges))
    space = "{http://www.w3.org/2000/svg}"
    marks = [g.get("data-mark") for g in svg.iter(f"{space}g") if "mark" in g.get("class", "")]
    # two findings have a place, the third has none; two steps share the bore
    assert marks == ["f1", "f2", "s2", "s3 s4"]
    assert {p.get("class") for p in svg.iter(f"{space}path")} >= {"material", "bend", "engraved", "datum"}
    x, y, w, h = (float(v) for v in svg.get("viewBox").split())
    assert x < 0
    assert x + w > 120
    assert y < -60
    assert y + h > 0


def test_badges_keep_off_each_other_and_off_the_places(card):
    badges = (*finding_badges(card.findings), *step_badges(card.steps))
    unit, box = frame(card.part)
    radius = 2.6 * unit
    centres = spread(badges, radius, box)
    for i, a in enumerate(centres):
        assert all(np.hypot(a[0] - b[0], a[1] - b[1]) >= 2.2 * radius for b in centres[:i])
        assert all(np.hypot(a[0] - b.at[0], a[1] - b.at[1]) >= 1.4 * radius for b in badges)


def test_many_places_get_one_badge_a_step(card):
    step = card.steps[1]
    grid = tuple((float(i), 0.0) for i in range(MOST_BADGES + 1))
    busy = type(step)(2, step.kind, "M6", 6.6, count=len(grid), at=grid)
    assert len(step_badges((busy,))) == 1
    assert len(step_badges((type(step)(2, step.kind, at=grid[:-1]),))) == MOST_BADGES


def test_a_sheet_places_every_piece_by_reference(bundle):
    shapes = {c.name: Shape(f"s{i}", i, c.part) for i, c in enumerate(bundle.cards, start=1)}
    space = "{http://www.w3.org/2000/svg}"
    svg = ET.fromstring(sheet_figure(bundle.layout.sheets[0], shapes, offcut=bundle.offcuts[0]))
    placed = [g for g in svg.iter(f"{space}g") if g.get("class") == "placed"]
    assert [g.get("data-part") for g in placed] == ["leaf", "leaf", "seed tray"]
    assert [g.find(f"{space}use").get("href") for g in placed] == ["#s1", "#s1", "#s2"]
    assert "turned over" in placed[1].find(f"{space}title").text
    assert "72 × 284 mm left" in "".join(svg.itertext())
    defs = ET.fromstring(shape_defs(shapes))
    assert [g.get("id") for g in defs.iter("g")] == ["s1", "s2"]
    # outline and engraving of each; bend lines are not cut
    assert [p.get("class") for p in defs.iter("path")] == [None, "engraved"] * 2


def test_an_offcut_is_hatched_at_45_degrees_and_no_line_leaves_it():
    offcut = Offcut(1, 100.0, 20.0, 400.0, 120.0)
    lines = re.findall(r"M([-\d.]+) ([-\d.]+)L([-\d.]+) ([-\d.]+)", hatch(offcut, 25.0))
    assert len(lines) == 16  # (300 + 100) / 25
    for x0, y0, x1, y1 in (tuple(map(float, line)) for line in lines):
        assert x1 - x0 == pytest.approx(y0 - y1)
        assert 100 <= x0 <= x1 <= 400
        assert -120 <= y1 <= y0 <= -20


# a 100 mm square with a slot at middle height, from x = 30 to 90 and y = 40 to 60
SLOTTED = polygon(
    np.array([[0.0, 0, 0], [100, 0, 0], [100, 100, 0], [0, 100, 0]]),
    [bulge.reverse(np.array([[30.0, 40, 0], [90, 40, 0], [90, 60, 0], [30, 60, 0]]), closed=True)],
    chord_mm=0.01,
)


def test_a_name_stands_on_material_where_it_is_largest():
    # small letters: in the middle, on the run of 30 mm beside the slot
    assert spot_on_material(SLOTTED, 4, 3.0) == Spot(15.0, 50.0, 3.0)
    # large ones: a quarter up, where a line 20 mm high ends 5 mm below the slot
    assert spot_on_material(SLOTTED, 4, 20.0) == Spot(50.0, 25.0, 20.0)
    # no room for letters of 1 mm a thousand in a line
    assert spot_on_material(SLOTTED, 1000, 20.0).size == pytest.approx(100 / 620.6)


def test_no_edge_crosses_a_name():
    rng = np.random.default_rng(3)
    for _ in range(40):
        outer = np.array([[0.0, 0, 0], [80, 0, 0], [80, 50, 0], [0, 50, 0]])
        holes = [bulge.reverse(bulge.circle(*rng.uniform(10, 40, 2), rng.uniform(1, 9)), closed=True)]
        region = polygon(outer, holes, chord_mm=0.01)
        letters = int(rng.integers(3, 20))
        spot = spot_on_material(region, letters, 12.0)
        half = 0.62 * letters * spot.size / 2
        text = box(spot.x - half, spot.y - spot.size / 2, spot.x + half, spot.y + spot.size / 2)
        assert text.difference(region).area < 1e-9


def test_where_nothing_else_serves_a_name_goes_half_way_up():
    spot = spot_anywhere(SLOTTED, 4, 100.0)
    assert (spot.x, spot.y) == pytest.approx((15.0, 50.0))
    assert spot.size == pytest.approx(30.0 / (4 * 0.62 + 0.6))
