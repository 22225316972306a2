"""The search's state: how pieces may turn, what is laid again, what no layout can be shorter than."""

from collections import Counter
from dataclasses import replace

import numpy as np
import pytest

import flatprep.nest.line
from flatprep.nest.bounds import Bounds
from flatprep.nest.clock import Clock
from flatprep.nest.engine import Engine, Turning
from flatprep.nest.line import Line
from flatprep.nest.prospects import Prospects
from flatprep.nest.rearrange import rearrange
from flatprep.nest.search import sheets_task, strip_task
from flatprep.nest.shapes import Container, Place, Shape
from flatprep.nest.shelf import Shelf
from flatprep.nest.squeeze import SHORTEST_STEP, Squeeze, lack, send_elsewhere, shorten
from tests.nest.outlines import ELBOW, QUARTERS, SQUARE, WEDGE


def engine_of(task) -> Engine:
    return Engine(task.outlines, task.free, task.field, task.start, Clock(steps=50), np.random.default_rng(1))


def kinds() -> list[Shape]:
    return [
        Shape(ELBOW, turns_deg=None, count=2),
        Shape(WEDGE, turns_deg=None, mirror=(False, True), count=2),
        Shape(SQUARE, turns_deg=(0.0, 30.0)),
    ]


def test_free_pieces_turn_by_quarters_first_then_at_will():
    engine = engine_of(strip_task(kinds(), 40.0, None))
    told = {}
    for how in Turning:
        engine.turn(how)
        told[how] = (engine.board.usable.tolist(), engine.board.turning.tolist())
    assert told[Turning.QUARTERS] == ([4, 8, 2], [0, 0, 0])
    assert told[Turning.PACKED] == ([24, 48, 2], [0, 0, 0])
    assert told[Turning.FREELY] == ([24, 48, 2], [1, 1, 0])


def test_the_first_four_turns_make_the_box_least():
    task = strip_task([Shape(SQUARE @ np.array([[0.8, 0.6], [-0.6, 0.8]]), turns_deg=None)], 40.0, None)
    sides = (task.outlines.rings.box[:, 2:] - task.outlines.rings.box[:, :2])[:4]
    assert np.allclose(sides, 10.0, atol=1e-6)
    assert len({round(t, 6) for t in task.outlines.turn[:, 2]}) == 24


def test_untangling_ends_without_overlap_and_lays_its_best_again():
    engine = engine_of(strip_task(kinds(), 40.0, None))
    engine.turn(Turning.FREELY)
    shorten(engine, 1, 0.8 * engine.length_mm)
    assert engine.untangle(200, 3) == 0.0
    assert engine.is_free()
    kept = engine.spots()
    assert kept.length_mm == pytest.approx(engine.reach_mm)
    rearrange(engine)
    engine.lay(kept)
    again = engine.spots()
    assert np.array_equal(again.at, kept.at)
    assert np.array_equal(again.turn, kept.turn)
    assert engine.is_free()


def test_an_overlap_is_seen():
    engine = engine_of(strip_task([Shape(SQUARE, count=2)], 10.0, None))
    assert engine.is_free()
    engine.board.at[1, 0] -= 1e-5
    engine.lay(engine.spots(loss=1.0))
    assert not engine.is_free()


def test_bounds():
    # five squares of 100 mm² and an elbow (20 x 15, 174 mm²) on sheets of 400 mm²; the elbow fits only the second
    low = Container(np.array([[0.0, 0.0], [40.0, 0.0], [40.0, 10.0], [0.0, 10.0]]))
    high = Container(np.array([[0.0, 0.0], [20.0, 0.0], [20.0, 20.0], [0.0, 20.0]]))
    shapes = [Shape(SQUARE, count=5), Shape(ELBOW, turns_deg=QUARTERS)]
    start = [*(Place(0, 0, 0.0, False, 10.0 * i, 0.0) for i in range(4))]
    start += [Place(0, 2, 0.0, False, 0.0, 0.0), Place(1, 1, 0.0, False, 0.0, 0.0)]
    task = sheets_task(shapes, [low, high, low], start)
    assert task.area_mm2 == 500.0 + 174.0
    bounds = Bounds.of(engine_of(task), task.area_mm2)
    assert bounds.narrowest_mm == pytest.approx(10.0)
    assert bounds.least_mm(1) == float("inf")
    assert bounds.least_mm(2) == pytest.approx(15.0)
    assert bounds.least_mm(3) <= 0.0


def test_a_piece_that_fits_by_a_rounding_only_goes_where_it_fits_best():
    """The field is cut a trice shorter than the longest piece: rounding does that where lengths are equal."""
    bar = np.array([[0.0, 0.0], [30.0, 0.0], [30.0, 5.0], [0.0, 5.0]])
    engine = engine_of(strip_task([Shape(bar, turns_deg=(0.0,)), Shape(SQUARE, turns_deg=(0.0,), count=2)], 20.0, None))
    shorten(engine, 1, np.nextafter(30.0, 0.0) - 1e-12)
    send_elsewhere(engine, 0)
    assert engine.board.home[0] == 0
    assert lack(engine, 0, int(engine.board.variant[0])) == pytest.approx(0.0, abs=1e-9)
    assert engine.board.left[0] == pytest.approx(engine.board.rect[0, 0], abs=1e-9)


def test_a_sheet_is_given_up_though_one_piece_is_just_as_long_as_the_other_sheet():
    """Lengths and borders that are no round binary numbers: what is left of the field is a rounding off the piece."""
    for length in (0.1 + 0.2, 33.3, 100.1, 1000.7 / 3.0):
        ring = np.array([[0.1, 0.3], [0.1 + length, 0.3], [0.1 + length, 20.3], [0.1, 20.3]])
        bar = np.array([[0.0, 0.0], [length, 0.0], [length, 5.0], [0.0, 5.0]])
        shapes = [Shape(bar, turns_deg=(0.0,), count=2)]
        places = [Place(0, k, 0.0, False, 0.1, 0.3) for k in range(2)]
        engine = engine_of(sheets_task(shapes, [Container(ring), Container(ring)], places))
        whole = engine.field.rect[0]
        shorten(engine, 1, float(whole[2] - whole[0]))
        assert set(engine.board.home[:2].tolist()) == {0}


def test_a_try_that_is_not_worth_going_on_with_ends_at_once():
    engine = engine_of(strip_task(kinds(), 40.0, None))
    shorten(engine, 1, 0.5 * engine.length_mm)  # shorter than the pieces' area allows
    asked = []

    def go_on(tried: int, loss: float) -> bool:
        asked.append((tried, loss))
        return False

    loss = engine.untangle(200, 3, go_on)
    assert loss > 0.0
    assert asked == [(engine.clock.evaluations - len(engine.board.variant), loss)]


def test_a_line_that_is_stuck_goes_back_or_on_from_a_better_layout():
    """Both ways are taken; the best layout is kept."""
    engine = engine_of(strip_task(kinds(), 40.0, None))
    longer = engine.spots()
    shorten(engine, 1, 0.8 * engine.length_mm)
    engine.untangle(200, 3)
    shorter = engine.spots()
    squeeze = Squeeze(engine, shorter, Bounds.of(engine, 1.0), lambda _: None, lambda best: best)
    after = Counter()
    for _ in range(400):
        line = Line(longer, 0)
        line.add(replace(longer, length_mm=0.999 * longer.length_mm), 0)
        after[squeeze._line_after(line).last.length_mm] += 1
    assert after.keys() == {longer.length_mm, shorter.length_mm}
    assert after[shorter.length_mm] == pytest.approx(200, abs=40)  # four deviations of 400 throws of a coin
    for _ in range(40):  # where the line itself leads to the best one, only back
        line = Line(longer, 0)
        line.add(shorter, 0)
        assert squeeze._line_after(line).last is longer


def squeeze_of(seed: int = 1, steps: int = 30) -> Squeeze:
    task = strip_task(kinds(), 40.0, None)
    engine = Engine(task.outlines, task.free, task.field, task.start, Clock(steps=steps), np.random.default_rng(seed))
    return Squeeze(engine, task.start, Bounds.of(engine, 1.0), lambda _: None, lambda best: best)


def test_roaming_goes_back_where_its_line_is_stuck(monkeypatch):
    back = []
    go_back = Line.go_back
    monkeypatch.setattr(Line, "go_back", lambda line, positions: (back.append(positions), go_back(line, positions))[1])
    squeeze_of().roam(SHORTEST_STEP)
    assert not back  # 12 million positions are not spent here
    monkeypatch.setattr(flatprep.nest.line, "STUCK_POSITIONS", 20_000)
    squeeze = squeeze_of(steps=150)
    squeeze.roam(SHORTEST_STEP)
    assert len(back) > 1
    assert np.all(np.diff(back) > 20_000)
    squeeze.engine.lay(squeeze.best)
    assert squeeze.engine.is_free()


def test_layouts_of_tries_that_are_given_up_are_not_kept(monkeypatch):
    def give_up(prospects: Prospects, _tried: int, _loss: float) -> bool:
        prospects.given_up = True
        return False

    kept = []
    monkeypatch.setattr(Shelf, "add", lambda _, spots: kept.append(spots.loss))
    squeeze_of().roam(SHORTEST_STEP)
    assert kept
    kept.clear()
    monkeypatch.setattr(Prospects, "go_on", give_up)
    squeeze_of().roam(SHORTEST_STEP)
    assert not kept


def test_a_layout_that_overlaps_after_all_is_no_layout():
    squeeze = squeeze_of()
    engine = squeeze.engine
    best = squeeze._untangled()
    assert best is not None
    engine.board.at[:, 0] -= engine.board.left  # all against the left end, over each other
    engine.lay(engine.spots(loss=1.0))
    assert engine.reach_mm < best.length_mm
    assert squeeze._untangled() is None
    assert squeeze.best.length_mm == best.length_mm
