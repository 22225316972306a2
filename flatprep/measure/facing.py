"""Places where the boundary faces itself at right angles: every chord that may be a web or a slot.

Each edge, and each corner that the chord may end in, is a *feature*: a point set ``c + ρ ν`` that is left in the
direction ν, with ν within a range. A line has one ν; an arc has ρ = ± radius (+ where it bulges toward ν); a corner
whose normals form a cone is an arc of radius 0. A chord from feature 1 to feature 2 leaves both along ν and -ν:

- arc and arc: ν lies along the centres, ``w = ± |c1 c2| - ρ1 - ρ2``; any ν of both ranges where they are concentric;
- line and arc: the foot of the centre, ``w = (c - a) · n - ρ``;
- line and line: where they run against each other, parallel or nearly so.
"""

from dataclasses import dataclass

import numpy as np
import shapely

from flatprep.geom.bulge import Floats
from flatprep.measure.boundary import Bools, Boundary, Ints, envelopes, wrap

SMOOTH_JOINT_RAD = np.radians(12.0)
"""A turn of less is taken as a curve drawn in pieces: chords may end in it whichever way it turns."""
PARALLEL_RAD = np.radians(0.2)
"""Lines within this angle are parallel."""
TAPER_RAD = np.radians(8.0)
"""Sides within this angle face each other, if they are long; beyond it they are the sides of a corner."""
ANGLE_RAD = 1e-6
"""Slack for rounding where a chord ends at the joint of two features."""
CONCENTRIC_MM = 0.01
"""Circles whose centres are this near are as wide all round."""
CHUNK = 2048


class TooFineError(Exception):
    """More pairs of edges lie near each other than are worth measuring."""


@dataclass(frozen=True, slots=True, eq=False)
class Features:
    """What a chord may end on, on one side of the boundary; a row a feature.

    Attributes
    ----------
    kind : ndarray of int
        0 line, 1 arc, 2 corner.
    row : ndarray of int
        Row of the boundary's edge; for a corner the edge that ends in it.
    at : ndarray, shape (n, 2)
        Start of a line, else the centre, mm.
    rho : ndarray
        Signed radius, mm; 0 for lines and corners.
    nu, half : ndarray
        Middle of the range of normals, and half its width, rad.
    """

    kind: Ints
    row: Ints
    at: Floats
    rho: Floats
    nu: Floats
    half: Floats


@dataclass(frozen=True, slots=True, eq=False)
class Chords:
    """Candidate chords, a row each; parallel sides and concentric arcs give a stretch of them.

    Attributes
    ----------
    first, second : ndarray of int
        Features at both ends.
    width : ndarray
        Least width of the stretch, mm.
    p0, q0, p1, q1 : ndarray, shape (n, 2)
        Ends of the chord at both ends of the stretch, p on `first`, q on `second`.
    nu0, nu1 : ndarray
        Direction of the chord at both ends of the stretch, rad.
    curved : ndarray of bool
        The stretch runs round the centre of `first`.
    tapered : ndarray of bool
        The sides are not parallel: p0, q0 is the narrow end, and counts only where something closes it.
    """

    first: Ints
    second: Ints
    width: Floats
    p0: Floats
    q0: Floats
    p1: Floats
    q1: Floats
    nu0: Floats
    nu1: Floats
    curved: Bools
    tapered: Bools


def features(b: Boundary, *, side: int, rows: Bools) -> Features:
    """Features of the edges `rows` seen from the material (side 1) or from the void (side -1)."""
    lines = np.nonzero(rows & ~b.is_arc)[0]
    arcs = np.nonzero(rows & b.is_arc)[0]
    turn = side * b.turn
    corners = np.nonzero(rows & ((turn < -1e-9) | ((turn < SMOOTH_JOINT_RAD) & (turn > 1e-9))))[0]
    quarter = side * np.pi / 2
    towards_centre = side * b.sweep[arcs] > 0
    middle = b.angle[arcs] + b.sweep[arcs] / 2.0
    first, last = b.heading
    return Features(
        np.repeat([0, 1, 2], [len(lines), len(arcs), len(corners)]),
        np.concatenate([lines, arcs, corners]),
        np.vstack([b.start[lines], b.centre[arcs], b.end[corners]]),
        np.concatenate(
            [np.zeros(len(lines)), np.where(towards_centre, -1, 1) * b.radius[arcs], np.zeros(len(corners))]
        ),
        wrap(
            np.concatenate(
                [
                    first[lines] + quarter,
                    middle + np.where(towards_centre, np.pi, 0.0),
                    last[corners] + quarter + b.turn[corners] / 2.0,
                ]
            )
        ),
        np.concatenate([np.zeros(len(lines)), np.abs(b.sweep[arcs]) / 2.0, np.abs(b.turn[corners]) / 2.0]),
    )


def facing_pairs(b: Boundary, f: Features, reach_mm: float, most: int) -> tuple[Ints, Ints]:
    """Pairs of features whose boxes lie within `reach_mm` and whose normals may oppose each other.

    Raises
    ------
    TooFineError
        When more than `most` pairs of boxes lie that near.
    """
    boxes = b.boxes[f.row]
    corner = f.kind == 2
    boxes[corner] = np.hstack([f.at[corner], f.at[corner]])
    tree = shapely.STRtree(envelopes(boxes))
    wide = envelopes(boxes + np.array([-reach_mm, -reach_mm, reach_mm, reach_mm]))
    found: list[tuple[Ints, Ints]] = []
    seen = 0
    for k in range(0, len(wide), CHUNK):
        i, j = tree.query(wide[k : k + CHUNK])
        seen += len(i)
        if seen > most:
            raise TooFineError
        i += k
        i, j = i[i < j], j[i < j]
        angle = np.abs(wrap(f.nu[i] - f.nu[j] + np.pi))
        slack = np.where((f.kind[i] < 2) & (f.kind[j] < 2), TAPER_RAD, ANGLE_RAD)
        good = (angle <= f.half[i] + f.half[j] + slack) & (b.part[f.row[i]] == b.part[f.row[j]])
        found.append((i[good], j[good]))
    return np.concatenate([p[0] for p in found]), np.concatenate([p[1] for p in found])


def chords(b: Boundary, f: Features, i: Ints, j: Ints, most_mm: float) -> Chords:
    """Chords of the pairs (i, j) that are at most `most_mm` wide."""
    swap = (f.kind[i] > 0) & (f.kind[j] == 0)
    i, j = np.where(swap, j, i), np.where(swap, i, j)
    straight, other = f.kind[i] == 0, f.kind[j] == 0
    edges = (f.kind[i] < 2) & (f.kind[j] < 2) & ~(straight & other) & (b.contour[f.row[i]] == b.contour[f.row[j]])
    looks = (
        (straight & other, _line_line),
        (straight & ~other, _line_arc),
        (~straight & ~other, _arc_arc),
        (edges, _end_chords),
    )
    whole = together(*(look(b, f, i[rows], j[rows]) for rows, look in looks if rows.any()))
    return take(whole, (whole.width <= most_mm) & (whole.width >= 0.0))


def together(*parts: Chords) -> Chords:
    """Put the rows of several sets of chords after each other."""
    if not parts:
        none, no, xy = np.zeros(0), np.zeros(0, dtype=bool), np.zeros((0, 2))
        row = np.zeros(0, dtype=np.intp)
        return Chords(row, row, none, xy, xy, xy, xy, none, none, no, no)
    return Chords(*(np.concatenate([getattr(p, name) for p in parts]) for name in Chords.__slots__))


def take(c: Chords, keep: Bools | Ints) -> Chords:
    """Return the chosen rows."""
    return Chords(*(getattr(c, name)[keep] for name in Chords.__slots__))


def unit(angle: Floats) -> Floats:
    """Return unit vectors of angles, shape (n, 2)."""
    return np.column_stack([np.cos(angle), np.sin(angle)])


def _within(f: Features, k: Ints, nu: Floats) -> Bools:
    return np.abs(wrap(nu - f.nu[k])) <= f.half[k] + ANGLE_RAD


def _line_line(b: Boundary, f: Features, i: Ints, j: Ints) -> Chords:
    n, a, length = unit(f.nu[i]), f.at[i], b.length[f.row[i]]
    t = (b.end[f.row[i]] - a) / length[:, None]
    other = b.start[f.row[j]], b.end[f.row[j]]
    along = [np.sum((p - a) * t, axis=1) for p in other]
    height = [np.sum((p - a) * n, axis=1) for p in other]
    lo = np.maximum(0.0, np.minimum(*along))
    hi = np.minimum(length, np.maximum(*along))
    span = along[1] - along[0]
    slope = (height[1] - height[0]) / np.where(np.abs(span) > 1e-12, span, 1e-12)
    w0, w1 = (height[0] + (s - along[0]) * slope for s in (lo, hi))
    turned = np.abs(wrap(f.nu[i] - f.nu[j] + np.pi))
    least = np.minimum(w0, w1)
    tapered = turned > PARALLEL_RAD
    good = (hi - lo > 1e-6) & (least > 0)
    narrow_first = w0 <= w1
    s0, s1 = np.where(narrow_first, lo, hi), np.where(narrow_first, hi, lo)
    v0, v1 = np.minimum(w0, w1), np.maximum(w0, w1)
    p0, p1 = a + s0[:, None] * t, a + s1[:, None] * t
    q0, q1 = p0 + v0[:, None] * n, p1 + v1[:, None] * n
    end_p, end_q = _nearest_ends(b, f.row[i], f.row[j])
    p0, q0 = np.where(tapered[:, None], end_p, p0), np.where(tapered[:, None], end_q, q0)
    least = np.where(tapered, np.hypot(*(q0 - p0).T), least)
    good &= ~tapered | (least > 1e-6)  # sides that meet are those of a corner
    nu, no = f.nu[i], np.zeros(len(i), dtype=bool)
    return take(Chords(i, j, least, p0, q0, p1, q1, nu, nu, no, tapered), good)


def _nearest_ends(b: Boundary, i: Ints, j: Ints) -> tuple[Floats, Floats]:
    """Nearest points of lines i and j, which do not cross: one of them is an end, each of shape (n, 2)."""
    best, p, q = np.full(len(i), np.inf), np.zeros((len(i), 2)), np.zeros((len(i), 2))
    for own, other, turned in ((i, j, False), (j, i, True)):
        a, d = b.start[other], b.end[other] - b.start[other]
        for end in (b.start[own], b.end[own]):
            t = np.clip(np.sum((end - a) * d, axis=1) / np.sum(d * d, axis=1), 0.0, 1.0)
            foot = a + t[:, None] * d
            apart = np.hypot(*(foot - end).T)
            nearer = (apart < best)[:, None]
            best = np.minimum(best, apart)
            p, q = np.where(nearer, foot if turned else end, p), np.where(nearer, end if turned else foot, q)
    return p, q


def _line_arc(b: Boundary, f: Features, i: Ints, j: Ints) -> Chords:
    n, a, length = unit(f.nu[i]), f.at[i], b.length[f.row[i]]
    t = (b.end[f.row[i]] - a) / length[:, None]
    offset = f.at[j] - a
    along = np.sum(offset * t, axis=1)
    width = np.sum(offset * n, axis=1) - f.rho[j]
    p = a + along[:, None] * t
    good = (along >= -1e-6) & (along <= length + 1e-6) & _within(f, j, f.nu[i] + np.pi)
    return take(_single(i, j, width, p, f.nu[i]), good)


def _end_chords(b: Boundary, f: Features, i: Ints, j: Ints) -> Chords:
    """Chords from the end of one edge to the foot on another that is nearly parallel there; one of them an arc."""
    x, y = np.concatenate([i, i, j, j]), np.concatenate([j, j, i, i])
    at_end = np.repeat([False, True, False, True], len(i))
    p = np.where(at_end[:, None], b.end[f.row[x]], b.start[f.row[x]])
    ray = p - f.at[y]
    back = np.where(f.kind[y] == 0, f.nu[y], np.arctan2(ray[:, 1], ray[:, 0]) + np.where(f.rho[y] < 0, np.pi, 0.0))
    width = np.where(f.kind[y] == 0, np.sum(ray * unit(f.nu[y]), axis=1), np.sum(ray * unit(back), axis=1) - f.rho[y])
    nu = back + np.pi
    polar = b.angle[f.row[x]] + np.where(at_end, b.sweep[f.row[x]], 0.0)
    own = np.where(f.kind[x] == 0, f.nu[x], polar + np.where(f.rho[x] < 0, np.pi, 0.0))
    q = p + width[:, None] * unit(nu)
    along = np.sum((q - f.at[y]) * unit(f.nu[y] + np.pi / 2), axis=1)
    reach = np.sum((b.end[f.row[y]] - b.start[f.row[y]]) * unit(f.nu[y] + np.pi / 2), axis=1)
    on_line = (np.minimum(0.0, reach) <= along) & (along <= np.maximum(0.0, reach))
    good = np.where(f.kind[y] == 0, on_line, _within(f, y, back)) & (np.abs(wrap(nu - own)) <= TAPER_RAD) & (width > 0)
    no = np.zeros(len(x), dtype=bool)
    return take(Chords(x, y, width, p, q, p, q, nu, nu, no, ~no), good)


def _single(i: Ints, j: Ints, width: Floats, p: Floats, nu: Floats) -> Chords:
    q = p + width[:, None] * unit(nu)
    no = np.zeros(len(i), dtype=bool)
    return Chords(i, j, width, p, q, p, q, nu, nu, no, no)


def _arc_arc(b: Boundary, f: Features, i: Ints, j: Ints) -> Chords:  # noqa: ARG001 (one signature for all kinds)
    between = f.at[j] - f.at[i]
    apart = np.hypot(*between.T)
    along = np.arctan2(between[:, 1], between[:, 0])
    round_ones = (f.rho[i] != 0.0) & (f.rho[j] != 0.0)
    concentric = round_ones & (apart <= CONCENTRIC_MM)
    out = []
    for sign, nu in ((1.0, along), (-1.0, along + np.pi)):
        width = sign * apart - f.rho[i] - f.rho[j]
        good = ~concentric & _within(f, i, nu) & _within(f, j, nu + np.pi) & (width > 0)
        p = f.at[i] + f.rho[i][:, None] * unit(nu)
        out.append(take(_single(i, j, width, p, nu), good))
    out.append(_concentric(f, i[concentric], j[concentric]))
    return together(*out)


def _concentric(f: Features, i: Ints, j: Ints) -> Chords:
    """Stretches between arcs about the same centre, over the directions that both have."""
    shift = wrap(f.nu[j] + np.pi - f.nu[i])
    lo = np.maximum(-f.half[i], shift - f.half[j])
    hi = np.minimum(f.half[i], shift + f.half[j])
    nu0, nu1 = f.nu[i] + lo, f.nu[i] + hi
    between = f.at[j] - f.at[i]
    w0, w1 = (np.sum(between * unit(nu), axis=1) - f.rho[i] - f.rho[j] for nu in (nu0, nu1))
    p0, p1 = (f.at[i] + f.rho[i][:, None] * unit(nu) for nu in (nu0, nu1))
    q0, q1 = p0 + w0[:, None] * unit(nu0), p1 + w1[:, None] * unit(nu1)
    yes = np.ones(len(i), dtype=bool)
    least = np.minimum(w0, w1)
    return take(Chords(i, j, least, p0, q0, p1, q1, nu0, nu1, yes, ~yes), (hi > lo) & (least > 0))
