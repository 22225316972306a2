"""not-measured: parts too fine to measure webs and slots on."""

from collections.abc import Iterator

from flatprep.measure.facing import TooFineError
from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule, reach_mm


def check(ctx: Context) -> Iterator[Finding]:
    """Tell where the measuring of widths was given up."""
    web, slot = reach_mm(ctx.limit("web"), ctx.limit("edge")), reach_mm(ctx.limit("slot"))
    for part in ctx.parts:
        try:
            if web > 0.0:
                part.webs(web)
            if slot > 0.0:
                part.slots(slot)
        except TooFineError:
            yield Finding(
                rule=RULE.id,
                severity=RULE.severity,
                message="too many edges lie too near each other: webs and slots were not measured",
                part=part.name,
            )


RULE = Rule(
    id="not-measured",
    severity=Severity.WARNING,
    summary="Webs and slots could not be measured.",
    why="No machine follows millions of edges near each other, and a check that is left out is said.",
    remedy="Export curves as arcs, or coarser, and take engraving off the layers that are cut.",
    check=check,
)
