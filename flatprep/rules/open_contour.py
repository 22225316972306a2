"""open-contour: chains of lines that do not close."""

from collections.abc import Iterator

from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule, told

CLOSED_MM = 0.1
"""Gaps up to this were closed by the reader and are only noted (common practice)."""


def check(ctx: Context) -> Iterator[Finding]:
    """Pass on every gap; one that was closed and is small is a note."""
    loose = {curve.handle for curve in ctx.drawing.loose}
    for fault in ctx.faults(RULE.id):
        wide = fault.measured_mm is None or fault.measured_mm > CLOSED_MM or bool(loose & set(fault.handles))
        yield from told(RULE.id, Severity.ERROR if wide else Severity.NOTE, [fault])


RULE = Rule(
    id="open-contour",
    severity=Severity.ERROR,
    summary="A chain of lines does not close.",
    why="An open outline has no inside: the part stays attached, or a hole is lost.",
    remedy="Join the two ends in the drawing; lines that are only marked belong on a layer of their own.",
    check=check,
)
