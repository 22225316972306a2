"""duplicate-line: lines that lie on top of each other."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule, told


def check(ctx: Context) -> Iterator[Finding]:
    """Pass on every double line."""
    return told(RULE.id, RULE.severity, ctx.faults(RULE.id))


RULE = Rule(
    id="duplicate-line",
    severity=Severity.ERROR,
    summary="A line is drawn twice.",
    why="It is cut twice: the second pass burns the edge and widens the kerf.",
    remedy="Delete one of the two lines, or let repair do it.",
    check=check,
)
