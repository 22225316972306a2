"""doubtful-units: drawings whose sizes are not those of flat parts in the unit they were read in."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule, told


def check(ctx: Context) -> Iterator[Finding]:
    """Pass on what the sizes of parts and holes gave away."""
    return told(RULE.id, RULE.severity, ctx.faults(RULE.id))


RULE = Rule(
    id="doubtful-units",
    severity=Severity.WARNING,
    summary="In this unit the drawing's sizes are not those of flat parts.",
    why="A header may name another unit than it was drawn in: the part comes out many times too large or too small.",
    remedy="Compare one size with the part, and give --units where the header is wrong.",
    check=check,
)
