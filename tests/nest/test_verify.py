"""The verifier: every kind of fault planted, and sound layouts at the very limit."""

from dataclasses import replace

import numpy as np
import pytest

from flatprep.geom.bulge import Similarity
from flatprep.model.layout import Layout, Placement, SheetLayout, Unplaced
from flatprep.nest.assemble import FilledSheet, Spot, layout_of
from flatprep.nest.verify import sheet_key, verify
from tests.nest.parts import ask, disc, hook, item, rectangle, remnant, ring, sheet


def laid(question, *sheets):
    """Layout of (stock, [(item, turn, mirrored, x, y), ...]) pairs with true figures."""
    filled = [
        FilledSheet(stock, tuple(Spot(i, Similarity(turn_deg=t, mirrored=m, dx=x, dy=y)) for i, t, m, x, y in spots))
        for stock, spots in sheets
    ]
    return layout_of(question, filled, [])


def kinds(layout, question):
    return [f.kind for f in verify(layout, question)]


SQUARE = item(rectangle("square", 50.0, 50.0), 2)


def two_squares(gap, spacing, margin=10.0):
    question = ask([SQUARE], [sheet()], spacing, margin)
    spots = [(SQUARE, 0.0, False, 10.0, 10.0), (SQUARE, 0.0, False, 60.0 + gap, 10.0)]
    return laid(question, (question.stock[0], spots)), question


@pytest.mark.parametrize(
    ("gap", "spacing", "found"),
    [
        pytest.param(2.99, 3.0, ["spacing"], id="just-below"),
        pytest.param(3.0 - 2e-6, 3.0, ["spacing"], id="two-nanometres-below-the-slack"),
        pytest.param(3.0, 3.0, [], id="exactly-at-limit"),
        pytest.param(3.0 - 1e-9, 3.0, [], id="rounding-noise"),
        pytest.param(40.0, 3.0, [], id="far"),
        pytest.param(0.0, 0.0, [], id="touching-is-allowed"),
        pytest.param(-0.001, 0.0, ["overlap"], id="overlap"),
        pytest.param(-0.001, 3.0, ["overlap"], id="overlap-with-spacing"),
    ],
)
def test_gap_between_two_squares(gap, spacing, found):
    assert kinds(*two_squares(gap, spacing)) == found


@pytest.mark.parametrize(("apart", "found"), [(43.0, []), (43.0 - 1e-5, ["spacing"]), (43.0 + 1e-9, [])])
def test_gap_between_two_discs_is_measured_on_the_arcs(apart, found):
    """Discs of radius 20 whose centres are 43 mm apart in a skew direction leave exactly 3 mm."""
    one = item(disc("disc", 20.0), 2)
    question = ask([one], [sheet()], 3.0, 5.0)
    step = apart * np.array([np.cos(0.7), np.sin(0.7)])
    spots = [(one, 11.0, False, 60.0, 60.0), (one, 200.0, False, 60.0 + step[0], 60.0 + step[1])]
    assert kinds(laid(question, (question.stock[0], spots)), question) == found


@pytest.mark.parametrize(
    ("x", "margin", "found"),
    [
        pytest.param(7.99, 8.0, ["margin"], id="just-below"),
        pytest.param(8.0, 8.0, [], id="exactly-at-limit"),
        pytest.param(8.0 - 1e-9, 8.0, [], id="rounding-noise"),
        pytest.param(-0.001, 0.0, ["margin"], id="beyond-the-border"),
        pytest.param(0.0, 0.0, [], id="on-the-border"),
        pytest.param(-400.0, 0.0, ["margin"], id="off-the-sheet"),
    ],
)
def test_margin(x, margin, found):
    one = item(rectangle("square", 50.0, 50.0))
    question = ask([one], [sheet()], 3.0, margin)
    layout = laid(question, (question.stock[0], [(one, 0.0, False, x, 20.0)]))
    assert [k for k in kinds(layout, question) if k != "figure"] == found


def test_part_over_a_hole_of_a_remnant():
    one = item(rectangle("square", 50.0, 50.0))
    stock = remnant([(0, 0), (200, 0), (200, 100), (0, 100)], [[(90, 40), (110, 40), (110, 60), (90, 60)]])
    question = ask([one], [stock], 3.0, 5.0)
    assert kinds(laid(question, (stock, [(one, 0.0, False, 70.0, 25.0)])), question) == ["margin"]
    assert kinds(laid(question, (stock, [(one, 0.0, False, 30.0, 25.0)])), question) == []
    assert kinds(laid(question, (stock, [(one, 0.0, False, 36.0, 25.0)])), question) == ["margin"]


@pytest.mark.parametrize(("windows", "found"), [(True, []), (False, ["window"])])
def test_part_in_a_window(windows, found):
    frame, coin = item(ring("frame", 50.0, 30.0)), item(disc("coin", 20.0))
    question = ask([frame, coin], [sheet()], 3.0, 5.0, windows=windows)
    spots = [(frame, 0.0, False, 60.0, 60.0), (coin, 0.0, False, 65.0, 60.0)]
    assert kinds(laid(question, (question.stock[0], spots)), question) == found
    near = [spots[0], (coin, 0.0, False, 68.0, 60.0)]
    assert "spacing" in kinds(laid(question, (question.stock[0], near)), question)


@pytest.mark.parametrize(
    ("turn", "found"), [(90.0, []), (450.0, []), (90.0 + 1e-7, ["turn"]), (45.0, ["turn"]), (-270.0, [])]
)
def test_turn_that_is_not_listed(turn, found):
    one = item(rectangle("square", 50.0, 50.0), turns_deg=(0.0, 90.0))
    question = ask([one], [sheet()])
    assert kinds(laid(question, (question.stock[0], [(one, turn, False, 100.0, 100.0)])), question) == found


@pytest.mark.parametrize(
    ("of_part", "of_stock", "turn", "found"),
    [
        ("x", "length", 0.0, []),
        ("x", "length", 180.0, []),
        ("x", "length", 90.0, ["grain"]),
        ("x", "width", 90.0, []),
        ("x", "width", 0.0, ["grain"]),
        ("y", "length", 270.0, []),
        ("y", "width", 0.0, []),
        ("x", None, 0.0, ["grain"]),
    ],
)
def test_grain(of_part, of_stock, turn, found):
    one = item(rectangle("square", 50.0, 50.0), grain=of_part)
    question = ask([one], [sheet(grain=of_stock)])
    assert kinds(laid(question, (question.stock[0], [(one, turn, False, 100.0, 100.0)])), question) == found


@pytest.mark.parametrize(
    ("more", "hands", "found"),
    [
        pytest.param({}, (True,), ["count", "flip"], id="not-allowed"),
        pytest.param({"may_flip": True}, (True,), [], id="may-flip"),
        pytest.param({"quantity_opposite": 1}, (False, True), [], id="pair"),
        pytest.param({"quantity_opposite": 1}, (False, False), ["count"], id="two-of-one-hand"),
    ],
)
def test_hands(more, hands, found):
    one = item(hook("hook"), 1, **more)
    question = ask([one], [sheet()])
    spots = [(one, 0.0, hand, 100.0, 10.0 + 50.0 * k) for k, hand in enumerate(hands)]
    assert kinds(laid(question, (question.stock[0], spots)), question) == found


def test_missing_piece_is_noticed_unless_it_is_listed():
    layout, question = two_squares(5.0, 3.0)
    fewer = laid(question, (question.stock[0], [(SQUARE, 0.0, False, 10.0, 10.0)]))
    assert kinds(fewer, question) == ["count"]
    assert kinds(replace(fewer, unplaced=(Unplaced("square", 1, "no room"),)), question) == []
    assert kinds(replace(layout, unplaced=(Unplaced("square", 1, "no room"),)), question) == ["count"]


def test_more_sheets_than_there_are():
    question = ask([SQUARE], [sheet(count=1)])
    one = (question.stock[0], [(SQUARE, 0.0, False, 10.0, 10.0)])
    assert kinds(laid(question, one, one), question) == ["stock"]
    plenty = ask([SQUARE], [sheet(count=None)])
    one = (plenty.stock[0], [(SQUARE, 0.0, False, 10.0, 10.0)])
    assert kinds(laid(plenty, one, one), plenty) == []


@pytest.mark.parametrize("wrong", [{"material": "brass"}, {"thickness_mm": 4.0}])
def test_part_on_stock_of_another_kind(wrong):
    question = ask([item(rectangle("square", 50.0, 50.0))], [sheet(**wrong)])
    layout = laid(question, (question.stock[0], [(question.items[0], 0.0, False, 10.0, 10.0)]))
    assert kinds(layout, question) == ["stock"]


def test_stated_figures_must_be_true():
    layout, question = two_squares(3.0, 3.0)
    true = layout.sheets[0]
    assert true.utilisation == pytest.approx(2 * 2500 / 60000)
    assert true.used_length_mm == pytest.approx(123.0)
    for wrong in (replace(true, utilisation=0.09), replace(true, used_length_mm=122.9)):
        assert kinds(replace(layout, sheets=(wrong,)), question) == ["figure"]


def test_border_must_be_the_stocks():
    layout, question = two_squares(3.0, 3.0)
    wider = replace(layout.sheets[0], outline=layout.sheets[0].outline * np.array([1.0, 1.01]))
    assert "border" in kinds(replace(layout, sheets=(wider,)), question)


def test_strange_part_strange_stock_and_no_number():
    _, question = two_squares(3.0, 3.0)

    def of(placement, stock="sheet"):
        outline = np.array([[0.0, 0], [300, 0], [300, 200], [0, 200]])
        one = SheetLayout(stock, "steel", 3.0, outline, (), 60.0, 0.0, (placement,))
        return kinds(Layout(3.0, 10.0, (one,)), question)

    assert "count" in of(Placement("nobody", 1, 0.0, False, 0.0, 0.0))
    assert "count" in of(Placement("square", 1, 0.0, False, 20.0, 20.0), stock="none")
    assert "figure" in of(Placement("square", 1, 0.0, False, float("nan"), 20.0))


def test_a_sheet_found_sound_before_is_not_looked_at_again_but_counted():
    layout, question = two_squares(-1.0, 3.0)
    known = frozenset(map(sheet_key, layout.sheets))
    assert kinds(layout, question) == ["overlap"]
    assert verify(layout, question, known) == ()
    moved, _ = two_squares(-1.001, 3.0)
    assert [f.kind for f in verify(moved, question, known)] == ["overlap"]
    more = ask([replace(SQUARE, quantity=3)], [sheet()], 3.0, 10.0)
    assert [f.kind for f in verify(layout, more, known)] == ["count"]
