"""thread-engagement: sheets too thin, or of the wrong stuff, for the thread that is asked."""

from collections.abc import Iterator

from flatprep.job.values import Work
from flatprep.model.finding import Finding, Severity
from flatprep.practice.asked import asked_at
from flatprep.practice.threads import Engagement, engagement
from flatprep.profile.hardware.names import UnknownHardwareError
from flatprep.profile.hardware.threads import find_thread
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Count the threads that the sheet, or the thread's depth, engages."""
    if ctx.thickness_mm is None:
        return
    work = ctx.job_part.work if ctx.job_part else ()
    for part in ctx.parts:
        told: set[tuple[str, str]] = set()
        for asked, target in asked_at(part.holes, work, ctx.drawing, ("tap",)):
            held = _held(ctx, asked, ctx.thickness_mm)
            if held is None or not held.weak or (asked.size, asked.where) in told:
                continue
            told.add((asked.size, asked.where))
            yield _finding(held, asked, part.name, target.at)


def _held(ctx: Context, asked: Work, thickness_mm: float) -> Engagement | None:
    try:
        thread = find_thread(asked.size, ctx.own)
    except UnknownHardwareError:
        return None  # tap-hole-size tells it
    return engagement(thread, min(asked.depth_mm or thickness_mm, thickness_mm), ctx.material, ctx.own)


def _finding(held: Engagement, asked: Work, part: str, at: tuple[float, float]) -> Finding:
    if held.instead:
        message = f"the material takes no machine thread {asked.size}"
        return Finding(
            RULE.id, Severity.ERROR, message, part, at, remedy=held.instead[0].upper() + held.instead[1:] + "."
        )
    if held.fails:
        message = f"the sheet is too thin for a thread {asked.size}"
        return Finding(RULE.id, Severity.ERROR, message, part, at, held.threads, held.refuse_threads, "threads")
    if held.threads < held.least_threads - 1e-9:
        message = f"few threads of {asked.size} engage: for light loads only"
        return Finding(RULE.id, Severity.WARNING, message, part, at, held.threads, held.least_threads, "threads")
    message = f"the thread {asked.size} is short for this material: the bolt is stronger than the thread"
    return Finding(RULE.id, Severity.WARNING, message, part, at, held.length_mm, held.needed_mm, "mm")


RULE = Rule(
    id="thread-engagement",
    severity=Severity.ERROR,
    summary="Too few threads engage in this thickness and material.",
    why="A thread shorter than the bolt is strong strips before the bolt holds.",
    remedy="Take a finer or smaller thread, thicker plate, a rivet, weld or clinch nut, or a thread insert.",
    check=check,
)
