"""Where a contour begins must not matter: places a rounding error before its seam are places on it."""

import numpy as np
import pytest

from flatprep.geom import bulge
from flatprep.measure.boundary import boundary


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
