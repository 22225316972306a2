"""The planar graph's tools."""

import pytest
from shapely.geometry import GeometryCollection, LineString, box

from flatprep.drawing.planar import areal


@pytest.mark.parametrize("extra", [[LineString([(0, 0), (0, 10)])], [LineString([(3, 3), (4, 9)]), box(20, 0, 25, 2)]])
def test_only_what_has_an_area_goes_on(extra):
    """The next overlay refuses a mixture of areas and lines."""
    mixed = GeometryCollection([box(0, 0, 10, 10), *extra])
    whole = areal(mixed)
    assert whole.area == pytest.approx(100 + 10 * (len(extra) - 1))
    assert whole.union(box(50, 0, 60, 10), grid_size=0.001).area == pytest.approx(whole.area + 100)


def test_an_area_is_left_as_it_is():
    shape = box(0, 0, 10, 10)
    assert areal(shape) is shape
