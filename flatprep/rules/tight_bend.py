"""tight-bend: inside radii below what the material takes."""

from collections.abc import Iterator

from flatprep.measure.bends import BendLine, bend_lines
from flatprep.model.finding import Finding, Severity
from flatprep.profile.material import BendRule
from flatprep.rules.base import Context, Rule, judge


def check(ctx: Context) -> Iterator[Finding]:
    """Compare the inside radius of each bend with the material's own limit in this thickness."""
    rule = ctx.material.bend if ctx.material else None
    if rule is None or not ctx.thickness_mm:
        return
    asks = ctx.job_part.bends if ctx.job_part else ()
    for part in ctx.parts:
        for line in bend_lines(part.part, asks):
            if not rule.bendable:
                yield _unbendable(ctx, part.name, line, rule)
            elif line.radius_mm is not None:
                yield from _tight(ctx, part.name, line, rule)


def _unbendable(ctx: Context, part: str, line: BendLine, rule: BendRule) -> Finding:
    name = ctx.material.name if ctx.material else ""
    return Finding(
        rule=RULE.id,
        severity=RULE.severity if line.said else Severity.WARNING,
        message=f"{name} is not bent cold" + (f": {rule.note}" if rule.note else ""),
        part=part,
        at=line.middle,
        measured=line.radius_mm,
        unit=None if line.radius_mm is None else "mm",
    )


def _tight(ctx: Context, part: str, line: BendLine, rule: BendRule) -> Iterator[Finding]:
    limit = rule.limit(ctx.thickness_mm or 0.0)
    verdict = None if limit is None else judge(line.radius_mm or 0.0, limit, ctx.slack_mm())
    if verdict is not None:
        yield Finding(
            rule=RULE.id,
            severity=verdict[0],
            message="the inside radius is tight" + (f": {rule.note}" if rule.note else ""),
            part=part,
            at=line.middle,
            measured=line.radius_mm,
            limit=verdict[1],
            unit="mm",
        )


RULE = Rule(
    id="tight-bend",
    severity=Severity.ERROR,
    summary="The inside radius of a bend is smaller than the material takes.",
    why="The outside of the bend cracks, at once or later under load.",
    remedy="Bend with a larger radius, across the rolling direction, or in a softer temper.",
    check=check,
)
