"""Callouts: ways of writing read right, other texts left alone, and the holes they stand for."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.bench.checklist import checklist
from flatprep.measure.holes import recognise
from flatprep.model.drawing import Text
from flatprep.practice.callout_holes import drawn_work
from flatprep.practice.callouts import Callout, parse_callouts
from tests.bench.parts import bench, plate
from tests.reference_tables import table

TABLE = table("callouts")["table"]


def _told(found: tuple[Callout, ...]) -> str:
    words = []
    for one in found:
        deep = f" depth {one.depth_mm:g}" if one.depth_mm is not None and one.kind != "counterbore" else ""
        words.append(f"{one.kind} {one.size}{deep}" + (f" side {one.side}" if one.side else ""))
    counts = {one.count for one in found}
    assert len(counts) <= 1
    count = counts.pop() if counts else None
    return (f"{count}: " if count else "") + " + ".join(words)


@pytest.mark.parametrize(("text", "meaning"), TABLE["callout"], ids=[c[0] for c in TABLE["callout"]])
def test_ways_of_writing(text, meaning):
    assert _told(parse_callouts(text)) == meaning


@pytest.mark.parametrize("text", TABLE["other"])
def test_other_texts_are_left_alone(text):
    assert parse_callouts(text) == ()


def test_the_table_is_as_large_as_promised():
    assert len(TABLE["callout"]) >= 60
    assert len(TABLE["other"]) >= 30


def test_bare_numbers_are_in_the_drawings_unit():
    assert parse_callouts("Ø0.5 THRU", "in")[0].diameter_mm == pytest.approx(12.7)
    assert parse_callouts("Ø12.7 mm THRU", "in")[0].diameter_mm == pytest.approx(12.7)
    assert parse_callouts('Ø1/2" THRU', "mm")[0].diameter_mm == pytest.approx(12.7)


@given(st.text(max_size=40))
def test_any_text_is_read_without_a_crash(text):
    parse_callouts(text)


@given(st.text(alphabet="M0123456789x-/ Ø°HUNCFTRSKDEP#.,()", max_size=24))
def test_any_text_of_callout_letters_is_read_without_a_crash(text):
    parse_callouts(text)


# ---------------------------------------------------------------- which holes


def _holes(*holes):
    return [recognise(contour) for contour in plate(200, 100, *holes).holes]


def _text(words, x, y, *points_to):
    return Text(words, (x, y), "NOTE", "1A", 3.0, tuple(points_to))


FOUR = ((20, 20, 4.2), (80, 20, 4.2), (20, 80, 4.2), (80, 80, 4.2))


def test_a_count_takes_all_holes_of_that_size():
    found = drawn_work(_holes(*FOUR, (50, 50, 9)), [_text("4x M5", 24, 22)])
    (work,) = found.work
    assert (work.kind, work.size, len(work.at)) == ("tap", "M5", 4)
    assert not found.questions


def test_a_count_that_does_not_match_is_asked_back():
    found = drawn_work(_holes(*FOUR), [_text("3x M5", 24, 22)])
    assert not found.work
    assert "drawn: 4, asked for: 3" in found.questions[0]


def test_a_leader_goes_before_nearness():
    holes = _holes((20, 20, 4.2), (80, 20, 4.2))
    (work,) = drawn_work(holes, [_text("M5", 22, 24, (80, 22.1))]).work
    assert work.at == ((80, 20),)


def test_a_leader_that_points_at_no_hole_asks_for_nothing():
    assert drawn_work(_holes((20, 20, 4.2)), [_text("M5", 22, 24, (150, 50))]).work == ()


def test_the_nearest_hole_that_can_be_meant_is_taken():
    holes = _holes((20, 20, 9), (34, 20, 4.2))
    (work,) = drawn_work(holes, [_text("M5", 22, 26)]).work
    assert work.at == ((34, 20),)


def test_a_hole_too_large_for_the_thread_is_asked_back():
    found = drawn_work(_holes((20, 20, 6)), [_text("M5", 24, 20)])
    assert not found.work
    assert "hole of 6 mm" in found.questions[0]


def test_far_texts_mean_nothing():
    assert drawn_work(_holes((20, 20, 4.2)), [_text("M5", 100, 80)]) == drawn_work(_holes(), [])


def test_a_countersink_without_its_head_is_asked_back():
    """M4 has four heads with sinks of 9.18, 9.4, 8.6 and 7.5 mm: which one nobody can know."""
    found = drawn_work(_holes((20, 20, 4.5)), [_text("CSK M4 90", 24, 20)])
    assert not found.work
    assert "ISO 10642 (sink 9.18 mm)" in found.questions[0]
    assert "ISO 2009 (sink 9.4 mm)" in found.questions[0]


@pytest.mark.parametrize("words", ["CSK #12 82", "CBORE FOR M7", "CSK M7 90"])
def test_hardware_that_no_table_has_is_asked_back(words):
    found = drawn_work(_holes((20, 20, 5.5)), [_text(words, 24, 20)])
    assert not found.work
    assert words in found.questions[0]


@pytest.mark.parametrize(
    ("words", "near"), [("M9", "M8, M10"), ("4x M5x12", "M5, M5x0.5"), ("M8x1.2-6H", "M8, M8x0.75, M8x1")]
)
def test_a_thread_that_no_table_has_is_asked_back(words, near):
    found = drawn_work(_holes((20, 20, 7.0)), [_text(words, 24, 20)])
    assert not found.work
    assert near in found.questions[0]
    assert not drawn_work(_holes((20, 20, 7.0)), [_text(words, 150, 80)]).questions


def test_single_callouts_of_one_kind_become_one_piece_of_work():
    texts = [_text("M5", 24, 20), _text("M5", 84, 20)]
    (work,) = drawn_work(_holes((20, 20, 4.2), (80, 20, 4.2)), texts).work
    assert work.at == ((20, 20), (80, 20))


def test_a_turned_text_reaches_along_its_line():
    upright = Text("M5 THRU", (50, 20), "NOTE", "1", 3.0, turn_deg=90.0)
    level = Text("M5 THRU", (50, 20), "NOTE", "1", 3.0)
    holes = _holes((50, 45, 4.2))
    assert drawn_work(holes, [upright]).work
    assert not drawn_work(holes, [level]).work


@pytest.mark.parametrize("drawn", [3.3, 4.2, 5.5, 8.4, 11.0, 21.0])
@pytest.mark.parametrize("text", [c[0] for c in TABLE["callout"]] + TABLE["other"])
def test_no_text_of_a_drawing_stops_the_checklist(text, drawn):
    part = plate(200, 100, (20, 20, drawn), (60, 20, drawn))
    (found,) = checklist([bench(part, texts=(_text(text, 24, 20),))]).parts
    assert found.steps
