"""Contours that touch: webs of no width at all."""

import numpy as np

from flatprep.measure.boundary import Boundary, envelopes
from flatprep.measure.facing import Chords, Features

TOUCH_MM = 1e-4
"""Corners this near to another contour lie on it."""


def touches(b: Boundary, f: Features) -> Chords:
    """Chords of width 0 where a corner of one contour lies on another."""
    feature = np.full(len(b), -1)
    edges = f.kind < 2
    feature[f.row[edges]] = np.nonzero(edges)[0]
    lo, hi = b.end - TOUCH_MM, b.end + TOUCH_MM
    i, j = b.tree.query(envelopes(np.hstack([lo, hi])))
    other = (b.part[i] == b.part[j]) & (b.contour[i] != b.contour[j]) & (feature[i] >= 0) & (feature[j] >= 0)
    i, j = i[other], j[other]
    near = b.distance(j, b.end[i]) <= TOUCH_MM
    # a corner on a corner is met from both sides and from two edges each: one is enough
    i, first = np.unique(i[near], return_index=True)
    j = j[near][first]
    _, once = np.unique(np.round(b.end[i] / (2 * TOUCH_MM)), axis=0, return_index=True)
    i, j = i[once], j[once]
    at, none, no = b.end[i], np.zeros(len(i)), np.zeros(len(i), dtype=bool)
    return Chords(feature[i], feature[j], none, at, at, at, at, none, none, no, no)
