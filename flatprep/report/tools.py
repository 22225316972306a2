"""The tools that a job's bench work takes, each once, with how often it is used."""

from collections.abc import Sequence
from dataclasses import dataclass

from flatprep.model.work import StepKind
from flatprep.report.bundle import PartCard

_NO_TOOL = frozenset({StepKind.DEBURR, StepKind.FLATNESS, StepKind.BEND, StepKind.INSPECT})


@dataclass(frozen=True, slots=True)
class Tool:
    """A tool of one size.

    Attributes
    ----------
    operations : int
        Holes of all pieces of the job that it is used on.
    parts : tuple of str
        Where.
    """

    kind: StepKind
    size: str
    tool_dia_mm: float | None
    operations: int
    parts: tuple[str, ...]


def tool_list(cards: Sequence[PartCard]) -> tuple[Tool, ...]:
    """Tools in the order of the work (drills first), then by diameter."""
    uses: dict[tuple[StepKind, str, float | None], list[tuple[int, str]]] = {}
    for card in cards:
        pieces = card.quantity + card.quantity_opposite
        for step in card.steps:
            if step.kind not in _NO_TOOL:
                key = (step.kind, _size(step.kind, step.size), step.tool_dia_mm)
                uses.setdefault(key, []).append((step.count * pieces, card.name))
    order = list(StepKind)
    keys = sorted(uses, key=lambda key: (order.index(key[0]), key[2] or 0.0, key[1]))
    return tuple(
        Tool(kind, size, dia, sum(n for n, _ in uses[kind, size, dia]), _names(uses[kind, size, dia]))
        for kind, size, dia in keys
    )


def _size(kind: StepKind, size: str) -> str:
    """Return the size, which for a drill is its diameter: what the hole becomes later does not matter."""
    return "" if kind in (StepKind.DRILL, StepKind.CENTRE_MARK) else size


def _names(uses: Sequence[tuple[int, str]]) -> tuple[str, ...]:
    return tuple(dict.fromkeys(name for _, name in uses))
