"""small-part: parts that fall through the grate or fly off."""

from collections.abc import Iterator

from flatprep.job.values import Tabs
from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule, judge


def check(ctx: Context) -> Iterator[Finding]:
    """Compare the larger side of each outermost part's box with the least."""
    limit = ctx.limit("part")
    if limit is None:
        return
    for part in ctx.drawing.parts:
        side = max(part.size_mm)
        verdict = judge(side, limit, ctx.slack_mm())
        if verdict is None or part.depth > 0:  # pieces in windows are the business of loose-island
            continue
        x0, y0, x1, y1 = part.outer.bounds
        held = ctx.job_part is not None and ctx.job_part.tabs in (Tabs.SMALL, Tabs.ALL)
        message = "the part is small enough to fall through the grate or to tip up"
        yield Finding(
            rule=RULE.id,
            severity=Severity.NOTE if held else verdict[0],
            message=f"{message}: the job asks for tabs that hold it" if held else message,
            part=part.name,
            at=((x0 + x1) / 2, (y0 + y1) / 2),
            measured=side,
            limit=verdict[1],
            unit="mm",
            handles=part.outer.distinct_handles,
            remedy="See that the tabs are cut, and break them out afterwards." if held else "",
        )


RULE = Rule(
    id="small-part",
    severity=Severity.ERROR,
    summary="The part is too small to stay on the machine.",
    why="It falls between the slats, is blown away, or tips up into the path of the head.",
    remedy="Hold it with tabs, or cut several in one frame and part them afterwards.",
    check=check,
    limits=("part",),
)
