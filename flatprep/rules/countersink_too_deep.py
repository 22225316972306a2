"""countersink-too-deep: sinks and counterbores that leave too little sheet below, or run over an edge."""

from collections.abc import Iterator, Sequence
from contextlib import suppress
from itertools import combinations

from flatprep.job.values import Work
from flatprep.measure.part import MeasuredPart
from flatprep.model.finding import Finding, Severity
from flatprep.practice.asked import asked_at
from flatprep.practice.sinks import Sink, find_sink, sink_room
from flatprep.practice.targets import Target, apart_mm
from flatprep.profile.hardware.names import UnknownHardwareError
from flatprep.rules.base import Context, Rule
from flatprep.rules.bore_size import edge_mm

KINDS = ("countersink", "counterbore")


def check(ctx: Context) -> Iterator[Finding]:
    """Hold the depth of each sink against the sheet, and its rim against the edges."""
    work = ctx.job_part.work if ctx.job_part else ()
    for part in ctx.parts:
        for asked, target in asked_at(part.holes, work, ctx.drawing, KINDS):
            try:
                sink = find_sink(asked.kind, asked.size, target.drawn_mm, asked.depth_mm, ctx.own)
            except UnknownHardwareError as err:
                yield Finding(RULE.id, Severity.ERROR, err.message, part.name, target.at, remedy=err.remedy)
                continue
            yield from _depth(ctx, part, asked, target, sink)
            yield from _rim(ctx, part, asked, target, sink)
        yield from _overlaps(ctx, part, work)


def _depth(ctx: Context, part: MeasuredPart, asked: Work, target: Target, sink: Sink) -> Iterator[Finding]:
    if ctx.thickness_mm is None:
        return
    room = sink_room(sink.depth_mm, ctx.thickness_mm, ctx.own)
    if room.through:
        message = f"the {asked.kind} for {asked.size} goes through the sheet"
        yield Finding(RULE.id, Severity.ERROR, message, part.name, target.at, sink.depth_mm, ctx.thickness_mm, "mm")
    elif room.thin:
        message = f"the {asked.kind} for {asked.size} leaves a thin edge below the head"
        yield Finding(RULE.id, Severity.WARNING, message, part.name, target.at, sink.depth_mm,
                      ctx.thickness_mm - room.land_needed_mm, "mm")  # fmt: skip


def _rim(ctx: Context, part: MeasuredPart, asked: Work, target: Target, sink: Sink) -> Iterator[Finding]:
    left = edge_mm(part, target) - sink.dia_mm / 2.0
    if left < -ctx.slack_mm():
        message = f"the rim of the {asked.kind} for {asked.size} runs over an edge"
        yield Finding(RULE.id, Severity.ERROR, message, part.name, target.at, left, 0.0, "mm", _EDGE)


def _overlaps(ctx: Context, part: MeasuredPart, work: Sequence[Work]) -> Iterator[Finding]:
    """Yield each pair of sinks of one side whose rims run into each other."""
    rims = [(asked, target, sink) for asked, target, sink in _sinks(ctx, part, work)]
    for (one, at, a), (other, there, b) in combinations(rims, 2):
        left = apart_mm(at.at, there.at) - (a.dia_mm + b.dia_mm) / 2.0
        if left < -ctx.slack_mm() and one.side == other.side:
            middle = ((at.at[0] + there.at[0]) / 2.0, (at.at[1] + there.at[1]) / 2.0)
            message = f"the {one.kind} for {one.size} runs into the next one"
            yield Finding(RULE.id, Severity.ERROR, message, part.name, middle, left, 0.0, "mm", _APART)


def _sinks(ctx: Context, part: MeasuredPart, work: Sequence[Work]) -> Iterator[tuple[Work, Target, Sink]]:
    for asked, target in asked_at(part.holes, work, ctx.drawing, KINDS):
        with suppress(UnknownHardwareError):  # told above
            yield asked, target, find_sink(asked.kind, asked.size, target.drawn_mm, asked.depth_mm, ctx.own)


_APART = "Move the holes apart, or take smaller screws."
_EDGE = "Move the hole inwards, or take a smaller screw."

RULE = Rule(
    id="countersink-too-deep",
    severity=Severity.ERROR,
    summary="A countersink or counterbore is deeper than the sheet allows, or its rim runs over an edge.",
    why="A sink that goes through leaves a knife edge: the head pulls through and the screw wobbles.",
    remedy="Take a smaller screw or thicker sheet, a head that lies on the sheet, or sink into the part below as well.",
    check=check,
)
