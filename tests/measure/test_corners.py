"""Inside corners against the geometry of a circle in a corner."""

import numpy as np
import pytest

from flatprep.measure.corners import leftover_gap_mm
from flatprep.measure.part import MeasuredPart
from tests.measure.shapes import circle, obround, part, path, polygon, rectangle

PLATE = rectangle(0, 0, 100, 60)


@pytest.mark.parametrize(
    ("angle_deg", "gap"),
    [
        # r (1 / sin(θ / 2) - 1): 0.41421 r at 90 degrees; hexagon corner, r 3: 0.464102 (worked check W088, exact)
        (90.0, 3 * 0.414214),
        (120.0, 0.464102),
        (60.0, 3.0),
    ],
)
def test_leftover_gap(angle_deg, gap):
    assert leftover_gap_mm(3.0, 0.0, np.radians(180 - angle_deg)) == pytest.approx(gap, abs=2e-6)


def corners(*holes, outer=PLATE, tool=1.5, gap=0.05):
    return MeasuredPart(part(outer, *holes)).inside_corners(tool, gap)


def test_square_hole_has_four_and_a_plate_none():
    found = corners(rectangle(40, 20, 20, 20))
    assert sorted(c.at for c in found) == [(40, 20), (40, 40), (60, 20), (60, 40)]
    assert {c.radius_mm for c in found} == {0.0}
    assert [c.gap_mm for c in found] == pytest.approx([1.5 * (np.sqrt(2) - 1)] * 4)
    assert {c.contour for c in found} == {1}


@pytest.mark.parametrize(("radius", "count"), [(1.0, 4), (1.4985, 0), (1.5, 0), (2.5, 0)])
def test_fillets_by_their_radius(radius, count):
    found = corners(rectangle(40, 20, 20, 20, radius), gap=0.001)
    assert len(found) == count
    assert all(c.radius_mm == pytest.approx(radius) for c in found)


def test_notch_in_the_outline_counts():
    outer = path((0, 0), (40, 0), (40, 20), (60, 20), (60, 0), (100, 0), (100, 60), (0, 60))
    assert sorted(c.at for c in corners(outer=outer)) == [(40, 20), (60, 20)]


def test_round_things_have_none():
    assert corners(circle(30, 30, 5), polygon(60, 30, 8, 96), obround(80, 50, 20, 4)) == ()
