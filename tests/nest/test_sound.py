"""A first layout that does not verify, by force: it is mended, or its faulty pieces are left out with a word."""

from dataclasses import replace

import pytest

from flatprep.nest import solve
from flatprep.nest.problem import Budget, KeptSheet
from flatprep.nest.sound import UnsoundError, with_more_room
from flatprep.nest.verify import LayoutFault, verify
from tests.nest.parts import ask, disc, item, rectangle, sheet

STEPS = Budget(steps=1)


def shoved(answer, count=1):
    """The answer with its last pieces shoved onto its first one."""
    first, late = answer.places[0], answer.places[-count:]
    return replace(answer, places=(*answer.places[:-count], *(replace(p, x=first.x, y=first.y) for p in late)))


def spoil(monkeypatch, spoilt, times=None):
    """Let the constructive rule's answers be spoilt, so many times."""
    real, made = solve.first_answers, []

    def answers(group, margin_mm, stop):
        for answer in real(group, margin_mm, stop):
            made.append(answer)
            yield spoilt(answer) if times is None or len(made) <= times else answer
            return

    monkeypatch.setattr(solve, "first_answers", answers)
    monkeypatch.setattr(solve._Job, "improve", lambda *_: None)
    return made


@pytest.fixture
def asked():
    items = [item(rectangle("plate", 60, 40), 6), item(disc("disc", 20), 4)]
    return ask(items, [sheet(400, 200)], spacing=3.0, margin=8.0)


def test_it_is_laid_again_with_more_room(monkeypatch, asked):
    made = spoil(monkeypatch, shoved, times=1)
    layout = solve.nest(asked, STEPS)
    assert len(made) == 2
    assert layout.unplaced == ()
    assert verify(layout, asked) == ()


def test_margins_of_a_side_get_more_room_too_and_figures_stay_true(monkeypatch, asked):
    """The sheet's own margins count again in what is told: used length, and where pieces may lie."""
    stock = (replace(asked.stock[0], margins_mm=(10.0, 5.0, 0.0, 12.0)),)
    more = with_more_room(replace(asked, stock=stock), 0.5)
    assert (more.spacing_mm, more.margin_mm, more.stock[0].margins_mm) == (3.5, 8.5, (10.5, 5.5, 0.5, 12.5))
    spoil(monkeypatch, shoved, times=1)
    layout = solve.nest(replace(asked, stock=stock), STEPS)
    assert verify(layout, replace(asked, stock=stock)) == ()
    assert layout.unplaced == ()


def test_where_nothing_helps_the_pieces_at_fault_are_left_out_with_a_word(monkeypatch, asked):
    spoil(monkeypatch, lambda answer: shoved(answer, 2))
    layout = solve.nest(asked, STEPS)
    assert verify(layout, asked) == ()
    (left,) = layout.unplaced
    assert (left.part, left.count) == ("disc", 2)
    assert left.why.startswith("found no sound place: sheet 1: plate 1 and disc")
    assert sum(len(s.placements) for s in layout.sheets) == 8


def test_a_fault_of_no_piece_leaves_the_group_out_and_the_other_one_in(monkeypatch, asked):
    """Nothing of the steel verifies; the acrylic lies as ever."""
    real = solve.verify

    def stricter(layout, ask, *sound):
        steel = any(s.material == "steel" for s in layout.sheets)
        return (LayoutFault("figure", "sheet 1: no figure is right", 1),) if steel else real(layout, ask, *sound)

    monkeypatch.setattr(solve, "verify", stricter)
    both = ask(
        [*asked.items, item(rectangle("pane", 50, 50), 2, material="acrylic")],
        [*asked.stock, sheet(200, 100, name="clear", material="acrylic")],
        spacing=3.0,
    )
    layout = solve.nest(both, STEPS)
    assert [(s.stock, len(s.placements)) for s in layout.sheets] == [("clear", 2)]
    assert {(u.part, u.count) for u in layout.unplaced} == {("plate", 6), ("disc", 4)}
    assert all("no figure is right" in u.why for u in layout.unplaced)


def test_kept_pieces_stay_and_only_new_ones_are_left_out(monkeypatch, asked):
    kept = solve.nest(replace(asked, items=(replace(asked.items[0], quantity=2),)), STEPS)
    again = replace(asked, keep=(KeptSheet("sheet", kept.sheets[0].placements),))
    spoil(monkeypatch, shoved)
    layout = solve.nest(again, STEPS)
    assert verify(layout, again) == ()
    where = {(p.part, p.dx, p.dy) for p in layout.sheets[0].placements}
    assert {(p.part, p.dx, p.dy) for p in kept.sheets[0].placements} <= where
    assert sum(u.count for u in layout.unplaced) == 1


def test_a_layout_that_is_wrong_in_the_end_is_an_error_in_words(monkeypatch, asked):
    monkeypatch.setattr(solve._Job, "layout", lambda self: replace(solve.layout_of(asked, [], []), sheets=()))
    with pytest.raises(UnsoundError, match="the layout is not sound, and none is written") as caught:
        solve.nest(asked, STEPS)
    assert "another --seed" in caught.value.remedy
