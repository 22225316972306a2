"""bend-along-grain: bends along the rolling direction of a material that cracks there."""

from collections.abc import Iterator

from flatprep.measure.bends import bend_lines
from flatprep.model.finding import Finding, Severity
from flatprep.practice.bends import ALONG_DEG
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Hold the direction of each bend line against the grain that the job names for the drawing."""
    rule = ctx.material.bend if ctx.material else None
    grain = ctx.job_part.grain if ctx.job_part else None
    if rule is None or grain is None or rule.along_grain <= 1.0 or not rule.bendable or not ctx.thickness_mm:
        return
    limit = rule.limit(ctx.thickness_mm)
    for part in ctx.parts:
        for line in bend_lines(part.part, ctx.job_part.bends if ctx.job_part else ()):
            off = line.degrees_from(grain)
            if off >= ALONG_DEG:
                continue
            needed = None if limit is None else rule.along_grain * (limit.warn or limit.error)
            wide = needed is not None and line.radius_mm is not None and line.radius_mm >= needed - ctx.slack_mm()
            if not wide:
                yield Finding(
                    rule=RULE.id,
                    severity=RULE.severity,
                    message="the bend runs along the rolling direction, where the sheet cracks first",
                    part=part.name,
                    at=line.middle,
                    measured=line.radius_mm,
                    limit=needed if line.radius_mm is not None else None,
                    unit="mm" if line.radius_mm is not None else None,
                    handles=(line.handle,) if line.handle else (),
                )


RULE = Rule(
    id="bend-along-grain",
    severity=Severity.WARNING,
    summary="A bend line runs along the rolling direction.",
    why="Inclusions are drawn out along it: bent along them the sheet opens at a radius it takes well across.",
    remedy="Turn the part on the sheet so that the bend lies across the grain, or bend with a larger radius.",
    check=check,
)
