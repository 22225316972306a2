"""Sheets that are kept, fillers, margins a side, boxes to keep out of."""

from collections import Counter
from dataclasses import replace

import numpy as np
import pytest
from shapely.geometry import Point, Polygon

from flatprep.model.layout import Placement
from flatprep.nest.keep import KeepError
from flatprep.nest.problem import Budget, KeptSheet
from flatprep.nest.solve import nest
from flatprep.nest.verify import verify
from tests.nest.parts import ask, disc, hook, item, rectangle, sheet

FEW = Budget(steps=3)


def solved(question):
    layout = nest(question, FEW)
    assert verify(layout, question) == ()
    return layout


def bounds(layout, question):
    parts = {i.name: i.part for i in question.items}
    found = []
    for one in layout.sheets:
        for p in one.placements:
            found.append((p.part, p.motion.points(parts[p.part].outer.xyb[:, :2])))
    return found


def test_kept_placements_stay_and_the_rest_is_laid_around_them():
    plate = item(rectangle("plate", 100.0, 80.0), 3)
    question = ask([plate], [sheet(count=2)], 3.0, 5.0)
    kept = Placement("plate", 1, 0.0, False, 100.0, 60.0)
    layout = solved(replace(question, keep=(KeptSheet("sheet", (kept,)),)))
    first = layout.sheets[0].placements[0]
    assert (first.dx, first.dy, first.turn_deg) == (100.0, 60.0, 0.0)
    assert sum(len(s.placements) for s in layout.sheets) == 3


def test_kept_sheet_that_is_full_stays_though_nothing_more_fits():
    question = ask([item(rectangle("plate", 290.0, 190.0), 2)], [sheet(count=2)], 3.0, 5.0)
    keep = (KeptSheet("sheet", (Placement("plate", 1, 0.0, False, 5.0, 5.0),)),)
    layout = solved(replace(question, keep=keep))
    assert [len(s.placements) for s in layout.sheets] == [1, 1]
    only_kept = ask([item(rectangle("plate", 290.0, 190.0), 1)], [sheet(count=1)], 3.0, 5.0, keep=keep)
    assert [len(s.placements) for s in solved(only_kept).sheets] == [1]


def test_kept_sheet_counts_as_used():
    question = ask([item(rectangle("plate", 290.0, 190.0), 2)], [sheet(count=1)], 3.0, 5.0)
    layout = solved(replace(question, keep=(KeptSheet("sheet", (Placement("plate", 1, 0.0, False, 5.0, 5.0),)),)))
    assert [u.count for u in layout.unplaced] == [1]


@pytest.mark.parametrize(
    ("kept", "words"),
    [
        pytest.param([("sheet", "nobody", 5.0, False)], "part 'nobody'", id="strange-part"),
        pytest.param([("none", "plate", 5.0, False)], "stock 'none'", id="strange-stock"),
        pytest.param([("sheet", "plate", 5.0, False)] * 3, "more sheets", id="more-sheets"),
        pytest.param([("sheet", "plate", 5.0, True)], "fewer in that hand", id="other-hand"),
        pytest.param([("sheet", "plate", 1.0, False)], "not sound.*border", id="too-near-the-border"),
    ],
)
def test_kept_sheets_that_do_not_go_with_the_job(kept, words):
    question = ask([item(hook("plate"), 5)], [sheet(count=2)], 3.0, 5.0)
    keep = tuple(KeptSheet(s, (Placement(p, 1, 0.0, m, x, 50.0),)) for s, p, x, m in kept)
    with pytest.raises(KeepError, match=words):
        nest(replace(question, keep=keep), FEW)


def test_fillers_take_free_room_only():
    """Four plates leave a strip of 40 mm beside them; discs of 30 mm go there, the large ones nowhere."""
    plate = item(rectangle("plate", 100.0, 100.0), 1, turns_deg=(0.0,))
    frame = item(rectangle("tall", 150.0, 190.0), 1, turns_deg=(0.0,))
    small = item(disc("small", 15.0), 4, filler=True)
    large = item(disc("large", 60.0), 2, filler=True)
    question = ask([plate, frame, small, large], [sheet(count=None)], 2.0, 5.0)
    without = solved(ask([plate, frame], [sheet(count=None)], 2.0, 5.0))
    layout = solved(question)
    assert len(layout.sheets) == len(without.sheets) == 1
    assert layout.sheets[0].used_length_mm == pytest.approx(without.sheets[0].used_length_mm)
    assert Counter(p.part for p in layout.sheets[0].placements) == {"plate": 1, "tall": 1, "small": 4}
    assert {u.part: u.count for u in layout.unplaced} == {"large": 2}
    assert all("filler" in u.why for u in layout.unplaced)


def test_filler_alone_costs_no_sheet():
    layout = solved(ask([item(disc("small", 15.0), 4, filler=True)], [sheet()], 2.0, 5.0))
    assert layout.sheets == ()
    assert layout.unplaced[0].count == 4


def test_margins_may_differ_a_side():
    question = ask([item(rectangle("r", 60.0, 40.0), 12)], [sheet(margins_mm=(20.0, 0.0, 5.0, 30.0))], 2.0, 8.0)
    layout = solved(question)
    points = np.vstack([xy for _, xy in bounds(layout, question)])
    assert points[:, 0].min() == pytest.approx(20.0)
    assert points[:, 0].max() <= 300.0 + 1e-6
    assert points[:, 1].min() == pytest.approx(5.0)
    assert points[:, 1].max() <= 170.0 + 1e-6


def test_nothing_lies_where_a_clamp_sits():
    clamps = ((0.0, 80.0, 40.0, 120.0), (140.0, 0.0, 160.0, 30.0))
    question = ask([item(rectangle("r", 60.0, 40.0), 14)], [sheet(keep_out=clamps)], 2.0, 2.0)
    layout = solved(question)
    assert layout.sheets
    for _, xy in bounds(layout, question):
        low, high = xy.min(axis=0), xy.max(axis=0)
        for x0, y0, x1, y1 in clamps:
            assert high[0] <= x0 + 1e-6 or low[0] >= x1 - 1e-6 or high[1] <= y0 + 1e-6 or low[1] >= y1 - 1e-6


def test_nothing_lies_on_a_screw():
    """Two screws in the sheet, circles of 12 and 20 mm; distance of the rectangles' material from their middles."""
    screws = ((100.0, 100.0, 12.0), (220.0, 60.0, 20.0))
    question = ask([item(rectangle("r", 60.0, 40.0), 12)], [sheet(keep_out=screws)], 2.0, 2.0)
    layout = solved(question)
    assert sum(len(s.placements) for s in layout.sheets) >= 8
    for _, xy in bounds(layout, question):
        for x, y, radius in screws:
            assert Polygon(xy).distance(Point(x, y)) >= radius - 1e-6


@pytest.mark.parametrize(
    ("x", "wrong"), [(0.0, True), (39.99, True), (40.0, False), (40.0 + 1e-9, False), (90.0, False)]
)
def test_verifier_measures_from_a_screw(x, wrong):
    """A disc of 30 mm at (x, 0) and a screw's circle of 10 mm at (0, 0) touch at 40 mm."""
    plain = ask([item(disc("d", 30.0), 1)], [sheet(length=400.0, width=400.0)], 0.0, 0.0)
    layout = nest(plain, FEW)
    spot = layout.sheets[0].placements[0]
    screwed = replace(plain, stock=(sheet(length=400.0, width=400.0, keep_out=((spot.dx - x, spot.dy, 10.0),)),))
    assert [f.kind for f in verify(layout, screwed)] == (["keep-out"] if wrong else [])


def test_verifier_names_what_lies_under_a_clamp_or_too_near_one_side():
    plain = ask([item(rectangle("r", 60.0, 40.0))], [sheet()], 0.0, 0.0)
    layout = nest(plain, FEW)
    clamped = replace(plain, stock=(sheet(keep_out=((0.0, 0.0, 10.0, 10.0),)),))
    assert [f.kind for f in verify(layout, clamped)] == ["keep-out"]
    sided = replace(plain, stock=(sheet(margins_mm=(1.0, 0.0, 0.0, 0.0)),))
    assert [f.kind for f in verify(layout, sided)] == ["margin"]
