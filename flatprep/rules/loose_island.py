"""loose-island: pieces that drop out of a window of a part."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Compare pieces in windows with the least part that is kept."""
    limit = ctx.limit("part")
    if limit is None:
        return
    least = limit.warn or limit.error
    outermost = sum(1 for part in ctx.drawing.parts if part.depth == 0)
    for part in ctx.drawing.parts:
        side = max(part.size_mm)
        if part.depth == 0 or side >= least - ctx.slack_mm():
            continue
        x0, y0, x1, y1 = part.outer.bounds
        yield Finding(
            rule=RULE.id,
            severity=RULE.severity if outermost == 1 else Severity.NOTE,
            message="this piece lies in a hole, joined to nothing, and drops out",
            part=part.name,
            at=((x0 + x1) / 2, (y0 + y1) / 2),
            measured=side,
            limit=least,
            unit="mm",
            handles=part.outer.distinct_handles,
        )


RULE = Rule(
    id="loose-island",
    severity=Severity.WARNING,
    summary="A piece in a hole is joined to nothing.",
    why="It drops out when its hole is cut: the middle of a letter is lost, or a slug jams the machine.",
    remedy="Hold it with two bridges or more, or delete it if only the hole is wanted.",
    check=check,
    limits=("part",),
)
