"""Where a contour begins must not matter: places a rounding error before its seam are places on it."""

import numpy as np
import pytest

from flatprep.geom import bulge
from flatprep.measure.boundary import boundary
from flatprep.measure.discs import Pieces
from flatprep.measure.merge import neighbours, way_along


def test_places_just_before_the_seam_lie_on_their_own_contour():
    """A million metres of other contours before it swallow the last digits of a place on a small one."""
    rng = np.random.default_rng(5)
    contours = [bulge.circle(1000.0 * k, 0.0, float(r)) for k, r in enumerate(rng.uniform(0.5, 90.0, 200))]
    b = boundary(contours)
    which = np.arange(len(contours))
    before_seam = np.nextafter(b.total, 0.0)
    seams = np.array([c[0, :2] for c in contours])
    assert b.locate(which, before_seam) == pytest.approx(seams, abs=1e-6)
    assert b.locate(which, np.nextafter(b.total, np.inf)) == pytest.approx(seams, abs=1e-6)
    assert b.locate(which, np.zeros(len(contours))) == pytest.approx(seams, abs=1e-6)


@pytest.mark.parametrize("seed", range(20))
def test_ends_at_one_place_are_paired_whatever_the_last_digit(seed):
    """Corners that face each other, and the edges that begin there, all end at one place: in no order."""
    rng = np.random.default_rng(seed)
    ends = np.array([[10.0, 50.0], [10.0, 50.0], [50.0, 10.0], [10.0, 50.0], [12.0, 48.0], [30.0, 5.0]])

    def pairs(noise):
        place = np.repeat((ends + noise)[:, :, None], 2, axis=2)
        contour = np.zeros(ends.shape, dtype=np.intp)
        pieces = Pieces(None, np.zeros(6), np.zeros(6), contour, contour, place)
        return {tuple(pair) for pair in neighbours(pieces).tolist()}

    plain = pairs(0.0)
    assert {(a, b) for a in range(4) for b in range(a + 1, 4)} <= plain
    assert {(a, 4) for a in range(4)} <= plain
    assert pairs(rng.uniform(-1e-9, 1e-9, ends.shape)) == plain


@pytest.mark.parametrize(
    ("here", "there", "ahead", "length"),
    [
        (10.0, 30.0, True, 20.0),
        (10.0, 30.0, False, 80.0),
        (90.0, 5.0, True, 15.0),
        (77.0, 77.0, True, 0.0),
        (77.0, np.nextafter(77.0, 0.0), True, 0.0),
        (77.0, np.nextafter(77.0, 99.0), True, 0.0),
        (77.0, np.nextafter(77.0, 99.0), False, 0.0),
    ],
)
def test_the_way_along_a_contour(here, there, ahead, length):
    """Places that differ by a rounding error are no round apart."""
    _, found = way_along(np.array([here]), np.array([there]), np.array([100.0]), ahead=ahead)
    assert found == pytest.approx([length], abs=1e-5)
