"""What a rule is: one value that holds its name, reason, remedy and check together."""

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass, replace
from functools import cached_property
from pathlib import Path

from flatprep.base.tolerances import DEFAULT, Tolerances
from flatprep.job.values import JobPart
from flatprep.measure.part import MeasuredPart, measured_parts
from flatprep.model.drawing import Drawing, Fault
from flatprep.model.finding import Finding, Severity
from flatprep.profile.material import Material
from flatprep.profile.process import Limit, Process

ROUNDING_MM = 1e-6
"""What is short by the whole allowance is short, whichever way rounding puts it."""


@dataclass(frozen=True, eq=False)
class Context:
    """Everything a rule may look at; what is None is not known, and a rule that needs it stays silent.

    Attributes
    ----------
    drawing : Drawing
    process, material, thickness_mm
        What the drawing will be cut by and from.
    job_part : JobPart or None
        The part of the job that names this drawing, with its bench work and bends.
    tol : Tolerances
    measured_thickness_mm : float or None
        What the sheet measures, where somebody measured it.
    """

    drawing: Drawing
    process: Process | None = None
    material: Material | None = None
    thickness_mm: float | None = None
    job_part: JobPart | None = None
    tol: Tolerances = DEFAULT
    measured_thickness_mm: float | None = None

    @cached_property
    def parts(self) -> tuple[MeasuredPart, ...]:
        """The drawing's parts with their measured features, each computed once."""
        return measured_parts(self.drawing.parts, self.tol)

    @property
    def own(self) -> tuple[Path, ...]:
        """Folders of the user's own profiles, where a job names them."""
        return self.job_part.own if self.job_part else ()

    @property
    def family(self) -> str | None:
        """The material's family."""
        return self.material.family if self.material else None

    def limit(self, feature: str) -> Limit | None:
        """Least size of `feature` (``hole``, ``web``, ``slot``, ``part`` ...) in force here, None where unknown."""
        return self.process.limit(feature, self.family, self.thickness_mm) if self.process else None

    def faults(self, kind: str) -> tuple[Fault, ...]:
        """Return what the reader noticed of a kind."""
        return tuple(f for f in self.drawing.faults if f.kind == kind)

    def slack_mm(self, *, chords: bool = False) -> float:
        """By how much a size may miss its limit: more where chords or rounded inches stand for a circle."""
        rounded = chords or self.drawing.units in ("in", "ft")
        return (self.tol.limit_chord_mm if rounded else self.tol.limit_mm) - ROUNDING_MM


@dataclass(frozen=True, slots=True)
class Rule:
    """A rule: what it is called, why it matters, what to do, and the check itself.

    Attributes
    ----------
    id : str
        Plain name, the same as in the output: ``small-hole``.
    severity : Severity
        How loud it is at the loudest.
    summary, why, remedy : str
        One sentence each, for people who never saw the rule.
    limits : tuple of str
        Names of the limits it compares with, as `Context.limit` takes them.
    check : callable
        Context -> findings; `run` fills in the remedy where a finding has none.
    """

    id: str
    severity: Severity
    summary: str
    why: str
    remedy: str
    check: Callable[[Context], Iterable[Finding]]
    limits: tuple[str, ...] = ()


def reach_mm(*limits: Limit | None) -> float:
    """Return the size above which none of these limits has a word to say, mm; 0 where none is known."""
    return max((max(limit.error, limit.warn or 0.0) for limit in limits if limit is not None), default=0.0)


def judge(measured: float, limit: Limit, slack_mm: float) -> tuple[Severity, float] | None:
    """Hold a least size against its limit.

    Parameters
    ----------
    measured
        mm.
    limit
        Error level and, where known, warning level.
    slack_mm
        A size this much below a level still keeps it (`Tolerances.limit_mm` or `limit_chord_mm`).

    Returns
    -------
    (Severity, float) or None
        How loud, and the level that is not kept; None where all is well.
    """
    if measured < limit.error - slack_mm:
        return Severity.ERROR, limit.error
    if limit.warn is not None and measured < limit.warn - slack_mm:
        return Severity.WARNING, limit.warn
    return None


def told(rule: str, severity: Severity, faults: Iterable[Fault], *, message: str = "") -> Iterator[Finding]:
    """Pass on what the reader noticed as findings of a rule."""
    for fault in faults:
        unit = None if fault.measured_mm is None else "mm"
        yield Finding(
            rule=rule,
            severity=severity,
            message=fault.detail or message,
            at=fault.at,
            measured=fault.measured_mm,
            unit=unit,
            handles=fault.handles,
        )


def findings(rules: Iterable[Rule], context: Context) -> Iterator[Finding]:
    """Ask every rule; a finding without a remedy gets its rule's."""
    for rule in rules:
        for finding in rule.check(context):
            yield finding if finding.remedy else replace(finding, remedy=rule.remedy)
