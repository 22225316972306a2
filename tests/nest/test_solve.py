"""From ask to layout, end to end."""

from collections import Counter

import numpy as np
import pytest

from flatprep.model.drawing import Contour, Part
from flatprep.nest.problem import Budget
from flatprep.nest.solve import nest
from flatprep.nest.verify import verify
from tests.nest.parts import ask, disc, hook, item, rectangle, remnant, ring, sheet

FEW = Budget(steps=3, seed=1)


def solved(question, budget=FEW, **more):
    layout = nest(question, budget, **more)
    assert verify(layout, question) == ()
    return layout


def names(layout):
    return Counter(p.part for s in layout.sheets for p in s.placements)


def whys(layout):
    return {u.part: u.why for u in layout.unplaced}


def test_materials_and_thicknesses_nest_apart():
    parts = [
        item(rectangle("a", 60.0, 40.0), 5),
        item(rectangle("b", 60.0, 40.0), 5, thickness_mm=5.0),
        item(disc("c", 25.0), 5, material="brass"),
    ]
    stock = [sheet(), sheet(name="thick", thickness_mm=5.0), sheet(name="brass", material="brass")]
    layout = solved(ask(parts, stock, 3.0, 8.0))
    assert {s.stock: {p.part for p in s.placements} for s in layout.sheets} == {
        "sheet": {"a"},
        "thick": {"b"},
        "brass": {"c"},
    }
    assert layout.unplaced == ()


def test_sheets_are_taken_as_needed_but_no_more_than_there_are():
    big = item(rectangle("big", 280.0, 180.0), 3)
    assert len(solved(ask([big], [sheet(count=None)], 3.0, 8.0)).sheets) == 3
    layout = solved(ask([big], [sheet(count=2)], 3.0, 8.0))
    assert len(layout.sheets) == 2
    assert whys(layout) == {"big": "no room left on sheet"}
    assert layout.unplaced[0].count == 1


def test_remnant_is_filled_before_a_full_sheet():
    notched = remnant([(0, 0), (200, 0), (200, 60), (120, 60), (100, 30), (80, 60), (0, 60)])
    layout = solved(ask([item(rectangle("tag", 45.0, 20.0), 4)], [sheet(), notched], 2.0, 5.0))
    assert [s.stock for s in layout.sheets] == ["remnant"]


def test_cheaper_of_two_sheets_is_taken():
    stock = [sheet(name="dear", price=90.0), sheet(name="cheap", price=30.0)]
    layout = solved(ask([item(rectangle("tag", 50.0, 25.0), 4)], stock))
    assert [s.stock for s in layout.sheets] == ["cheap"]


def test_last_sheet_becomes_a_cheaper_one_when_its_parts_fit_there():
    """Four plates of 140 x 90 fill a large sheet, the fifth needs but a small one."""
    stock = [
        sheet(300.0, 200.0, name="large", price=60.0, count=3),
        sheet(150.0, 100.0, name="small", price=9.0, count=1),
    ]
    layout = solved(ask([item(rectangle("p", 140.0, 90.0), 5)], stock, 0.0, 3.0), Budget(steps=40, seed=1))
    assert sorted(s.stock for s in layout.sheets) == ["large", "small"]


def test_two_small_sheets_are_dearer_than_the_large_one():
    stock = [sheet(150.0, 100.0, name="small", price=30.0, count=4), sheet(300.0, 200.0, name="large", price=50.0)]
    layout = solved(ask([item(rectangle("tag", 140.0, 90.0), 2)], stock, 2.0, 2.0))
    assert [s.stock for s in layout.sheets] == ["large"]


def test_open_length_is_cut_to_what_is_used():
    layout = solved(ask([item(rectangle("r", 50.0, 90.0), 4, turns_deg=(0.0,))], [sheet(None, 200.0)], 0.0, 10.0))
    only = layout.sheets[0]
    assert only.used_length_mm == pytest.approx(120.0)  # two columns of two, and both margins
    assert np.ptp(only.outline, axis=0) == pytest.approx([120.0, 200.0])
    assert only.utilisation == pytest.approx(4 * 4500 / (120 * 200))


def test_handed_pairs_come_in_both_hands():
    layout = solved(ask([item(hook("hook"), 3, quantity_opposite=2)], [sheet()], 2.0, 5.0))
    assert Counter(p.mirrored for s in layout.sheets for p in s.placements) == {False: 3, True: 2}
    assert sorted(p.copy for s in layout.sheets for p in s.placements) == [1, 2, 3, 4, 5]


def test_grain_decides_the_turns_on_each_stock():
    parts = [item(rectangle("slat", 90.0, 20.0), 6, grain="x")]
    stock = [sheet(100.0, 70.0, name="along", grain="length"), sheet(70.0, 100.0, name="across", grain="width")]
    layout = solved(ask(parts, stock, 2.0, 3.0))
    turns = {s.stock: {p.turn_deg % 180.0 for p in s.placements} for s in layout.sheets}
    assert turns == {"along": {0.0}, "across": {90.0}}


def test_part_in_the_window_of_another_or_not():
    parts = [item(ring("frame", 95.0, 80.0)), item(disc("coin", 70.0))]
    stock = [sheet(200.0, 200.0, count=None)]
    assert len(solved(ask(parts, stock, 3.0, 4.0)).sheets) == 1
    assert len(solved(ask(parts, stock, 3.0, 4.0, windows=False)).sheets) == 2


def test_piece_that_fits_only_turned_by_a_skew_angle_is_laid():
    bar = item(rectangle("bar", 340.0, 6.0))
    assert names(solved(ask([bar], [sheet(300.0, 200.0)]))) == {"bar": 1}


def test_piece_that_fits_to_the_last_hundredth():
    assert names(solved(ask([item(rectangle("r", 284.0, 184.0))], [sheet()], 3.0, 8.0))) == {"r": 1}
    tight = Part("round", Contour(np.array([[0.0, 0, 0], [200, 0, 1], [200, 100, 0], [0, 100, 1]])))
    assert names(solved(ask([item(tight)], [sheet(300.0, 100.0)]))) == {"round": 1}


WEDGE = [(0, 0), (100, 0), (0, 60)]


@pytest.mark.parametrize(
    ("part", "stock", "words"),
    [
        pytest.param(item(rectangle("p", 400.0, 300.0)), sheet(), "larger than sheet", id="too-large"),
        pytest.param(
            item(rectangle("p", 100.0, 250.0), turns_deg=(0.0,)), sheet(), "only at a turn that", id="turn-forbidden"
        ),
        pytest.param(
            item(Part("p", Contour(np.array([[x, y, 0.0] for x, y in WEDGE]))), turns_deg=(0.0,)),
            remnant([(-100, 0), (0, 0), (0, 60)], name="sheet"),
            "only turned over",
            id="mirrored-only",
        ),
        pytest.param(item(rectangle("p", 50.0, 50.0), grain="x"), sheet(), "states no grain", id="no-grain"),
        pytest.param(item(rectangle("p", 50.0, 50.0), material="brass"), sheet(), "no stock of brass", id="no-stock"),
    ],
)
def test_unplaceable_part_is_told_with_the_reason_and_the_rest_is_laid(part, stock, words):
    layout = solved(ask([part, item(rectangle("small", 5.0, 5.0), 3)], [stock]))
    assert words in whys(layout)["p"]
    assert names(layout) == {"small": 3}


def test_spacing_larger_than_the_sheet_allows_one_piece_only():
    layout = solved(ask([item(disc("d", 20.0), 2)], [sheet()], 500.0, 5.0))
    assert names(layout) == {"d": 1}
    assert whys(layout)["d"] == "no room left on sheet"


def test_margin_that_leaves_nothing():
    layout = solved(ask([item(disc("d", 20.0))], [sheet()], 1.0, 150.0))
    assert whys(layout)["d"] == "margin and keep-outs leave nothing of any sheet"
    covered = solved(ask([item(disc("d", 20.0))], [sheet(keep_out=((-1.0, -1.0, 400.0, 300.0),))], 1.0, 5.0))
    assert whys(covered)["d"] == "margin and keep-outs leave nothing of any sheet"


def test_negative_spacing_is_refused():
    with pytest.raises(ValueError, match="negative"):
        nest(ask([item(disc("d", 20.0))], [sheet()], -1.0))


def test_steps_give_the_same_layout_every_time_and_reports_only_get_better():
    parts = [item(hook("hook", 70.0, 50.0, 12.0), 14), item(disc("coin", 16.0), 10)]
    question = ask(parts, [sheet(None, 150.0)], 2.0, 4.0)
    seen = []
    first = solved(question, Budget(steps=20, seed=3), on_better=seen.append)
    again = solved(question, Budget(steps=20, seed=3))
    assert first.sheets[0].placements == again.sheets[0].placements
    lengths = [layout.sheets[0].used_length_mm for layout in seen]
    assert lengths == sorted(lengths, reverse=True)
    assert lengths[-1] == first.sheets[0].used_length_mm
    assert all(verify(layout, question) == () for layout in seen)


def test_quantity_nought_is_passed_over():
    layout = solved(ask([item(disc("d", 20.0), 0), item(disc("e", 20.0), 1)], [sheet()]))
    assert names(layout) == {"e": 1}


def test_part_far_from_its_origin_lands_on_the_sheet():
    layout = solved(ask([item(rectangle("far", 50.0, 30.0, x=1e5, y=-2e5), 3)], [sheet()], 1.0, 1.0))
    assert names(layout) == {"far": 3}


class Line:
    """A progress that keeps what it is told."""

    def __init__(self):
        self.said = []

    def update(self, what, *, done=None, total=None):
        self.said.append(what)


def test_progress_tells_the_time_that_is_left_where_time_counts():
    question = ask([item(hook("hook", 70.0, 50.0, 12.0), 14)], [sheet(None, 150.0)], 2.0, 4.0)
    timed, counted = Line(), Line()
    solved(question, Budget(seconds=3.0), progress=timed)
    left = [int(line.split(", ")[-1].removesuffix(" s left")) for line in timed.said if "left" in line]
    assert len(left) > 1
    assert left == sorted(left, reverse=True)
    assert left[0] <= 3
    assert all(line.startswith("1 sheet, the last used to ") for line in timed.said if "left" in line)
    solved(question, FEW, progress=counted)
    assert not [line for line in counted.said if "left" in line]
