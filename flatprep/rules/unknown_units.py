"""unknown-units: drawings that do not say which unit they are in."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule, told


def check(ctx: Context) -> Iterator[Finding]:
    """Pass on what the reader found in the header."""
    return told(RULE.id, RULE.severity, ctx.faults(RULE.id))


RULE = Rule(
    id="unknown-units",
    severity=Severity.WARNING,
    summary="Nothing says which unit the drawing is in.",
    why="Taken in the wrong unit the part comes out 25.4 times too large or too small.",
    remedy="Set the unit in the drawing's header, or give --units.",
    check=check,
)
