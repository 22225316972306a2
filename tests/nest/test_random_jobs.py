"""Random jobs: no fault by the verifier nor by a second, simpler check, and every piece accounted for."""

from collections import Counter

from hypothesis import given, settings
from hypothesis import strategies as st
from shapely import STRtree
from shapely.geometry import Polygon

from flatprep.geom.bulge import points_along
from flatprep.nest.problem import Budget
from flatprep.nest.solve import nest
from flatprep.nest.verify import verify
from tests.nest.random_jobs import random_ask

TOLERANCE_MM = 0.02


def bodies(sheet, items):
    parts = {i.name: i.part for i in items}
    rings = [
        [p.motion.points(points_along(c.xyb, closed=True, chord_mm=0.002)) for c in parts[p.part].contours]
        for p in sheet.placements
    ]
    return [Polygon(r[0], r[1:]) for r in rings]


def second_opinion(layout, question):
    """Overlaps, gaps and margins, measured on plain polygons with shapely alone."""
    for sheet in layout.sheets:
        stock = Polygon(sheet.outline, sheet.holes)
        found = bodies(sheet, question.items)
        for one in found:
            assert one.difference(stock).buffer(-TOLERANCE_MM / 2).is_empty
            assert stock.boundary.distance(one) >= question.margin_mm - TOLERANCE_MM
        for i, j in STRtree(found).query(found, predicate="dwithin", distance=question.spacing_mm).T:
            if i < j:
                assert found[i].distance(found[j]) >= question.spacing_mm - TOLERANCE_MM
                assert found[i].intersection(found[j]).buffer(-TOLERANCE_MM / 2).is_empty


def check(seed, budget):
    question = random_ask(seed)
    layout = nest(question, budget)
    assert verify(layout, question) == ()
    second_opinion(layout, question)
    placed = Counter(p.part for s in layout.sheets for p in s.placements)
    unplaced = Counter({u.part: u.count for u in layout.unplaced})
    for item in question.items:
        assert placed[item.name] + unplaced[item.name] == item.quantity + item.quantity_opposite
    assert all(u.why for u in layout.unplaced)


@settings(max_examples=15)
@given(st.integers(0, 1_000_000))
def test_random_job(seed):
    check(seed, Budget(steps=2, seed=1))
