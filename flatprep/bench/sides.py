"""Sides: which work binds a part to its side A, and what that means for turned-over pieces."""

from collections.abc import Iterable

from flatprep.bench.ops import Op
from flatprep.bench.part import BenchPart
from flatprep.bench.questions import SIDED
from flatprep.job.values import BendAsk, Work

_ON_OPPOSITE = "on turned-over pieces"
_OTHER = {"A": "B", "B": "A"}


def side_bound(work: Iterable[Work], bends: Iterable[BendAsk] = (), good_face: str | None = None) -> str:
    """Return why a part must not be turned over to save material; empty where both sides are alike.

    A handed part's opposite pieces are turned over on purpose: they get their own side.
    """
    for one in work:
        if one.side is not None or one.kind in SIDED:
            return f"{one.kind} {one.size} is done from one side"
    if any(bend.direction for bend in bends):
        return "it is bent to one side"
    return f"face {good_face} is the good one" if good_face else ""


def opposite_note(op: Op, bench: BenchPart) -> Op:
    """Return the operation with the side that it is done from on turned-over pieces."""
    if op.side is None or not bench.quantity_opposite:
        return op
    return op.with_note(f"{_ON_OPPOSITE} ({bench.quantity_opposite}) from side {_OTHER[op.side]} as drawn")


def is_opposite_note(sentence: str) -> bool:
    """Tell whether a sentence is that of `opposite_note`."""
    return sentence.startswith(_ON_OPPOSITE)
