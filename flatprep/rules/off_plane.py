"""off-plane: lines that do not lie in one plane."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule, told


def check(ctx: Context) -> Iterator[Finding]:
    """Warn where lines lie at several heights; note where all lie at one that is not zero."""
    for fault in ctx.faults(RULE.id):
        one_height = fault.measured_mm == 0.0
        yield from told(RULE.id, Severity.NOTE if one_height else Severity.WARNING, [fault])


RULE = Rule(
    id="off-plane",
    severity=Severity.WARNING,
    summary="Lines lie at different heights.",
    why="A flat part has one plane; lines of a solid seen from above may be edges that are not cut at all.",
    remedy="Export one face of the part, at z = 0.",
    check=check,
)
