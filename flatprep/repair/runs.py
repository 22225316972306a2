"""Runs of short chords whose vertices lie on one circle."""

from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from flatprep.geom.bulge import Floats
from flatprep.repair.values import RoundLimits

SHARPEST_RAD = 2.0 * np.pi / 12.0 + 0.02
"""Chords of one arc turn less than this from one to the next: those of a twelve-sided polygon just do."""
UNEVEN = 2.5
"""No chord of a run is so many times longer than the usual one: a flat on a round hole is drawn on purpose."""
LEAST_SWEEP_RAD = np.radians(20.0)
MANY_CHORDS = 8
"""A run of fewer chords sweeps at least `LEAST_SWEEP_RAD`."""
LARGEST_MM = 1e5
_TIGHT = 0.12
"""The vertices lie so much nearer to the circle than the middles of the chords: on a spline they do not."""
_ROUNDING_MM = 0.001
"""What three decimals of a millimetre leave, and no evidence against a circle."""
_PLAIN = 4.0
"""An arc rises this many times `vertex_mm` above its chord, else it is a straight line."""


@dataclass(frozen=True, slots=True)
class Circle:
    """Circle of least algebraic distance through points."""

    x: float
    y: float
    radius: float


@dataclass(frozen=True, slots=True)
class Run:
    """Chords from vertex `first` to `last` (counted on past the last vertex) on a circle; `sweep_rad` is signed."""

    first: int
    last: int
    circle: Circle
    sweep_rad: float


def circle_through(xy: Floats) -> Circle | None:
    """Circle of least algebraic distance (Kåsa 1976) through points (n, 2), None where they lie on a line."""
    middle = xy.mean(axis=0)
    p = xy - middle
    squares = np.sum(p * p, axis=1)
    (a, b), (_, d) = (p.T @ p).tolist()
    e, f = (p.T @ squares / 2.0).tolist()
    det = a * d - b * b
    if det <= 1e-14 * max(a, d, 1e-300) ** 2:
        return None
    x, y = (e * d - b * f) / det, (a * f - b * e) / det
    return Circle(float(middle[0] + x), float(middle[1] + y), float(np.sqrt(x * x + y * y + squares.mean())))


def runs(xyb: Floats, limits: RoundLimits) -> Iterator[Run]:
    """Find the runs of a closed polyline, one after the other, none longer than once around.

    Parameters
    ----------
    xyb : ndarray, shape (n, 3)
    limits
        See `RoundLimits`.
    """
    n = len(xyb)
    good = _windows(xyb, limits)
    if not good.any():
        return
    # begin where a run begins, so that none is cut in two by the first vertex
    starts = np.flatnonzero(good & ~np.roll(good, 1))
    begin = int(starts[0]) if len(starts) else 0
    points = np.vstack([np.roll(xyb[:, :2], -begin, axis=0)] * 2)
    straight = np.roll(xyb[:, 2] == 0.0, -begin)
    good = np.roll(good, -begin)
    at = 0
    while at < n:
        if good[at]:
            bend = np.flatnonzero(~straight[at:])
            most = at + int(bend[0]) if len(bend) else n
            run = _longest(points, at, min(most, n), limits)
            if run is not None:
                yield Run(run.first + begin, run.last + begin, run.circle, run.sweep_rad)
                at = run.last
                continue
        at += 1


def _windows(xyb: Floats, limits: RoundLimits) -> npt.NDArray[np.bool_]:
    """Tell for each vertex whether the next few segments are chords of one circle."""
    count, n = limits.least_chords, len(xyb)
    if n <= count:
        return np.zeros(n, dtype=np.bool_)
    xy = xyb[:, :2]
    step = np.roll(xy, -1, axis=0) - xy
    length = np.hypot(*step.T)
    before = np.roll(step, 1, axis=0)
    cross = before[:, 0] * step[:, 1] - before[:, 1] * step[:, 0]
    turn = np.arctan2(cross, np.sum(before * step, axis=1))

    def ahead(values: Floats, first: int, last: int) -> Floats:
        return np.stack([np.roll(values, -k, axis=0) for k in range(first, last)])

    lengths, turns = ahead(length, 0, count), ahead(turn, 1, count)
    chords = ahead(xyb[:, 2], 0, count)
    good = ~chords.any(axis=0) & (lengths.min(axis=0) > 0.0)
    good &= lengths.max(axis=0) <= UNEVEN**2 * lengths.min(axis=0)
    good &= (np.abs(turns).max(axis=0) <= SHARPEST_RAD) & (np.abs(turns.sum(axis=0)) == np.abs(turns).sum(axis=0))
    good &= np.abs(turns).min(axis=0) > 0.0
    return np.asarray(good, dtype=np.bool_)


def _longest(points: Floats, first: int, most: int, limits: RoundLimits) -> Run | None:
    """Find the longest run from a vertex on: doubled while it holds, then halved in between."""
    least = first + limits.least_chords
    if least > most:
        return None
    best = _run(points, first, least, limits)
    if best is None:
        return None
    low, size = least, limits.least_chords
    high = most + 1
    while low < most and high > most:
        trial = min(low + size, most)
        found = _run(points, first, trial, limits)
        if found is None:
            high = trial
        else:
            best, low, size = found, trial, 2 * size
    while high - low > 1:
        middle = (low + high) // 2
        found = _run(points, first, middle, limits) if middle <= most else None
        if found is None:
            high = middle
        else:
            best, low = found, middle
    return best if _convincing(best, limits) else None


def _convincing(run: Run, limits: RoundLimits) -> bool:
    """Tell whether a run is an arc: no straight line, and no stretch of a spline that is round for a little while."""
    rise = run.circle.radius * (1.0 - np.cos(min(abs(run.sweep_rad), np.pi) / 2.0))
    bends = abs(run.sweep_rad) >= LEAST_SWEEP_RAD or run.last - run.first >= MANY_CHORDS
    return bool(bends and rise >= _PLAIN * limits.vertex_mm)


def _run(points: Floats, first: int, last: int, limits: RoundLimits) -> Run | None:
    """Return the run between two vertices, where all in between lie on a circle."""
    xy = points[first : last + 1]
    circle = circle_through(xy)
    if circle is None or circle.radius > LARGEST_MM:
        return None
    ray = xy - (circle.x, circle.y)
    off = float(np.abs(np.hypot(*ray.T) - circle.radius).max())
    if off > limits.vertex_mm:
        return None
    turn = np.diff(np.unwrap(np.arctan2(ray[:, 1], ray[:, 0])))
    sweep = float(turn.sum())
    chord = np.hypot(*np.diff(xy, axis=0).T)
    one_way = bool((turn * np.sign(sweep) > 0.0).all()) and float(np.abs(turn).max()) <= SHARPEST_RAD
    even = float(chord.max()) <= UNEVEN * float(np.median(chord))
    sag = circle.radius * (1.0 - np.cos(float(np.abs(turn).max()) / 2.0))
    tight = off <= max(_ROUNDING_MM, _TIGHT * sag)
    if not (tight and one_way and even and sag <= limits.deviation_mm):
        return None
    return Run(first, last, circle, sweep) if abs(sweep) < 2.0 * np.pi else None
