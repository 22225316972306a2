"""A small job as values: what the report's tests look at."""

import subprocess
import sys
from collections.abc import Callable
from decimal import Decimal
from pathlib import Path

import numpy as np
import pytest

from flatprep.geom import bulge
from flatprep.model.drawing import Contour, Curve, Part
from flatprep.model.estimate import Estimate, PartEstimate, StockUse
from flatprep.model.finding import Finding, Severity
from flatprep.model.layout import Layout, Placement, SheetLayout, Unplaced
from flatprep.model.work import Checklist, JointCheck, JointReport, Outcome, PartSteps, Step, StepKind, Tool
from flatprep.report.bundle import Bundle, Offcut, PartCard, SearchPoint
from tests.hostile import hostile_job


def rectangle(width: float, height: float) -> Contour:
    return Contour(np.array([[0.0, 0, 0], [width, 0, 0], [width, height, 0], [0, height, 0]]))


def hole(x: float, y: float, diameter: float) -> Contour:
    return Contour(bulge.reverse(bulge.circle(x, y, diameter / 2), closed=True))


def plate(name: str) -> Part:
    """120 x 60 mm with holes of 5 and 11.5 mm, a bend line and an engraved line."""
    bend = Curve(np.array([[90.0, 0, 0], [90.0, 60, 0]]), closed=False, layer="BEND")
    mark = Curve(np.array([[10.0, 50, 0], [30.0, 50, 0]]), closed=False, layer="ENGRAVE")
    return Part(name, rectangle(120, 60), (hole(20, 20, 5), hole(60, 30, 11.5)), marks=(mark,), bends=(bend,))


FINDINGS = (
    Finding(
        "small-hole", Severity.ERROR, "the round hole is small", "leaf", (20.0, 20.0), 5.0, 6.0, "mm", "enlarge it"
    ),
    Finding("unclear-hole", Severity.NOTE, "neither thread nor clearance", "leaf", (60.0, 30.0), 11.5, None, "mm"),
    Finding("unknown-units", Severity.WARNING, "no header says the unit"),
)
STEPS = (
    Step(1, StepKind.DEBURR, note="both faces"),
    Step(2, StepKind.DRILL, "M6", 6.6, count=1, at=((20.0, 20.0),), caution="wear eye protection"),
    Step(3, StepKind.DRILL, "", 11.8, count=1, at=((60.0, 30.0),), cut_dia_mm=11.5),
    Step(
        4,
        StepKind.REAM,
        "12 H7",
        12.0,
        count=1,
        at=((60.0, 30.0),),
        side="A",
        tool="reamer 12 H7",
        why="straight after drilling",
    ),
)


JOINT = JointReport(
    "pivot", "M8 ISO 4017", 1, 16.0, "M8 x 30", (JointCheck("clearance", Outcome.GOOD, "hole 9 mm for M8"),)
)


@pytest.fixture
def card() -> PartCard:
    estimate = PartEstimate("leaf", 6, 7000.0, 0.22, 412.0, 3, 2.5, Decimal("15.00"), None)
    return PartCard(
        "leaf", plate("leaf"), "drawings/leaf.dxf", "0123456789", "mild-steel", "Mild steel", 4.0, "fibre-laser", 4, 2,
        "B", "grind the wings", FINDINGS, STEPS, estimate, ("units taken as mm",),
    )  # fmt: skip


@pytest.fixture
def bundle(card: PartCard) -> Bundle:
    """Two parts, one of them without work, on one sheet."""
    tray = PartCard("seed tray", plate("seed tray"), material="birch-ply", thickness_mm=6.0, quantity=1)
    border = np.array([[0.0, 0], [600, 0], [600, 300], [0, 300]])
    placements = (
        Placement("leaf", 1, 0.0, False, 10.0, 10.0),
        Placement("leaf", 2, 90.0, True, 250.0, 20.0),
        Placement("seed tray", 1, 33.0, False, 400.0, 30.0),
    )
    sheet = SheetLayout("steel-4", "mild-steel", 4.0, border, (), 520.0, 0.12, placements)
    estimate = Estimate(
        "EUR", (card.estimate,) if card.estimate else (), (StockUse("steel-4", 1, Decimal("81.50")),), 9.5, 10.0,
        Decimal("81.50"), 0.12, ("no feeds known for birch-ply",),
    )  # fmt: skip
    return Bundle(
        "wheel hoe", "B", "mm", 2, (card, tray), Layout(4.0, 8.0, (sheet,), (Unplaced("leaf", 1, "too large"),)),
        estimate, Checklist(
            (PartSteps("leaf", 4, STEPS, 2, ("is the hole of 5 mm for M5?",), "one face is countersunk"),),
            ("Clamp the part.",),
            (Tool("reamer 12 H7", 6, ("leaf",)),),
            (JOINT,),
        ), (("bad.dxf", "no entity"),), (("sheet-01.dxf", "sheet 1"),),
        ("spacing 4 mm",), ("Local rules come first.",),
        (SearchPoint(0.5, 2, 600.0), SearchPoint(3.0, 1, 520.0)),
        (Offcut(1, 520.0, 8.0, 592.0, 292.0),), "0.1.0",
    )  # fmt: skip


@pytest.fixture
def many(card: PartCard) -> Callable[[int], Bundle]:
    """Make a bundle of so many parts, each placed once."""

    def build(count: int) -> Bundle:
        names = [f"leaf-{i}" for i in range(count)]
        cards = tuple(PartCard(n, plate(n), n + ".dxf", "0", quantity=1, findings=FINDINGS, steps=STEPS) for n in names)
        border = np.array([[0.0, 0], [1300, 0], [1300, 7 * count + 70.0], [0, 7 * count + 70]])
        placed = tuple(Placement(n, 1, 0.0, False, 125.0 * (i % 10), 65.0 * (i // 10)) for i, n in enumerate(names))
        sheet = SheetLayout("steel-4", "mild-steel", 4.0, border, (), 1300.0, 0.9, placed)
        return Bundle("many", cards=cards, layout=Layout(4.0, 8.0, (sheet,)))

    return build


@pytest.fixture(scope="session")
def hostile(tmp_path_factory) -> Path:
    """The folder that `prepare` wrote, beside the job's; what it printed stands in `said`."""
    root = tmp_path_factory.mktemp("hostile")
    job = hostile_job(root / "in")
    before = set(root.rglob("*"))
    words = [sys.executable, "-m", "flatprep", "prepare", str(job), "--out", str(root / "out"), "--steps", "1"]
    run = subprocess.run(words, capture_output=True, check=False, cwd=root)
    assert run.returncode == 1, run.stderr
    (root / "said").write_bytes(run.stdout + run.stderr)
    after = {path for path in root.rglob("*") if not path.is_relative_to(root / "out")}
    assert after - before == {root / "said"}
    return root / "out"
