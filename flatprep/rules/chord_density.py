"""chord-density: curves drawn with so many and so short chords that a machine's control cannot follow at its feed."""

from collections.abc import Iterator

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.measure.part import MeasuredPart
from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule

SHORT_MM = 0.1
"""A control reads about 1,000 lines a second, and a cutter moves 100 mm in it (common practice)."""
MANY = 100
"""So many short chords one after another are felt; fewer are over at once."""


def check(ctx: Context) -> Iterator[Finding]:
    """Tell once a part of the runs of short chords on its contours."""
    for part in ctx.parts:
        found = [run for contour in part.part.contours if len(contour.xyb) >= MANY for run in dense_runs(contour.xyb)]
        if found:
            yield _told(part, found)


def dense_runs(xyb: Floats) -> list[Floats]:
    """Return the vertices of each run of at least `MANY` straight edges that are shorter than `SHORT_MM`."""
    step = np.hypot(*(np.roll(xyb[:, :2], -1, axis=0) - xyb[:, :2]).T)
    short = (step < SHORT_MM) & (xyb[:, 2] == 0.0)
    if short.all():
        return [np.vstack([xyb[:, :2], xyb[:1, :2]])]
    if np.count_nonzero(short) < MANY:
        return []
    begin = int(np.argmin(short))  # no run crosses the seam
    turned, points = np.roll(short, -begin), np.roll(xyb[:, :2], -begin, axis=0)
    edge = np.flatnonzero(np.diff(np.concatenate(([0], turned.astype(np.int8), [0]))))
    runs = zip(edge[::2].tolist(), edge[1::2].tolist(), strict=True)
    return [np.take(points, range(a, z + 1), axis=0, mode="wrap") for a, z in runs if z - a >= MANY]


def _told(part: MeasuredPart, runs: list[Floats]) -> Finding:
    count = sum(len(run) - 1 for run in runs)
    total = sum(float(np.hypot(*np.diff(run, axis=0).T).sum()) for run in runs)
    longest = max(runs, key=len)
    x, y = longest[len(longest) // 2].tolist()
    places = "" if len(runs) == 1 else f" in {len(runs)} stretches"
    return Finding(
        rule=RULE.id,
        severity=RULE.severity,
        message=f"{count} chords{places} draw {total:.1f} mm of curve",
        part=part.name,
        at=(x, y),
        measured=total / count,
        limit=SHORT_MM,
        unit="mm",
    )


RULE = Rule(
    id="chord-density",
    severity=Severity.WARNING,
    summary="A curve is drawn with more and shorter chords than a machine's control reads at its feed.",
    why="It slows down and stutters, and the beam or cutter stands on the spot: the edge burns or shows marks.",
    remedy="Export it with arcs, or with a chord error of 0.02 mm; repair turns chords on a circle into arcs.",
    check=check,
)
