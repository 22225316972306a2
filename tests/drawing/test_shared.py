"""One cut for two parts: lengths by hand."""

import numpy as np
import pytest
import shapely

from flatprep.drawing.forms import with_kerf
from flatprep.drawing.shared import shared_cuts
from flatprep.geom.bulge import reverse
from flatprep.model.drawing import Contour, Part
from flatprep.model.layout import Placement, SheetLayout

KERF = 0.2
OUTLINE = np.array([[0.0, 0], [300, 0], [300, 200], [0, 200]])


def ring(x, y, w, h):
    return np.array([[x, y, 0.0], [x + w, y, 0], [x + w, y + h, 0], [x, y + h, 0]])


BOX = Part("box", Contour(ring(0, 0, 40, 20)))
FRAME = Part("frame", Contour(ring(0, 0, 80, 60)), (Contour(reverse(ring(20, 20, 40.4, 20.4), closed=True)),))


def found(*places, turn=0.0, mirrored=False):
    """Shared cuts of boxes at places, and the cut lines as they would be without sharing."""
    laid = [Placement(part, k, turn, mirrored, x, y) for k, (part, x, y) in enumerate(places, 1)]
    sheet = SheetLayout("al3", "al-5052-h32", 3.0, OUTLINE, (), 100.0, 0.1, tuple(laid))
    paths = {p.name: with_kerf(p, KERF) for p in (BOX, FRAME)}
    every = [shapely.LinearRing(p.motion.polyline(c.xyb)[:, :2]) for p in laid for c in paths[p.part].contours]
    return shared_cuts(sheet, paths), every


def line(curve):
    return (shapely.LinearRing if curve.closed else shapely.LineString)(curve.xyb[:, :2])


@pytest.mark.parametrize(
    ("places", "stretches", "saved"),
    [
        pytest.param([("box", 0, 0), ("box", 40.2, 0)], 1, 20.0, id="side by side"),
        pytest.param([("box", 0, 0), ("box", 15, 20.2)], 1, 25.0, id="one above, 15 aside"),
        pytest.param([("box", 0, 0), ("box", 40.2, 0), ("box", 0, 20.2), ("box", 40.2, 20.2)], 4, 120.0, id="four"),
        pytest.param([("box", 0, 0), ("box", 40.25, 0)], 0, 0.0, id="0.05 too far"),
        pytest.param([("box", 0, 0), ("box", 40.21, 0)], 1, 20.0, id="within a hundredth"),
        pytest.param([("box", 0, 0), ("box", 40.2, 18)], 0, 0.0, id="2 mm in common are not worth it"),
        pytest.param([("frame", 0, 0), ("box", 20.2, 20.2)], 4, 120.0, id="in a window, all around"),
    ],
)
@pytest.mark.parametrize(("turn", "mirrored"), [(0.0, False), (90.0, False), (180.0, True)])
def test_what_is_shared(places, stretches, saved, turn, mirrored):
    """Turned sheets: the same places, turned as a whole."""
    c, s = np.cos(np.radians(turn)), np.sin(np.radians(turn))
    sign = -1 if mirrored else 1
    moved = [(n, c * sign * x - s * y, s * sign * x + c * y) for n, x, y in places]
    shared, every = found(*moved, turn=turn, mirrored=mirrored)
    assert (shared.stretches, shared.saved_mm) == (stretches, pytest.approx(saved, abs=1e-6))
    lines = [line(curve) for curve in shared.lines]
    assert sum(one.length for one in lines) == pytest.approx(sum(one.length for one in every) - saved, abs=1e-6)
    left = shapely.union_all(every).difference(shapely.union_all(lines).buffer(0.02))
    assert left.length == pytest.approx(0.0, abs=1e-6)  # everything is cut, by one or the other


def test_the_part_cut_first_keeps_its_contour():
    shared, _ = found(("box", 0, 0), ("box", 40.2, 0))
    assert [curve.closed for curve in shared.lines] == [True, False]


def test_a_sheet_of_one_part_shares_nothing():
    shared, _ = found(("frame", 0, 0))
    assert (shared.stretches, len(shared.lines)) == (0, 2)
