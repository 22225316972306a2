"""Quantity breaks: a nest for each number of sets, full sheets as many as needed, remnants as many as there are."""

from dataclasses import dataclass
from decimal import Decimal

import pytest

from flatprep.api import breaks as module
from flatprep.api.pieces import read_job
from flatprep.job.load import load_job
from flatprep.nest.problem import Budget
from tests.cli.test_money import JOB, draw
from tests.cost.shapes import layout, sheet

REST = """
[[stock]]
name = "rest"
material = "al-5052-h32"
thickness = 3
outline = [[0, 0], [300, 0], [0, 300]]
count = 2
"""


@dataclass(frozen=True)
class Nest:
    """What the stand-in for the search answers."""

    read: object
    layout: object


@pytest.fixture
def read(tmp_path):
    draw(tmp_path / "leaf.dxf", 200)
    draw(tmp_path / "plate.dxf", 100)
    (tmp_path / "job.toml").write_text(JOB.replace("breaks = [1, 3]", "breaks = [4, 1, 2]") + REST)
    return read_job(load_job(tmp_path / "job.toml"))


def test_one_nest_for_each_number_of_sets(read, monkeypatch):
    asked = []

    def two_sets_a_sheet(job, budget, progress=None):
        asked.append((job.job.sets, [s.count for s in job.job.stock], budget.seconds))
        full = [sheet(job.job.stock[0], *["leaf", "plate"] * 2) for _ in range(job.job.sets // 2)]
        rest = [sheet(job.job.stock[0], "leaf", "plate")] if job.job.sets % 2 else []
        return Nest(job, layout(*full, *rest))

    monkeypatch.setattr(module, "nest_job", two_sets_a_sheet)
    one, two, four = module.break_table(read, Budget(seconds=9.0))
    # as many full sheets as needed, remnants as many as there are; each nest has a third of the time
    assert asked == [(n, [None, 2], 3.0) for n in (1, 2, 4)]
    assert [(b.sets, b.sheets, b.unplaced) for b in (one, two, four)] == [(1, 1, 0), (2, 1, 0), (4, 2, 0)]
    assert [b.material_cost for b in (one, two, four)] == [Decimal("40.50"), Decimal("40.50"), Decimal("81.00")]
    assert [b.cost_per_set for b in (one, two, four)] == pytest.approx([40.5, 20.25, 20.25])


def test_pieces_without_a_place_leave_the_cost_open(read, monkeypatch):
    def only_one(job, budget, progress=None):
        return Nest(job, layout(sheet(job.job.stock[0], "leaf", "plate")))

    monkeypatch.setattr(module, "nest_job", only_one)
    one, two, four = module.break_table(read, Budget())
    assert (one.unplaced, one.cost_per_set) == (0, pytest.approx(40.5))
    assert (two.unplaced, two.cost_per_set, two.material_cost) == (2, None, None)
    assert four.unplaced == 6
