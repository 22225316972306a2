"""One operation on some holes of a part, before it is numbered: what, with which tool, after what."""

from dataclasses import dataclass, replace
from enum import IntEnum
from pathlib import Path

from flatprep.bench.part import BenchPart
from flatprep.job.values import Pilots, Point, Work
from flatprep.model.work import StepKind
from flatprep.practice.bits import Bit
from flatprep.practice.targets import Target

CLOSE_MM = 0.05
"""A hole this near to what a drill would leave needs no drill."""


class Rank(IntEnum):
    """Where in the order of work an operation stands, with the reason for it."""

    DEBURR = 100
    CHECK_CUT = 150
    FLATNESS = 200
    CENTRE_MARK = 300
    DRILL = 400
    BORE = 500
    REAM = 550
    COUNTERSINK = 600
    COUNTERBORE = 620
    TAP = 700
    INSERT = 750
    HOLE_EDGES = 800
    BEND = 900
    PRESS = 1000
    INSPECT = 1100


WHY = {
    Rank.DEBURR: "safe handling; a burr tilts the part in vice and brake, an edge nick starts a crack in a bend",
    Rank.FLATNESS: "holes finished in a bowed plate are not square once it is flattened",
    Rank.CENTRE_MARK: "the drill starts where the cut mark is, while the part is flat",
    Rank.DRILL: "before bending, while the part lies flat; takes the cut skin away",
    Rank.BORE: "while the part is flat and clamps square",
    Rank.REAM: "straight after drilling, and before countersinking so that the reamer starts on a full edge",
    Rank.COUNTERSINK: "needs the finished hole as pilot; before the tap, so that the tap raises no burr into the seat",
    Rank.COUNTERBORE: "needs the finished hole as pilot",
    Rank.TAP: "after the sink; before bending, while every hole can be reached",
    Rank.INSERT: "into its finished thread",
    Rank.HOLE_EDGES: "drills and taps raise a burr on the far side, which tilts the part at the brake",
    Rank.BEND: "after all work that needs the part flat",
    Rank.PRESS: "after bending, where nothing fouls the die",
    Rank.CHECK_CUT: "a wrong hole costs least before anything is done to it",
    Rank.INSPECT: "last, on the finished part",
}


@dataclass(frozen=True, slots=True)
class Op:
    """An operation at one or several places.

    Attributes
    ----------
    rank : int
        Order among the part's operations.
    limits_mm : (float, float) or None
        What the finished size must lie within.
    problem : str
        Why it cannot be done as drawn; empty where it can.
    """

    kind: StepKind
    rank: int
    at: tuple[Point, ...] = ()
    size: str = ""
    tool_dia_mm: float | None = None
    tool: str = ""
    depth_mm: float | None = None
    cut_dia_mm: float | None = None
    side: str | None = None
    note: str = ""
    why: str = ""
    limits_mm: tuple[float, float] | None = None
    problem: str = ""
    count: int | None = None

    def with_note(self, text: str) -> "Op":
        """Return the operation with a further sentence in its note."""
        return replace(self, note="; ".join(t for t in (self.note, text) if t))


def spoilt(op: Op, why: str) -> Op:
    """Return the operation marked as not possible as drawn: it stays in the list, so that nobody overlooks it."""
    return replace(op, problem=why, note="; ".join(t for t in (f"NOT POSSIBLE AS DRAWN: {why}", op.note) if t))


def late(op: Op) -> Op:
    """Return the operation moved behind the bends, in the same order among its like."""
    return replace(op, rank=Rank.BEND + op.rank // 10, why="near a bend: it would be pulled out of shape")


@dataclass(frozen=True, slots=True)
class Ask:
    """A piece of work on holes of one drawn diameter, with what will have been cut there.

    Attributes
    ----------
    drawn_mm : float or None
        None where nothing is drawn: the place alone is given.
    """

    bench: BenchPart
    work: Work
    targets: tuple[Target, ...]
    drawn_mm: float | None

    @property
    def at(self) -> tuple[Point, ...]:
        """The places."""
        return tuple(t.at for t in self.targets)

    @property
    def own(self) -> tuple[Path, ...]:
        """Folders of the user's own profiles."""
        return self.bench.own

    def told_mm(self, advised_mm: float | None) -> float | None:
        """Return the diameter to cut beforehand that the step names: none where only the centre is marked."""
        return None if self.drawn_mm is None or self.bench.pilots is Pilots.MARK else advised_mm

    def as_cut_mm(self, advised_mm: float | None, *, opened: bool = True) -> float | None:
        """Return the hole that the cutter leaves: as drawn, as advised, or none at all.

        `opened` tells whether the work opens the hole up; one that keeps its size is cut as drawn in any case.
        """
        if self.drawn_mm is None or (opened and self.bench.pilots is Pilots.MARK):
            return None
        if opened and self.bench.pilots is Pilots.CUT:
            return advised_mm
        return self.drawn_mm if self.drawn_mm >= self.bench.least_hole_mm - 1e-3 else None


def open_up(ask: Ask, as_cut_mm: float | None, bit: Bit, cut_dia_mm: float | None, size: str = "") -> list[Op]:
    """Return what brings a hole to a drill's size: centre mark and drill, drill, or nothing.

    Parameters
    ----------
    as_cut_mm
        What the cutter leaves; None: nothing.
    size
        What the hole is for; the drill's own name where nothing is said.
    """
    if as_cut_mm is not None and as_cut_mm >= bit.diameter_mm - CLOSE_MM:
        return []
    cut_dia_mm = ask.told_mm(cut_dia_mm)
    drill = Op(
        StepKind.DRILL, Rank.DRILL, ask.at, size or bit.name, bit.diameter_mm, f"drill {bit.name}", ask.work.depth_mm,
        cut_dia_mm, note="in steps, smallest drill first",
    )  # fmt: skip
    if as_cut_mm is not None:
        return [replace(drill, note=f"opens the cut hole of {as_cut_mm:.4g} mm")]
    note = "no hole is cut here: centre mark, drill solid"
    mark = Op(StepKind.CENTRE_MARK, Rank.CENTRE_MARK, ask.at, drill.size, cut_dia_mm=cut_dia_mm, note=note)
    return [mark, drill]
