"""The same part drawn another way is the same part: for every way of drawing it, and for many at once."""

import csv
from math import pi
from random import Random

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from flatprep.drawing.read import ReadOptions, read
from tests.drawing.draw import box, drawn
from tests.metamorphic.same import base_of, differences, is_ambiguous, part_differences
from tests.metamorphic.vary import Variant, random_variant, varied

ONE_KNOB = [
    Variant(),
    Variant(turn_deg=90),
    Variant(turn_deg=33.7),
    Variant(mirrored=True),
    Variant(move=(1234.5, -987.6)),
    Variant(unit="in"),
    Variant(shuffle=True, seed=3),
    Variant(reverse=True, seed=4),
    Variant(explode=True),
    Variant(circles="arcs"),
    Variant(circles="bulges"),
    Variant(circles="ellipses"),
    Variant(nesting=3, seed=5),
]


def bracket(msp):
    """A plate with round holes, a slot, a thin web, a mark and a bend line."""
    msp.add_lwpolyline([(0, 0), (90, 0, 0.4142135623730951), (100, 10), (100, 60), (0, 60)], format="xyb", close=True)
    msp.add_circle((20, 20), 5)
    msp.add_circle((50, 40), 1.0)
    msp.add_lwpolyline([(60, 20, 0), (80, 20, 1), (80, 28, 0), (60, 28, 1)], format="xyb", close=True)
    box(msp, 30, 52, 15, 6)
    msp.add_line((5, 30), (15, 35), dxfattribs={"layer": "engrave"})
    msp.add_line((0, 48), (100, 48), dxfattribs={"layer": "bend"})


def area():
    slot = 20 * 8 + pi * 16
    return 6000 - (1 - pi / 4) * 100 - pi * 25 - pi - slot - 90


@pytest.fixture(scope="module")
def leaf(tmp_path_factory):
    return drawn(tmp_path_factory.mktemp("same"), bracket)


def test_the_drawing_itself_is_read_as_it_was_drawn(leaf):
    (part,) = read(leaf).parts
    assert part.area_mm2 == pytest.approx(area(), rel=1e-9)
    assert (len(part.holes), len(part.marks), len(part.bends)) == (4, 1, 1)
    assert {f.rule for f in base_of(leaf, "mm").findings} >= {"small-hole", "thin-web"}


@pytest.mark.parametrize("how", ONE_KNOB, ids=str)
def test_each_way_of_drawing_it(leaf, how, tmp_path):
    assert differences(leaf, "mm", how, tmp_path) == ([], [])


@settings(max_examples=40)
@given(st.integers(0, 10**6))
def test_all_ways_together(leaf, tmp_path_factory, seed):
    how = random_variant(Random(seed))
    assert differences(leaf, "mm", how, tmp_path_factory.getbasetemp()) == ([], [])


def test_a_variant_that_is_another_part_is_noticed(leaf, tmp_path):
    """The comparison can fail: a part drawn in inches and read as mm is another part."""
    other = read(varied(leaf, "mm", Variant(unit="in"), tmp_path / "v.dxf"), ReadOptions(units="mm"))
    assert other.parts[0].area_mm2 != pytest.approx(area(), rel=0.1)
    assert list(part_differences(base_of(leaf, "mm").drawing, other))


@pytest.mark.corpus
def test_a_few_real_drawings(shared_data, tmp_path):
    """Every twelfth real drawing in one way each; the campaign under tests/long does 2,000."""
    rng, wrong = Random(7), []
    corpus = shared_data / "corpus"
    for row in list(csv.DictReader((corpus / "truth.csv").read_text().splitlines()))[::12]:
        if round(float(row["mm_per_unit"] or 1.0), 4) == 1.0 and not is_ambiguous(
            base_of(corpus / row["path"], "mm").drawing
        ):
            parts, _ = differences(corpus / row["path"], "mm", random_variant(rng), tmp_path)
            wrong += [(row["path"], said) for said in parts]
    assert wrong == []
