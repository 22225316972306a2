"""thickness-out-of-range: sheet that the process does not cut."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Compare the thickness with the range that the profile states for the material."""
    if ctx.process is None or ctx.thickness_mm is None:
        return
    stated = ctx.process.thickness_mm(ctx.family)
    if stated is None:
        return
    least, most = stated
    slack = ctx.tol.limit_mm
    if least - slack <= ctx.thickness_mm <= most + slack:
        return
    thick = ctx.thickness_mm > most
    yield Finding(
        rule=RULE.id,
        severity=RULE.severity,
        message=f"the sheet is too {'thick' if thick else 'thin'} for the process {ctx.process.name}",
        measured=ctx.thickness_mm,
        limit=most if thick else least,
        unit="mm",
    )


RULE = Rule(
    id="thickness-out-of-range",
    severity=Severity.ERROR,
    summary="The process does not cut this thickness of the material.",
    why="The cut does not go through, or the sheet buckles and burns.",
    remedy="Choose another thickness or process, or put your machine's own range into its profile.",
    check=check,
)
