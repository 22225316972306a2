"""self-crossing: outlines that cross themselves or each other."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule, told


def check(ctx: Context) -> Iterator[Finding]:
    """Pass on every crossing."""
    return told(RULE.id, RULE.severity, ctx.faults(RULE.id))


RULE = Rule(
    id="self-crossing",
    severity=Severity.ERROR,
    summary="An outline crosses itself or another outline.",
    why="A figure of eight has no inside: nobody can say which side is the part.",
    remedy="Trim the lines where they cross, so that every outline closes without a crossing.",
    check=check,
)
