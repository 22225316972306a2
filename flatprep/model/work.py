"""Bench steps: what is done to a part after it is cut."""

from dataclasses import dataclass
from enum import StrEnum


class StepKind(StrEnum):
    """The kinds of bench step."""

    DEBURR = "deburr"
    FLATNESS = "flatness"
    CENTRE_MARK = "centre-mark"
    DRILL = "drill"
    REAM = "ream"
    BORE = "bore"
    COUNTERSINK = "countersink"
    COUNTERBORE = "counterbore"
    TAP = "tap"
    THREAD_INSERT = "thread-insert"
    BEND = "bend"
    PRESS = "press"
    INSPECT = "inspect"


@dataclass(frozen=True, slots=True)
class Step:
    """One bench step at one or several places.

    Attributes
    ----------
    size : str
        As the trade writes it: ``M5``, ``6 H7``.
    tool_dia_mm : float or None
        Drill, reamer or countersink diameter; for a tap its drill.
    cut_dia_mm : float or None
        What should be cut beforehand; None where the process cannot cut it: mark the centre, drill solid.
    at : tuple of (float, float)
        Places in the drawing, mm.
    """

    order: int
    kind: StepKind
    size: str = ""
    tool_dia_mm: float | None = None
    depth_mm: float | None = None
    count: int = 1
    at: tuple[tuple[float, float], ...] = ()
    cut_dia_mm: float | None = None
    side: str | None = None
    note: str = ""
    caution: str = ""


@dataclass(frozen=True, slots=True)
class PartSteps:
    """The bench work of one part."""

    name: str
    quantity: int
    steps: tuple[Step, ...]


@dataclass(frozen=True, slots=True)
class Checklist:
    """The bench work of a job."""

    parts: tuple[PartSteps, ...]
    cautions: tuple[str, ...]
