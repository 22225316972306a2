"""unsafe-material: materials that must not be cut by the process, because someone or the machine would be harmed."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Ask the material's profile."""
    if ctx.process is None or ctx.material is None:
        return
    verdict = ctx.material.verdict(ctx.process)
    if verdict.level == "never":
        caution = f" {verdict.caution}" if verdict.caution else ""
        yield Finding(
            rule=RULE.id,
            severity=RULE.severity,
            message=f"{ctx.material.name} must not be cut by {ctx.process.name}: {verdict.why}{caution}",
        )


RULE = Rule(
    id="unsafe-material",
    severity=Severity.ERROR,
    summary="Cutting this material with this process harms people or the machine.",
    why="It gives off poisonous or corrosive gas, or burns in a way that cannot be put out.",
    remedy="Use another process or material. Local codes, the machine's manual and licensed practice come first.",
    check=check,
)
