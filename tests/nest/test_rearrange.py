"""What is changed about in a layout that could not be untangled."""

from collections import Counter

import numpy as np
import pytest

from flatprep.nest.clock import Clock
from flatprep.nest.engine import Engine
from flatprep.nest.rearrange import rearrange, shuffle_near, swap_two
from flatprep.nest.search import sheets_task
from flatprep.nest.shapes import Container, Place, Shape

SIDE = 10.0


def square(side: float) -> np.ndarray:
    return side * np.array([[0.0, 0.0], [1.0, 0.0], [1.0, 1.0], [0.0, 1.0]])


def sheet(side: float) -> Container:
    return Container(square(side))


def field_of_squares(seed: int) -> Engine:
    """Five times five squares on a sheet, and one alone on a second sheet."""
    places = [Place(0, 0, 0.0, False, SIDE * i, SIDE * j) for i in range(5) for j in range(5)]
    shapes = [Shape(square(SIDE), turns_deg=(0.0,), count=26)]
    task = sheets_task(shapes, [sheet(5 * SIDE), sheet(5 * SIDE)], [*places, Place(0, 1, 0.0, False, 0.0, 0.0)])
    return Engine(task.outlines, task.free, task.field, task.start, Clock(steps=1), np.random.default_rng(seed))


def middles(engine: Engine) -> np.ndarray:
    b = engine.board
    return 0.5 * np.column_stack([b.left + b.right, b.low + b.high])


def test_pieces_of_one_neighbourhood_take_each_others_places():
    moved_at_all, sizes = set(), Counter()
    for seed in range(200):
        engine = field_of_squares(seed)
        before, homes = middles(engine), engine.board.home.copy()
        shuffle_near(engine)
        after = middles(engine)
        moved = np.flatnonzero(np.abs(after - before).max(axis=1) > 1e-9)
        sizes[len(moved)] += 1
        moved_at_all |= set(moved.tolist())
        assert Counter(map(tuple, np.round(after, 6))) == Counter(map(tuple, np.round(before, 6)))
        on_first = moved[homes[moved] == 0]
        # five nearest ones of a grid lie within two of its steps of one of them
        if len(on_first) == len(moved) and len(moved):
            assert min(np.hypot(*(before[moved] - before[k]).T).max() for k in range(25)) <= 2.0 * SIDE + 1e-6
    # of three, four or five pieces: none moves in 1/18 + 1/72 + 1/360 of the cases (14 of 200), five do in 44/360 (24)
    assert set(sizes) == {0, 2, 3, 4, 5}
    assert sizes[0] < 25
    assert sizes[5] > 12
    assert len(moved_at_all) == 26


def test_the_sheet_goes_with_the_place():
    for seed in range(100):
        engine = field_of_squares(seed)
        rect = engine.board.rect
        shuffle_near(engine)
        for (x, _), home in zip(middles(engine), engine.board.home, strict=True):
            assert rect[home, 0] <= x <= rect[home, 2]


def two_kinds() -> Engine:
    """A large square and a bar, far apart, and small squares."""
    bar = np.array([[0.0, 0.0], [30.0, 0.0], [30.0, 8.0], [0.0, 8.0]])
    shapes = [
        Shape(square(20.0), turns_deg=(0.0,)),
        Shape(bar, turns_deg=(0.0,)),
        Shape(square(5.0), turns_deg=(0.0,), count=3),
    ]
    places = [Place(0, 0, 0.0, False, 0.0, 0.0), Place(1, 0, 0.0, False, 60.0, 50.0)]
    places += [Place(2, 0, 0.0, False, 0.0, 30.0 + 10.0 * k) for k in range(3)]
    task = sheets_task(shapes, [sheet(100.0)], places)
    return Engine(task.outlines, task.free, task.field, task.start, Clock(steps=1), np.random.default_rng(1))


def test_two_large_pieces_change_over_middle_on_middle():
    engine = two_kinds()
    before = middles(engine)
    swap_two(engine)
    after = middles(engine)
    kinds = engine.outlines.shape[engine.board.variant]
    moved = np.flatnonzero(np.abs(after - before).max(axis=1) > 1e-9)
    assert len(moved) == 2
    assert len(set(kinds[moved].tolist())) == 2
    a, b = moved
    # clamped to the sheet: the bar's middle cannot be where the square's was, 10 mm from the left border
    assert after[a] == pytest.approx(
        np.maximum(before[b], 0.5 * engine.outlines.rings.box[engine.board.variant[a], 2:])
    )
    assert after[b] == pytest.approx(
        np.maximum(before[a], 0.5 * engine.outlines.rings.box[engine.board.variant[b], 2:])
    )


def test_pieces_of_one_kind_do_not_change_over():
    engine = field_of_squares(3)
    before = middles(engine)
    swap_two(engine)
    assert np.array_equal(middles(engine), before)


def test_either_is_done_about_as_often():
    near = 0
    for seed in range(400):
        engine = field_of_squares(seed)  # of one kind: only a neighbourhood can change
        before = middles(engine)
        rearrange(engine)
        near += not np.array_equal(middles(engine), before)
    assert 140 < near < 240  # half of 400, less the shuffles that leave all where they were


def test_a_piece_stays_where_it_would_not_fit():
    low = Container(np.array([[0.0, 0.0], [200.0, 0.0], [200.0, 10.0], [0.0, 10.0]]))
    shapes = [Shape(square(20.0), turns_deg=(0.0,)), Shape(square(10.0), turns_deg=(0.0,))]
    places = [Place(0, 0, 0.0, False, 0.0, 0.0), Place(1, 1, 0.0, False, 50.0, 0.0)]
    task = sheets_task(shapes, [sheet(40.0), low], places)
    engine = Engine(task.outlines, task.free, task.field, task.start, Clock(steps=1), np.random.default_rng(1))
    swap_two(engine)
    assert engine.board.home.tolist()[:2] == [0, 0]
