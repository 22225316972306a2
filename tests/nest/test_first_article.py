"""First articles: marked, and laid on the first sheet where that takes no more stock."""

from dataclasses import replace

import numpy as np
import pytest

from flatprep.model.layout import Layout, Placement, SheetLayout, Unplaced
from flatprep.nest.first_article import _needs_more, late_kinds, marked, nest_first_articles
from flatprep.nest.problem import Budget
from flatprep.nest.solve import nest
from flatprep.nest.verify import verify
from tests.nest.parts import ask, disc, hook, item, rectangle, sheet

FEW = Budget(steps=10)
BOX = np.array([[0.0, 0], [300, 0], [300, 200], [0, 200]])


def laid(*parts, stock="sheet", length=100.0, thickness=3.0):
    """A sheet of (name, mirrored, x)."""
    placements = tuple(Placement(name, k, 0.0, over, x, 0.0) for k, (name, over, x) in enumerate(parts, 1))
    return SheetLayout(stock, "steel", thickness, BOX, (), length, 0.1, placements)


def question(*items, **more):
    return ask(items, [sheet(count=9)], 2.0, 2.0, **more)


def firsts(layout):
    return [[(p.part, p.mirrored, p.dx) for p in s.placements if p.first] for s in layout.sheets]


def test_the_leftmost_of_each_kind_on_its_first_sheet_is_marked():
    asked = question(
        item(disc("a", 5.0), 3), item(hook("b"), 2, quantity_opposite=1), item(disc("f", 2.0), 1, filler=True)
    )
    sheets = (
        laid(("a", False, 50.0), ("a", False, 10.0), ("f", False, 0.0)),
        laid(("b", True, 70.0), ("b", False, 20.0), ("a", False, 5.0), ("b", False, 10.0)),
    )
    layout = Layout(2.0, 2.0, sheets)
    assert firsts(marked(layout, asked)) == [[("a", False, 10.0)], [("b", True, 70.0), ("b", False, 10.0)]]
    assert late_kinds(layout, asked) == (("b", True), ("b", False))


def test_a_part_that_may_be_turned_over_is_one_kind():
    asked = question(item(hook("b"), 3, may_flip=True))
    layout = Layout(2.0, 2.0, (laid(("b", True, 70.0), ("b", False, 20.0)), laid(("b", False, 0.0))))
    assert firsts(marked(layout, asked)) == [[("b", False, 20.0)], []]
    assert late_kinds(layout, asked) == ()


def test_every_material_has_a_first_sheet_of_its_own():
    asked = question(item(disc("a", 5.0), 1), item(disc("b", 5.0), 1, thickness_mm=4.0))
    layout = Layout(2.0, 2.0, (laid(("a", False, 0.0)), laid(("b", False, 0.0), thickness=4.0)))
    assert late_kinds(layout, asked) == ()


def test_they_are_laid_on_the_first_sheet_where_it_takes_no_more_stock():
    """Four plates fill a sheet; the small disc would be on the second one, were it not asked for first."""
    asked = question(item(rectangle("plate", 146.0, 96.0), 6), item(disc("small", 20.0), 2))
    plain = nest(asked, FEW)
    assert late_kinds(plain, asked) == (("small", False),)
    layout = nest_first_articles(asked, FEW)
    assert verify(layout, asked) == ()
    assert len(layout.sheets) == len(plain.sheets) == 2
    assert late_kinds(layout, asked) == ()
    assert sorted(p.part for p in layout.sheets[0].placements if p.first) == ["plate", "small"]
    assert not any(p.first for p in layout.sheets[1].placements)


def test_what_fits_by_itself_is_left_as_it_is():
    asked = question(item(rectangle("plate", 100.0, 60.0), 3), item(disc("small", 20.0), 2))
    layout, plain = nest_first_articles(asked, FEW), nest(asked, replace(FEW, steps=6))
    bare = tuple(replace(s, placements=tuple(replace(p, first=False) for p in s.placements)) for s in layout.sheets)
    assert [s.placements for s in bare] == [s.placements for s in plain.sheets]


def test_what_is_too_large_for_one_sheet_with_the_others_stays_late():
    """Two plates of nearly a whole sheet each: only one can be on the first."""
    asked = question(item(rectangle("one", 290.0, 190.0)), item(rectangle("two", 280.0, 190.0)))
    layout = nest_first_articles(asked, FEW)
    assert len(late_kinds(layout, asked)) == 1
    assert [len(f) for f in firsts(layout)] == [1, 1]


@pytest.mark.parametrize(
    ("other", "more"),
    [
        ((laid(), laid()), False),
        ((laid(), laid(length=290.0)), False),  # a whole sheet, however far it is used
        ((laid(), laid(), laid()), True),
        ((laid(), laid(stock="dear")), True),
        ((laid(), laid(), laid(stock="coil", length=10.0)), True),
    ],
)
def test_when_more_stock_is_needed(other, more):
    stock = [sheet(count=9, price=10.0), sheet(name="dear", count=9, price=11.0),
             sheet(None, 200.0, name="coil", price_per_metre=100.0)]  # fmt: skip
    asked = ask([item(disc("a", 5.0))], stock)
    plain = Layout(2.0, 2.0, (laid(), laid()))
    assert _needs_more(Layout(2.0, 2.0, other), plain, asked) is more
    assert _needs_more(replace(plain, unplaced=(Unplaced("a", 1, "no room"),)), plain, asked)


def test_a_little_more_of_an_open_length_is_nothing():
    asked = ask([item(disc("a", 5.0))], [sheet(None, 200.0, price_per_metre=10.0)])
    plain = Layout(2.0, 2.0, (laid(length=100.0),))
    assert not _needs_more(Layout(2.0, 2.0, (laid(length=101.9),)), plain, asked)
    assert _needs_more(Layout(2.0, 2.0, (laid(length=102.1),)), plain, asked)
