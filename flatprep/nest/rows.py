"""A first layout at once: boxes of the pieces in columns, container after container."""

from collections.abc import Sequence

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest.outlines import Ints, Outlines


def flattest_variants(outlines: Outlines, shapes: Ints, tallest: float) -> Ints:
    """For each piece the variant whose box is shortest along x, of those no taller than `tallest`, if there are any."""
    wide, tall = (outlines.rings.box[:, 2:] - outlines.rings.box[:, :2]).T
    wide = np.where(tall <= tallest, wide, np.inf)
    best = [
        int(first + np.argmin(wide[first:last]))
        for first, last in zip(outlines.first[:-1], outlines.first[1:], strict=True)
    ]
    return np.array([best[s] for s in shapes], dtype=np.int64)


def lay_in_columns(boxes: Floats, rect: Sequence[Floats]) -> tuple[Ints, Floats] | None:
    """Lay boxes in columns, widest first; a column starts at the box that does not fit below.

    Parameters
    ----------
    boxes : ndarray, shape (n, 4)
        x0, y0, x1, y1 of each piece about its origin, mm.
    rect
        Rectangles x0, y0, x1, y1 to fill one after the other; the last one may be given endless.

    Returns
    -------
    (home, at) or None
        Rectangle and origin of each piece; None where not all find room.
    """
    home, at = np.zeros(len(boxes), dtype=np.int64), np.zeros((len(boxes), 2))
    wide, tall = (boxes[:, 2:] - boxes[:, :2]).T
    waiting = [int(i) for i in np.argsort(-wide, kind="stable")]
    for k, (x0, y0, x1, y1) in enumerate(rect):
        x = float(x0)
        while waiting and x + wide[waiting[0]] <= x1:
            column, y, left = wide[waiting[0]], float(y0), []
            for i in waiting:
                if y + tall[i] <= y1:
                    home[i], at[i] = k, (x - boxes[i, 0], y - boxes[i, 1])
                    y += float(tall[i])
                else:
                    left.append(i)
            if len(left) == len(waiting):
                return None
            waiting = left
            x += float(column)
        if not waiting:
            return home, at
    return None
