"""wrong-process: a material that the process cannot cut well, or only with care."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Ask the material's profile."""
    if ctx.process is None or ctx.material is None:
        return
    verdict = ctx.material.verdict(ctx.process)
    if verdict.level not in ("no", "care"):
        return
    cannot = verdict.level == "no"
    # a profile that says nothing of materials is a shop's own machine, which may well do what others cannot
    loud = cannot and bool(ctx.process.families)
    words = f"{ctx.process.name} and {ctx.material.name}: {verdict.why}" if cannot else verdict.caution or verdict.why
    if words:
        yield Finding(rule=RULE.id, severity=Severity.ERROR if loud else Severity.NOTE, message=words)


RULE = Rule(
    id="wrong-process",
    severity=Severity.ERROR,
    summary="The process does not cut this material.",
    why="The material melts, burns, reflects the beam or breaks the tool.",
    remedy="Choose another process; the machine's manual and its supplier have the last word.",
    check=check,
)
