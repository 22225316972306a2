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
    tool : str
        As it is taken from the drawer: ``drill 4.2 mm``, ``tap M5``; empty where none is needed.
    why : str
        Why it stands where it stands in the order.
    limits_mm : (float, float) or None
        What the finished size (a tap's minor diameter) must lie within.
    problem : str
        Why it cannot be done as drawn; empty where it can.
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
    tool: str = ""
    why: str = ""
    limits_mm: tuple[float, float] | None = None
    problem: str = ""


@dataclass(frozen=True, slots=True)
class PartSteps:
    """The bench work of one part.

    Attributes
    ----------
    quantity : int
        Pieces of all sets as drawn.
    quantity_opposite : int
        Pieces turned over: their side A is the drawing's side B.
    questions : tuple of str
        What the drawing seems to mean and nobody said: asked, not taken as a fact.
    flip : str
        Why the part must not be turned over to save material; empty where it may.
    """

    name: str
    quantity: int
    steps: tuple[Step, ...]
    quantity_opposite: int = 0
    questions: tuple[str, ...] = ()
    flip: str = ""


@dataclass(frozen=True, slots=True)
class Tool:
    """A tool of the kit list: how often it is used in the whole job, and on which parts."""

    name: str
    uses: int
    parts: tuple[str, ...]


class Outcome(StrEnum):
    """How a check came out; ``open``: it cannot be told from what is given."""

    GOOD = "good"
    BAD = "bad"
    OPEN = "open"


@dataclass(frozen=True, slots=True)
class JointCheck:
    """One thing that was checked of a joint: how it came out, with the figures it rests on."""

    what: str
    outcome: Outcome
    text: str


@dataclass(frozen=True, slots=True)
class JointReport:
    """A joint worked out.

    Attributes
    ----------
    name, fastener : str
    count : int
        Joints of this kind in one set.
    grip_mm : float
        What the fastener passes through before its thread takes hold.
    buy : str
        The fastener to buy, with its length; empty where none fits.
    checks : tuple of JointCheck
    """

    name: str
    fastener: str
    count: int
    grip_mm: float
    buy: str
    checks: tuple[JointCheck, ...]

    @property
    def closes(self) -> bool:
        """Whether nothing that was checked is wrong."""
        return all(check.outcome is not Outcome.BAD for check in self.checks)


@dataclass(frozen=True, slots=True)
class Checklist:
    """The bench work of a job.

    Attributes
    ----------
    tools : tuple of Tool
        The kit list.
    joints : tuple of JointReport
        The joints of the job, worked out.
    """

    parts: tuple[PartSteps, ...]
    cautions: tuple[str, ...]
    tools: tuple[Tool, ...] = ()
    joints: tuple[JointReport, ...] = ()
