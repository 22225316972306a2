"""empty-drawing: drawings without a closed outline."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Tell a drawing that yields no part."""
    if ctx.drawing.parts:
        return
    message = "no outline closes, so there is no part" if ctx.drawing.loose else "there is nothing to cut in it"
    yield Finding(rule=RULE.id, severity=RULE.severity, message=message)


RULE = Rule(
    id="empty-drawing",
    severity=Severity.ERROR,
    summary="The drawing holds no part.",
    why="Without a closed outline nothing can be cut, nested or weighed.",
    remedy="Check that the outline was exported, lies in model space, and closes.",
    check=check,
)
