"""The search as a whole: valid, repeatable, as short as can be where that is known."""

import os
import subprocess
import sys
from dataclasses import replace

import numpy as np
import pytest
from shapely.geometry import Polygon

from flatprep.nest.clock import EVALUATIONS_A_STEP, Clock
from flatprep.nest.outlines import turned
from flatprep.nest.parallel import run_jobs
from flatprep.nest.search import search, sheets_task, strip_task
from flatprep.nest.shapes import Best, Container, Place, Shape
from tests.nest.outlines import ELBOW, FRAME, QUARTERS, SQUARE, WEDGE, WINDOW, overlap_area, regions

SHEET = Container(np.array([[0.0, 0.0], [50.0, 0.0], [50.0, 30.0], [0.0, 30.0]]))


def mixed() -> list[Shape]:
    return [
        Shape(SQUARE, turns_deg=QUARTERS, count=5),
        Shape(WEDGE, turns_deg=QUARTERS, mirror=(False, True), count=6),
        Shape(ELBOW, turns_deg=QUARTERS, count=3),
    ]


def quiet(_best):
    """Report to nobody."""


def test_reports_ever_better_layouts_without_overlap():
    told = []
    kinds = mixed()
    best = search(strip_task(kinds, 30.0, None), Clock(steps=40), 1, told.append)
    lengths = [b.length_mm for b in told]
    assert lengths == sorted(lengths, reverse=True)
    assert len(set(lengths)) == len(lengths) > 2
    assert told[-1] == best
    area = sum(s.count * Polygon(s.outer).area for s in kinds)
    assert area / (30.0 * best.length_mm) > 0.8
    for layout in (told[0], best):
        bodies = regions(kinds, layout)
        assert len(bodies) == 14
        assert overlap_area(bodies) < 1e-4
        for body in bodies:
            x0, y0, x1, y1 = body.bounds
            assert x0 > -1e-6
            assert y0 > -1e-6
            assert x1 < layout.length_mm + 1e-6
            assert y1 < 30.0 + 1e-6


def test_the_same_seed_and_steps_give_the_same_layout():
    runs = [search(strip_task(mixed(), 30.0, None), Clock(steps=15), seed, quiet) for seed in (3, 3, 4)]
    assert runs[0] == runs[1]
    assert runs[0] != runs[2]


def test_processes_meet_and_repeat():
    task = strip_task(mixed(), 30.0, None)
    met = [run_jobs(task, Clock(steps=20), 3, quiet, 2, meeting_steps=2) for _ in range(2)]
    apart = [run_jobs(task, Clock(steps=20), 3, quiet, 2) for _ in range(2)]
    assert task.best(met[0]) == task.best(met[1])
    assert task.best(apart[0]) == task.best(apart[1])
    # what the other process found changes the way of each
    assert task.best(apart[0]) != task.best(met[0])


@pytest.mark.parametrize("jobs", [1, 2])
def test_wall_time_is_kept(jobs):
    search(strip_task(mixed(), 30.0, None), Clock(steps=1), 1, quiet)  # compile, or fetch what was compiled
    clock = Clock(seconds=1.0)
    search(strip_task(mixed(), 30.0, None), clock, 1, quiet, jobs)
    # 1 s is promised; the rest is for a busy machine
    assert clock.elapsed_s < 4.0


def test_a_jigsaw_is_solved():
    # a rectangle 40 x 30 cut into four along lines that cross at (17, 11)
    cuts = [
        [[0, 0], [22, 0], [17, 11], [0, 14]],
        [[22, 0], [40, 0], [40, 9], [17, 11]],
        [[40, 9], [40, 30], [13, 30], [17, 11]],
        [[0, 14], [17, 11], [13, 30], [0, 30]],
    ]
    kinds = [Shape(np.array(c, dtype=float) - np.array(c[0])) for c in cuts]
    best = search(strip_task(kinds, 30.0, None), Clock(steps=600), 2, quiet)
    assert best.length_mm == pytest.approx(40.0, abs=0.01)


def test_free_turning_finds_turns_between_the_packed_ones():
    # a rectangle 40 x 30 cut in two, each half drawn at a turn of its own
    halves = [[[0, 0], [26, 0], [14, 30], [0, 30]], [[26, 0], [40, 0], [40, 30], [14, 30]]]
    drawn = [turned(np.array(h, dtype=float), a, mirrored=False) for h, a in zip(halves, (17.0, 101.0), strict=True)]
    kinds = [Shape(d, turns_deg=None) for d in drawn]
    best = search(strip_task(kinds, 30.01, None), Clock(steps=300), 1, quiet)
    assert best.length_mm < 40.3
    assert overlap_area(regions(kinds, best)) < 1e-4


def test_it_stops_when_nothing_can_be_gained():
    clock = Clock(seconds=60.0)
    best = search(strip_task([Shape(SQUARE, count=6)], 20.0, None), clock, 1, quiet)
    assert best.length_mm == pytest.approx(30.0, abs=1e-4)
    assert clock.elapsed_s < 30.0


def test_a_small_piece_goes_into_a_window():
    frame = Shape(FRAME, (WINDOW,))
    best = search(strip_task([frame, Shape(SQUARE, count=4)], 40.0, None), Clock(steps=60), 1, quiet)
    assert best.length_mm == pytest.approx(40.0, abs=1e-5)


def test_sheets_are_emptied():
    # twelve 10 x 10 and 14 x 8.5 pieces: as boxes in columns they spread over more sheets than they need
    kinds = [Shape(SQUARE, turns_deg=QUARTERS, count=20), Shape(ELBOW, turns_deg=QUARTERS, count=4)]
    told = []
    best = search(sheets_task(kinds, [SHEET] * 6, None), Clock(steps=60), 1, told.append)
    assert best.containers <= 3
    assert best.containers <= told[0].containers
    for k in range(best.containers):
        bodies = regions(kinds, best, k)
        assert overlap_area(bodies) < 1e-4
        room = Polygon(SHEET.outer).buffer(1e-6)
        assert all(room.covers(b) for b in bodies)


def test_an_irregular_remnant_holds_its_pieces():
    outer = np.array([[5.0, 5.0], [65.0, 5.0], [65.0, 25.0], [35.0, 25.0], [35.0, 45.0], [5.0, 45.0]])
    hole = np.array([[45.0, 10.0], [50.0, 10.0], [50.0, 15.0], [45.0, 15.0]])
    remnant = Container(outer, (hole,))
    kinds = [Shape(SQUARE, count=6)]
    start = [Place(0, 0, 0.0, False, x, y) for x in (5.0, 15.0, 25.0) for y in (5.0, 15.0)]
    best = search(sheets_task(kinds, [remnant], start), Clock(steps=30), 1, quiet)
    bodies = regions(kinds, best)
    room = Polygon(outer, [hole]).buffer(1e-6)
    assert all(room.covers(b) for b in bodies)
    assert overlap_area(bodies) < 1e-4
    assert best.length_mm == pytest.approx(20.0, abs=1e-3)


def test_a_start_with_turned_pieces_is_kept():
    kinds = [Shape(SQUARE, turns_deg=None, count=2)]
    start = [Place(0, 0, 45.0, False, 7.08, 0.0), Place(0, 0, 12.5, False, 17.5, 0.0)]
    told = []
    search(strip_task(kinds, 20.0, start), Clock(steps=2), 1, told.append)
    assert [(p.turn_deg, p.x) for p in told[0].places] == [(45.0, 7.08), (12.5, 17.5)]


def test_a_listed_turn_stays_the_listed_number():
    kinds = [Shape(ELBOW, turns_deg=(-90.0, 450.0), count=2)]
    start = [Place(0, 0, 270.0, False, 0.0, 20.0), Place(0, 0, 90.0, False, 40.0, 0.0)]
    told = []
    search(strip_task(kinds, 20.0, start), Clock(steps=1), 1, told.append)
    assert [p.turn_deg for p in told[0].places] == [-90.0, 450.0]
    assert {p.turn_deg for p in told[-1].places} <= {-90.0, 450.0}


@pytest.mark.parametrize(
    ("start", "says"),
    [
        pytest.param([Place(0, 0, 0.0, False, 0.0, 0.0)], "every piece", id="one-missing"),
        pytest.param([Place(0, 0, 0.0, False, 0.0, 0.0), Place(0, 0, 0.0, False, 9.0, 0.0)], "overlaps", id="overlap"),
        pytest.param([Place(0, 0, 0.0, False, 0.0, 0.0), Place(0, 0, 45.0, False, 20.0, 0.0)], "turned", id="turn"),
    ],
)
def test_a_bad_start_is_refused(start, says):
    with pytest.raises(ValueError, match=says):
        search(strip_task([Shape(SQUARE, count=2)], 20.0, start), Clock(steps=2), 1, quiet)


def test_pieces_that_do_not_fit_are_refused():
    with pytest.raises(ValueError, match="do not fit"):
        sheets_task([replace(Shape(SQUARE), count=16)], [SHEET], None)


def test_a_step_is_a_number_of_positions():
    clock = Clock(steps=3)
    search(strip_task(mixed(), 30.0, None), clock, 1, quiet)
    assert clock.evaluations >= 3 * EVALUATIONS_A_STEP


def small() -> Best:
    kinds = [Shape(SQUARE, count=2), Shape(WEDGE, turns_deg=QUARTERS), Shape(ELBOW, turns_deg=QUARTERS)]
    return search(strip_task(kinds, 20.0, None), Clock(steps=1), 1, quiet)


def test_plain_python_finds_just_what_compiled_code_finds():
    code = "from tests.nest.test_search import small; import sys; print(small()); assert 'numba' not in sys.modules"
    env = {**os.environ, "FLATPREP_NO_JIT": "1"}
    run = subprocess.run([sys.executable, "-c", code], env=env, capture_output=True, text=True, timeout=300)
    assert run.returncode == 0, run.stderr
    assert run.stdout.strip() == str(small())


def test_a_bar_taller_than_the_strip_lies_along_it():
    bar = np.array([[0.0, 0.0], [60.0, 0.0], [60.0, 3.0], [0.0, 3.0]])
    kinds = [Shape(bar, turns_deg=QUARTERS, count=2), Shape(SQUARE, turns_deg=QUARTERS, count=6)]
    best = search(strip_task(kinds, 16.0, None), Clock(steps=100), 1, quiet)
    assert best.length_mm == pytest.approx(60.0, abs=1e-3)


def test_a_piece_that_fits_one_sheet_only_stays_there():
    large = Container(np.array([[0.0, 0.0], [80.0, 0.0], [80.0, 40.0], [0.0, 40.0]]))
    kinds = [Shape(FRAME), Shape(SQUARE, count=3)]
    start = [Place(0, 1, 0.0, False, 30.0, 20.0), *(Place(1, 1, 0.0, False, 50.0, y) for y in (0.0, 12.0, 25.0))]
    best = search(sheets_task(kinds, [SHEET, large], start), Clock(steps=20), 1, quiet)
    assert best.containers == 2
    assert best.length_mm == pytest.approx(40.0, abs=1e-3)
    assert [p.container for p in best.places] == [1, 0, 0, 0]


def test_a_script_without_a_guard_may_use_several_processes(tmp_path):
    """Workers do not run the caller's script again: it says its word once, and gets its layout."""
    script = tmp_path / "script.py"
    script.write_text("""
import numpy as np
from flatprep.nest.clock import Clock
from flatprep.nest.search import search, strip_task
from flatprep.nest.shapes import Shape
print("begun", flush=True)
wedge = np.array([[0.0, 0.0], [20.0, 0.0], [0.0, 20.0]])
task = strip_task([Shape(wedge, turns_deg=(0.0, 180.0), count=6)], 20.0, None)
print(len(search(task, Clock(steps=2), 1, lambda best: None, jobs=2).places))
""")
    run = subprocess.run([sys.executable, script], capture_output=True, text=True, timeout=240, check=False)
    assert (run.stdout.split(), run.stderr, run.returncode) == (["begun", "6"], "", 0)
