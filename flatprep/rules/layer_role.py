"""layer-role: layers that are not cut because of a guess."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule, told


def check(ctx: Context) -> Iterator[Finding]:
    """Note every guess, so that it can be overruled."""
    return told(RULE.id, RULE.severity, ctx.faults(RULE.id))


RULE = Rule(
    id="layer-role",
    severity=Severity.NOTE,
    summary="Lines are not cut because of what their layer looks like.",
    why="A guess that is wrong loses an outline, so it is said.",
    remedy="Overrule it with --layer NAME=cut (or mark, bend, ignore), or in the job file.",
    check=check,
)
