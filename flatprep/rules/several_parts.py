"""several-parts: drawings that hold more than one part."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Note how many parts there are."""
    count = len(ctx.drawing.parts)
    if count > 1:
        names = f"{ctx.drawing.parts[0].name} to {ctx.drawing.parts[-1].name}"
        yield Finding(rule=RULE.id, severity=RULE.severity, message=f"the drawing holds {count} parts: {names}")


RULE = Rule(
    id="several-parts",
    severity=Severity.NOTE,
    summary="The drawing holds more than one part.",
    why="Quantities, mass and cost count pieces: it should be known that there are several.",
    remedy="Nothing to do if that is meant; else delete what is no part.",
    check=check,
)
