"""tap-hole-size: holes that are to be tapped and are drawn too large for the thread, or not known."""

from collections.abc import Iterator

from flatprep.measure.part import MeasuredPart
from flatprep.model.finding import Finding, Severity
from flatprep.practice.asked import asked_at
from flatprep.practice.targets import Target
from flatprep.practice.threads import THERMAL, hardens
from flatprep.profile.hardware.names import UnknownHardwareError
from flatprep.profile.hardware.rules import section
from flatprep.profile.hardware.threads import Thread, find_thread
from flatprep.rules.base import Context, Rule
from flatprep.rules.bore_size import edge_mm

KINDS = ("tap",)


def check(ctx: Context) -> Iterator[Finding]:
    """Compare each hole to be tapped with the greatest minor diameter of its thread."""
    work = ctx.job_part.work if ctx.job_part else ()
    for part in ctx.parts:
        for asked, target in asked_at(part.holes, work, ctx.drawing, KINDS):
            try:
                thread = find_thread(asked.size, ctx.own)
            except UnknownHardwareError as err:
                yield Finding(RULE.id, Severity.ERROR, err.message, part.name, target.at, remedy=err.remedy)
                continue
            yield from _edge(ctx, part, thread, target)
            hole = target.hole
            if hole is None:
                continue
            slack = ctx.slack_mm(chords=hole.chords)
            size = (part.name, hole.at, hole.width_mm, thread.minor_max_mm, "mm")
            if hole.width_mm > thread.minor_max_mm + slack:
                message = f"the hole is too large to be tapped {thread.name}: the thread would be shallow or not there"
                yield Finding(RULE.id, Severity.ERROR, message, *size, handles=hole.handles)
            elif hole.width_mm >= thread.minor_min_mm - slack and _hard_rim(ctx):
                message = f"the hole for {thread.name} is cut to the tap drill in steel whose cut edge hardens"
                yield Finding(RULE.id, Severity.WARNING, message, *size, _HARD, hole.handles)


def _edge(ctx: Context, part: MeasuredPart, thread: Thread, target: Target) -> Iterator[Finding]:
    least, edge = section("edges", ctx.own)["tap"] * thread.major_mm, edge_mm(part, target)
    if edge < least - ctx.slack_mm():
        message = f"the thread {thread.name} stands near an edge: it bulges or breaks out"
        yield Finding(RULE.id, Severity.WARNING, message, part.name, target.at, edge, least, "mm", _INWARDS)


_INWARDS = "Move the hole inwards, or take a smaller thread."


def _hard_rim(ctx: Context) -> bool:
    return ctx.process is not None and ctx.process.kind in THERMAL and hardens(ctx.material, ctx.own)


_HARD = "Draw it smaller and drill it out, so that the hard rim is gone before the tap comes."

RULE = Rule(
    id="tap-hole-size",
    severity=Severity.ERROR,
    summary="A hole to be tapped is larger than the thread's greatest minor diameter, or the thread is not known.",
    why="The tap finds too little material: the thread strips at the first tightening.",
    remedy="Draw the hole at the tap drill or smaller; `flatprep lookup thread` names the drill and the limits.",
    check=check,
)
