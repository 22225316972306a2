"""thin-web: material too narrow between two edges."""

from collections.abc import Iterator

from flatprep.measure.facing import TooFineError
from flatprep.measure.widths import Width
from flatprep.model.finding import Finding, Severity
from flatprep.profile.process import Limit
from flatprep.rules.base import Context, Rule, judge, reach_mm


def check(ctx: Context) -> Iterator[Finding]:
    """Compare the least width of each web with the least web; from a hole to the edge with that limit, if any."""
    web, edge = ctx.limit("web"), ctx.limit("edge")
    reach = reach_mm(web, edge)
    if reach <= 0.0:
        return
    for part in ctx.parts:
        try:
            found = part.webs(reach)
        except TooFineError:  # told by not-measured
            continue
        for width in found:
            chords = any(part.shapes[k].chords for k in width.contours)
            verdict = _verdict(ctx, width, web, edge, chords=chords)
            if verdict is not None:
                yield Finding(
                    rule=RULE.id,
                    severity=verdict[0],
                    message=_between(width),
                    part=part.name,
                    at=width.at,
                    measured=width.width_mm,
                    limit=verdict[1],
                    unit="mm",
                    handles=part.handles(width.rows),
                )


def _verdict(
    ctx: Context, width: Width, web: Limit | None, edge: Limit | None, *, chords: bool
) -> tuple[Severity, float] | None:
    to_edge = 0 in width.contours and width.contours != (0, 0)
    limit = (edge if to_edge else None) or web
    return None if limit is None else judge(width.width_mm, limit, ctx.slack_mm(chords=chords))


def _between(width: Width) -> str:
    if width.contours == (0, 0):
        return "the part is narrow here"
    if 0 in width.contours:
        return "little material is left between a hole and the edge"
    if width.contours[0] == width.contours[1]:
        return "little material is left between two sides of a hole"
    return "little material is left between two holes"


RULE = Rule(
    id="thin-web",
    severity=Severity.ERROR,
    summary="The material between two edges is too narrow.",
    why="The heat of both cuts meets in it: it warps, burns away, or breaks in handling.",
    remedy="Move the edges apart, make the hole smaller, or take the web away altogether.",
    check=check,
    limits=("web", "edge"),
)
