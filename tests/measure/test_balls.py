"""Widths against maximal balls on a fixed sample of random plates; the long campaign is under tests/long."""

import numpy as np
import pytest

from flatprep.measure.part import MeasuredPart
from tests.measure.balls import disagreements
from tests.measure.random_parts import random_part


@pytest.mark.parametrize("seed", range(8))
@pytest.mark.parametrize(("side", "most"), [(1, 4.0), (-1, 3.0)], ids=["webs", "slots"])
def test_widths_agree_with_balls(seed, side, most):
    measured = MeasuredPart(random_part(np.random.default_rng(seed)))
    found = measured.webs(most) if side > 0 else measured.slots(most)
    contours = [shape.exact for shape in measured.shapes]
    if side < 0:  # holes of a known shape are not measured as slots
        contours = [c for c, shape in zip(contours, measured.shapes, strict=True) if shape.shape == "other"]
        found = [w for w in found if w.contours == (0, 0)]
        contours = contours[:1]
    assert disagreements(found, contours, side=side, most_mm=most) == []
