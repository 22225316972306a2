"""tiny-segment: entities without length, and edges so short that they are slips of the pen."""

from collections.abc import Iterator

import numpy as np

from flatprep.measure.boundary import Boundary, Ints
from flatprep.measure.part import MeasuredPart
from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule, told

TINY_MM = 0.05
"""Shorter edges move no machine (common practice)."""
ALONE = 10.0
"""An edge that is so many times shorter than both of its neighbours is no piece of a finely drawn curve."""
KINK_RAD = np.radians(20.0)
"""A short edge that turns less than this at both ends follows its neighbours and is no slip."""


def check(ctx: Context) -> Iterator[Finding]:
    """Pass on empty entities, and tell short edges that jut out between long ones, once for each part."""
    yield from told(RULE.id, RULE.severity, ctx.faults(RULE.id))
    for part in ctx.parts:
        rows = slips(part.boundary)
        if len(rows):
            yield _told(part, rows)


def slips(b: Boundary) -> Ints:
    """Rows of the short edges between two long ones, with a kink at one end or both."""
    before = np.empty(len(b), dtype=np.intp)
    before[b.next] = np.arange(len(b))
    near = np.minimum(b.length[before], b.length[b.next])
    kink = np.maximum(np.abs(b.turn), np.abs(b.turn[before]))
    return np.nonzero((b.length < TINY_MM) & (near > ALONE * b.length) & (near > TINY_MM) & (kink > KINK_RAD))[0]


def _told(part: MeasuredPart, rows: Ints) -> Finding:
    shortest = int(rows[np.argmin(part.boundary.length[rows])])
    x, y = ((part.boundary.start[shortest] + part.boundary.end[shortest]) / 2.0).tolist()
    many = f"{len(rows)} edges are" if len(rows) > 1 else "an edge is"
    return Finding(
        rule=RULE.id,
        severity=RULE.severity,
        message=f"{many} shorter than any machine follows",
        part=part.name,
        at=(x, y),
        measured=float(part.boundary.length[shortest]),
        limit=TINY_MM,
        unit="mm",
        handles=part.handles(rows[:20].tolist()),
    )


RULE = Rule(
    id="tiny-segment",
    severity=Severity.NOTE,
    summary="The outline holds entities without length or very short edges.",
    why="Machines stutter on them and burn the spot; they are slips of the drawing program.",
    remedy="Delete them, or let repair do it.",
    check=check,
)
