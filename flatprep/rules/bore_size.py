"""bore-size: fit holes drawn so that nothing, or too little, is left to finish, and seats too near an edge."""

from collections.abc import Iterator

import numpy as np

from flatprep.job.values import Work
from flatprep.measure.part import MeasuredPart
from flatprep.model.finding import Finding, Severity
from flatprep.practice.asked import asked_at
from flatprep.practice.fits import finish_plan
from flatprep.practice.seats import Seat, find_seat, seat_wall_mm
from flatprep.practice.targets import Target
from flatprep.profile.hardware.names import UnknownHardwareError
from flatprep.rules.base import Context, Rule

KINDS = ("ream", "bore")


def check(ctx: Context) -> Iterator[Finding]:
    """Compare each fit hole with its finished size, and its wall with what a press fit needs."""
    work = ctx.job_part.work if ctx.job_part else ()
    for part in ctx.parts:
        for asked, target in asked_at(part.holes, work, ctx.drawing, KINDS):
            try:
                seat = find_seat(asked.size, ctx.material, ctx.own)
            except UnknownHardwareError as err:
                yield Finding(RULE.id, Severity.ERROR, err.message, part.name, target.at, remedy=err.remedy)
                continue
            yield from _size(ctx, part, target, seat)
            yield from _wall(ctx, part, asked, target, seat)


def _size(ctx: Context, part: MeasuredPart, target: Target, seat: Seat) -> Iterator[Finding]:
    hole, size = target.hole, seat.limits
    if hole is None:
        return
    slack = ctx.slack_mm(chords=hole.chords)
    if hole.width_mm > size.least_mm + slack:
        yield Finding(RULE.id, Severity.ERROR, f"the hole is drawn wider than the finished {size.name}", part.name,
                      hole.at, hole.width_mm, size.least_mm, "mm", handles=hole.handles)  # fmt: skip
    elif ctx.process is not None:
        most = finish_plan(size, ctx.process, ctx.material, ctx.thickness_mm, ctx.own).cut_range_mm[1]
        if hole.width_mm > most + slack:
            message = f"little is left to finish {size.name}: the cut's own tolerance, taper and skin may show"
            yield Finding(RULE.id, Severity.WARNING, message, part.name, hole.at, hole.width_mm, most, "mm",
                          handles=hole.handles)  # fmt: skip


def _wall(ctx: Context, part: MeasuredPart, asked: Work, target: Target, seat: Seat) -> Iterator[Finding]:
    wall = edge_mm(part, target) - seat.limits.nominal_mm / 2.0
    web = ctx.limit("web")
    needed = seat_wall_mm(seat, ctx.material, ctx.thickness_mm, ctx.own)
    if web is not None and wall < web.error - ctx.slack_mm():
        message = f"the wall round {asked.size} is thinner than the least web"
        yield Finding(RULE.id, Severity.ERROR, message, part.name, target.at, wall, web.error, "mm", _EDGE)
    elif needed is not None and wall < needed - ctx.slack_mm():
        message = f"the wall round {asked.size} is thin for a press fit"
        yield Finding(RULE.id, Severity.WARNING, message, part.name, target.at, wall, needed, "mm", _EDGE)


def edge_mm(part: MeasuredPart, target: Target) -> float:
    """Return the distance of a place from the nearest edge that is not its own hole, mm."""
    edges = part.boundary
    own = next((n for n, hole in enumerate(part.holes, 1) if hole is target.hole), -1)
    rows = np.nonzero(edges.contour != own)[0]
    return float(edges.distance(rows, np.tile(target.at, (len(rows), 1))).min())


_EDGE = "Move the seat inwards, widen the part there, or take a flanged housing."

RULE = Rule(
    id="bore-size",
    severity=Severity.ERROR,
    summary="A hole for a fit is drawn too large to be finished, or its seat stands too near an edge.",
    why="A cut hole is never a fit hole: it is cut under size and reamed or bored, and a thin wall gives way.",
    remedy="Draw the hole smaller by the finishing allowance; `flatprep checklist` names the diameter.",
    check=check,
    limits=("web",),
)
