"""Widths by another way: maximal balls shrunk onto the boundary, sampled densely; shares no code with measure/.

Ma, Bae and Choi, "3D medial axis point approximation using nearest neighbors and the normal field" (2012): from a
point p of the boundary with inward normal n, a ball that touches p is shrunk until its inside is empty; it then
touches at a second point q. Where p and q lie opposite each other the ball's diameter is the width there.
"""

from dataclasses import dataclass

import numpy as np
import shapely

from flatprep.geom.bulge import points_along

CHORD_MM = 0.0005
OPPOSITE_DEG = 178.0
"""Balls whose two points are seen from the centre under less are in corners."""


@dataclass(frozen=True)
class Balls:
    """Samples with the widths found there: places p and q, width, contours, and the way round on one contour."""

    p: np.ndarray
    q: np.ndarray
    width: np.ndarray
    contour_p: np.ndarray
    contour_q: np.ndarray
    way_round: np.ndarray


def balls(contours, *, side, most_mm, step_mm):
    """Widths at most `most_mm` of closed bulge polylines with the material on the left; side -1 is the void."""
    a, z, contour, run, total = _chords(contours)
    sets = _samples(a, z, contour, run, step_mm, side), _corners(a, z, contour, run, side)
    p, n, at, own = (np.concatenate(v) for v in zip(*sets, strict=True))
    tree = shapely.STRtree(shapely.linestrings(np.stack([a, z], axis=1)))
    radius = np.full(len(p), most_mm)
    q, hit = p.copy(), np.full(len(p), -1)
    live = np.arange(len(p))
    for _ in range(60):
        centre = p[live] + n[live] * radius[live, None]
        which, k = tree.query_nearest(shapely.points(centre), all_matches=False)
        near = _nearest_point(a[k], z[k], centre[which])
        d = np.hypot(*(near - centre[which]).T)
        inside = d < radius[live] * (1 - 1e-9) - 1e-7
        chord = near - p[live]
        lift = np.sum(chord * n[live], axis=1)
        shrink = np.sum(chord * chord, axis=1) / np.maximum(2 * lift, 1e-12)
        good = inside & (lift > 1e-9) & (shrink < radius[live])
        q[live[good]], hit[live[good]] = near[good], k[good]
        radius[live[good]] = shrink[good]
        live = live[good]
        if not len(live):
            break
    c = p + n * radius[:, None]
    u, v = p - c, q - c
    turn = np.degrees(np.abs(np.arctan2(u[:, 0] * v[:, 1] - u[:, 1] * v[:, 0], np.sum(u * v, axis=1))))
    keep = (hit >= 0) & (turn >= OPPOSITE_DEG) & (2 * radius <= most_mm)
    k = hit[keep]
    place = run[k] + np.hypot(*(q[keep] - a[k]).T)
    apart = np.abs(place - at[keep])
    one = contour[k] == own[keep]
    way = np.where(one, np.minimum(apart, total[own[keep]] - apart), np.inf)
    return Balls(p[keep], q[keep], 2 * radius[keep], own[keep], contour[k], way)


def _chords(contours):
    starts, ends, number, run, total = [], [], [], [], []
    for k, xyb in enumerate(contours):
        points = points_along(xyb, closed=True, chord_mm=CHORD_MM)
        after = np.roll(points, -1, axis=0)
        length = np.hypot(*(after - points).T)
        sound = length > 1e-9
        starts.append(points[sound])
        ends.append(after[sound])
        number.append(np.full(int(sound.sum()), k))
        run.append((np.cumsum(length) - length)[sound])
        total.append(length.sum())
    return np.vstack(starts), np.vstack(ends), np.concatenate(number), np.concatenate(run), np.array(total)


def _samples(a, z, contour, run, step_mm, side):
    length = np.hypot(*(z - a).T)
    count = np.maximum(1, np.ceil(length / step_mm)).astype(int)
    k = np.repeat(np.arange(len(a)), count)
    share = (np.arange(len(k)) - np.repeat(np.cumsum(count) - count, count) + 0.5) / count[k]
    t = (z - a) / length[:, None]
    n = side * np.column_stack([-t[:, 1], t[:, 0]])
    p = a[k] + (z - a)[k] * share[:, None]
    return p, n[k], run[k] + share * length[k], contour[k]


def _corners(a, z, contour, run, side):
    """Corners that jut into the region, with normals all over their cones, a degree apart."""
    k = np.arange(len(a))
    last = np.append(contour[1:] != contour[:-1], True)
    first = np.append(True, contour[1:] != contour[:-1])
    follows = k + 1
    follows[last] = k[first]
    t = np.arctan2(*(z - a).T[::-1])
    turn = (t[follows] - t + np.pi) % (2 * np.pi) - np.pi
    juts = np.nonzero(side * turn < -1e-3)[0]
    count = np.ceil(np.degrees(np.abs(turn[juts]))).astype(int) + 1
    which = np.repeat(juts, count)
    share = (np.arange(len(which)) - np.repeat(np.cumsum(count) - count, count)) / (np.repeat(count, count) - 1)
    angle = t[which] + side * np.pi / 2 + turn[which] * share
    n = np.column_stack([np.cos(angle), np.sin(angle)])
    return z[which], n, run[follows[which]], contour[which]


def _nearest_point(a, z, p):
    d = z - a
    t = np.clip(np.sum((p - a) * d, axis=1) / np.maximum(np.sum(d * d, axis=1), 1e-30), 0, 1)
    return a + t[:, None] * d


def disagreements(found, contours, *, side, most_mm, step_mm=0.05, tol_mm=0.02):
    """Hold widths against balls, both ways; a line for each that does not agree.

    Narrow places that balls find must have a told width on the same contours that is no wider, near enough to be the
    same web (their strip is thin all along), and told widths must be found by balls.
    """
    seen = balls(contours, side=side, most_mm=most_mm, step_mm=step_mm)
    said = []
    # a ball on one sample overestimates the neck of two circles by about step²/r; way_round 3 is the rule's own measure
    clear = (seen.width < most_mm - tol_mm) & (seen.way_round > 3.2 * seen.width)
    low, high = np.minimum(seen.contour_p, seen.contour_q), np.maximum(seen.contour_p, seen.contour_q)
    for k in np.nonzero(clear)[0]:
        told = [w for w in found if w.contours == (low[k], high[k]) and w.width_mm <= seen.width[k] + tol_mm]
        if not told:
            said.append(
                f"missed {seen.width[k]:.4f} at {((seen.p[k] + seen.q[k]) / 2).round(2)} between {low[k]}, {high[k]}"
            )
    tree = shapely.STRtree(shapely.linestrings(np.stack(_chords(contours)[:2], axis=1)))
    middle = (seen.p + seen.q) / 2
    for w in found:
        if w.width_mm >= most_mm - tol_mm:
            continue
        away = np.hypot(*(middle - np.array(w.at)).T)
        near = (low == w.contours[0]) & (high == w.contours[1]) & (away < 0.2 + 0.15 * w.width_mm)
        if near.any() and abs(seen.width[near].min() - w.width_mm) <= tol_mm:
            continue
        if not _closed_end(tree, w):
            other = seen.width[near].min() if near.any() else None
            said.append(f"told {w.width_mm:.4f} at {np.round(w.at, 2)} between {w.contours}, balls find {other}")
    return said


def _closed_end(tree, w):
    """Whether no ball fits where a width is told, since what closes the end of a taper is in its way."""
    _, apart = tree.query_nearest(shapely.Point(w.at), return_distance=True, all_matches=False)
    return bool(apart[0] < 0.49 * w.width_mm)
