"""The rules in words and as a JSON document, with the limits in force and where they are from."""

from dataclasses import dataclass

from flatprep.model.finding import Severity
from flatprep.report.figures import length, sentence

SCHEMA = "flatprep-rules/1"


@dataclass(frozen=True, slots=True)
class LimitInForce:
    """A least size, mm: below `error_mm` an error, below `warn_mm` a warning; None: no such level."""

    feature: str
    error_mm: float
    warn_mm: float | None
    source: str


@dataclass(frozen=True, slots=True)
class RuleInForce:
    """A rule in words, with its limits as far as they are known."""

    id: str
    severity: Severity
    summary: str
    why: str
    remedy: str
    limits: tuple[LimitInForce, ...]


@dataclass(frozen=True, slots=True)
class RulesInForce:
    """All rules, and what their limits hold for; None: not said."""

    process: str | None
    material: str | None
    thickness_mm: float | None
    rules: tuple[RuleInForce, ...]


def rules_text(shown: RulesInForce, units: str = "mm") -> str:
    """Return one block a rule."""
    return "\n\n".join([_held(shown, units), *(_block(rule, units) for rule in shown.rules)])


def rules_document(shown: RulesInForce) -> dict[str, object]:
    """Return the document ``flatprep-rules/1``; lengths in mm, unrounded."""
    return {
        "schema": SCHEMA,
        "process": shown.process,
        "material": shown.material,
        "thickness_mm": shown.thickness_mm,
        "rules": [_plain(rule) for rule in shown.rules],
    }


def _held(shown: RulesInForce, units: str) -> str:
    if shown.process is None:
        return "limits are not shown: name a process with --process (and --material, --thickness)"
    thickness = length(shown.thickness_mm, units) if shown.thickness_mm is not None else "any thickness"
    return f"limits of {shown.process} in {shown.material or 'any material'}, {thickness}"


def _block(rule: RuleInForce, units: str) -> str:
    lines = [
        f"{rule.id} ({rule.severity} at the loudest)",
        f"  {sentence(rule.summary)}",
        f"  why: {rule.why}",
        f"  do: {rule.remedy}",
        *(f"  {_limit(limit, units)}" for limit in rule.limits),
    ]
    return "\n".join(lines)


def _limit(limit: LimitInForce, units: str) -> str:
    levels = [f"error below {length(limit.error_mm, units)}"] if limit.error_mm > 0 else []
    levels += [f"warning below {length(limit.warn_mm, units)}"] if limit.warn_mm is not None else []
    return f"{limit.feature.replace('_', ' ')}: {', '.join(levels) or 'no limit'} ({limit.source or 'no source'})"


def _plain(rule: RuleInForce) -> dict[str, object]:
    return {
        "id": rule.id,
        "severity": str(rule.severity),
        "summary": rule.summary,
        "why": rule.why,
        "remedy": rule.remedy,
        "limits": [
            {"feature": one.feature, "error_mm": one.error_mm, "warn_mm": one.warn_mm, "source": one.source}
            for one in rule.limits
        ],
    }
