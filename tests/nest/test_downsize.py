"""A sheet that has become larger than it need be."""

from flatprep.geom.bulge import Similarity
from flatprep.nest.downsize import cheaper_kinds, downsized
from flatprep.nest.firstfit import answer_of
from flatprep.nest.group import prepare_group
from flatprep.nest.keep import left_to_lay
from flatprep.nest.shapes import Place
from tests.nest.parts import ask, item, rectangle, sheet

STOCK = (
    sheet(300.0, 200.0, name="large", price=60.0, count=3),
    sheet(150.0, 100.0, name="small", price=9.0, count=1),
    sheet(100.0, 60.0, name="tiny", price=5.0, count=0),
    sheet(500.0, 400.0, name="dear", price=99.0, count=1),
)


def answer(supply=(0,), size=(140.0, 90.0)):
    question = ask([item(rectangle("p", *size), len(supply))], STOCK)
    items, supplies = left_to_lay(question)
    group = prepare_group(items, supplies, question)
    move = Similarity()
    places = [Place(0, n, move.turn_deg, False, 70.0, 45.0) for n in range(len(supply))]
    return answer_of(group, places, supply, 0.0)


def names(made):
    return [s.stock.name for s in made.sheets]


def test_only_kinds_that_cost_less_and_are_left_come_into_question():
    one = answer()
    assert [one.group.stock[k].name for k in cheaper_kinds(one, 0)] == ["small"]
    assert cheaper_kinds(answer((0, 1)), 0) == []  # the only small one is taken


def test_part_moves_to_the_cheaper_sheet_if_it_fits():
    assert [names(a) for a in downsized(answer(), 0.0)] == [["small"]]
    assert list(downsized(answer(size=(160.0, 90.0)), 0.0)) == []


def test_one_small_sheet_is_used_once():
    found = list(downsized(answer((0, 0)), 0.0))
    assert [sorted(names(a)) for a in found] == [["large", "small"]]
