"""Exact arithmetic on lines and arcs, held against closed forms and against shapely on fine chords."""

import tomllib
from math import cos, pi, radians, sin, tan
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from shapely.geometry import Polygon

from flatprep.geom import bulge
from flatprep.geom.moments import moments

REFERENCE = tomllib.loads((Path(__file__).parents[1] / "reference" / "geometry.toml").read_text())
AREAS = {row["name"]: row["value"] for row in REFERENCE["area"]}

SQUARE = np.array([[0.0, 0, 0], [10, 0, 0], [10, 10, 0], [0, 10, 0]])


def stadium(length: float, radius: float) -> np.ndarray:
    """Two half circles joined by straight sides of `length`."""
    return np.array([[0, -radius, 0], [length, -radius, 1.0], [length, radius, 0], [0, radius, 1.0]], dtype=float)


def fan(turns: list[float], radii: list[float], bulges: list[float]) -> np.ndarray:
    """A star-shaped polyline about the origin: never crossing itself while the bulges stay small."""
    angles = np.cumsum(turns) / np.sum(turns) * 2 * pi
    return np.column_stack([radii * np.cos(angles), radii * np.sin(angles), bulges])


fans = st.integers(3, 8).flatmap(
    lambda n: st.tuples(
        st.lists(st.floats(0.5, 1.5), min_size=n, max_size=n),
        st.lists(st.floats(20, 60), min_size=n, max_size=n),
        st.lists(st.floats(-0.15, 0.15), min_size=n, max_size=n),
    )
)


@pytest.mark.parametrize("row", REFERENCE["bulge"], ids=lambda r: str(r["angle_deg"]))
def test_bulge_of_an_arc(row):
    made = bulge.arc(3, 4, 7, 0.3, radians(row["angle_deg"]))
    assert len(made) == 2
    assert made[0, 2] == pytest.approx(row["value"], rel=1e-12)


def test_area_of_circle():
    assert bulge.signed_area(bulge.circle(1000, -2000, 5)) == pytest.approx(AREAS["circle of radius 5"], rel=1e-12)


def test_area_of_two_vertex_polyline():
    lens = np.array([[0.0, 0, 1], [10, 0, 1]])
    assert bulge.signed_area(lens) == pytest.approx(AREAS["two-vertex polyline 10 mm across, bulges 1"], rel=1e-12)


def test_area_left_over_in_a_corner():
    corner = np.array([[0.0, 0, 0], [3, 0, tan(pi / 8) * -1], [0, 3, 0]])
    # the arc about (3, 3) leaves the corner's leftover
    expected = AREAS["fillet left over in a right corner, radius 3"]
    assert bulge.signed_area(corner) == pytest.approx(expected, rel=1e-9)


def test_area_of_stadium_and_its_reverse():
    shape = stadium(20, 4)
    expected = 20 * 8 + pi * 16
    assert bulge.signed_area(shape) == pytest.approx(expected, rel=1e-12)
    assert bulge.signed_area(bulge.reverse(shape, closed=True)) == pytest.approx(-expected, rel=1e-12)


def test_flat_arc_keeps_its_digits():
    # an arc of radius 1e6 over a chord of 1: segment area = r^2/2 (t - sin t) ~ r^2 t^3 / 12
    t = 1e-6
    shape = np.array([[0.0, 0, tan(t / 4)], [1, 0, 0], [0.5, 5, 0]])
    chord = 1.0
    radius = chord / (2 * sin(t / 2))
    assert bulge.signed_area(shape) - 2.5 == pytest.approx(radius**2 * t**3 / 12, rel=1e-6)


def test_length_of_stadium():
    assert bulge.length(stadium(20, 4), closed=True) == pytest.approx(40 + 2 * pi * 4, rel=1e-12)


def test_length_of_open_line_ignores_last_bulge():
    assert bulge.length(np.array([[0.0, 0, 0], [3, 4, 0.7]]), closed=False) == pytest.approx(5)


def test_bounds_reach_the_top_of_arcs():
    assert bulge.bounds(stadium(20, 4), closed=True) == pytest.approx((-4, -4, 24, 4))
    quarter = bulge.arc(0, 0, 10, radians(45), radians(90))
    assert bulge.bounds(quarter, closed=False) == pytest.approx(
        (-10 * cos(pi / 4), 10 * sin(pi / 4), 10 * cos(pi / 4), 10)
    )


def test_wide_arc_is_split_and_stays_the_same():
    wide = np.array([[0.0, 0, tan(radians(300) / 4)], [5, 0, 0]])
    split = bulge.split_arcs(wide, closed=False)
    assert np.abs(split[:, 2]).max() <= 1.0
    assert bulge.length(split, closed=False) == pytest.approx(bulge.length(wide, closed=False), rel=1e-12)


@pytest.mark.parametrize(
    ("shape", "area", "xx", "yy"),
    [
        pytest.param(SQUARE, 100.0, 10**4 / 12, 10**4 / 12, id="square: b^4/12"),
        pytest.param(bulge.circle(50, -30, 5), pi * 25, pi * 5**4 / 4, pi * 5**4 / 4, id="circle: pi r^4/4"),
    ],
)
def test_second_moments_about_centroid(shape, area, xx, yy):
    m = moments(shape)
    assert m.area == pytest.approx(area, rel=1e-12)
    assert m.about_centroid() == pytest.approx((xx, yy, 0.0), rel=1e-9, abs=1e-6)


def test_half_circle_centroid():
    half = np.array([[-6.0, 0, 0], [6, 0, 1.0]])
    assert moments(half).centroid == pytest.approx((0, 4 * 6 / (3 * pi)), abs=1e-9)


@given(fans)
def test_measures_agree_with_fine_chords(parts):
    shape = fan(*parts)
    points = bulge.points_along(shape, closed=True, chord_mm=1e-4)
    poly = Polygon(points)
    m = moments(shape)
    # chords lie within 1e-4 mm of the arcs, all along
    assert m.area == pytest.approx(poly.area, abs=1e-4 * poly.length)
    assert m.area == pytest.approx(abs(bulge.signed_area(shape)), rel=1e-9)
    assert m.centroid == pytest.approx((poly.centroid.x, poly.centroid.y), abs=1e-3)
    assert bulge.length(shape, closed=True) == pytest.approx(poly.length, rel=1e-5)
    assert bulge.bounds(shape, closed=True) == pytest.approx(poly.bounds, abs=2e-4)


@given(fans, st.floats(-720, 720), st.booleans())
def test_motion_keeps_area_and_length(parts, turn, mirrored):
    shape = fan(*parts)
    moved = bulge.Similarity(turn_deg=turn, dx=3, dy=-8, mirrored=mirrored).polyline(shape)
    assert abs(bulge.signed_area(moved)) == pytest.approx(abs(bulge.signed_area(shape)), rel=1e-9)
    assert (bulge.signed_area(moved) * bulge.signed_area(shape) < 0) == mirrored


def test_placement_mirrors_then_turns_then_moves():
    motion = bulge.Similarity(turn_deg=90, dx=100, dy=10, mirrored=True)
    assert motion.points(np.array([[2.0, 1.0]])).tolist() == [[99.0, 8.0]]


def test_quarter_turns_are_exact():
    assert bulge.Similarity(turn_deg=270).matrix().tolist() == [[0.0, 1.0], [-1.0, 0.0]]


def test_chords_stay_within_their_distance():
    points = bulge.points_along(bulge.circle(0, 0, 100), closed=True, chord_mm=0.01)
    middles = (points + np.roll(points, -1, axis=0)) / 2
    sag = 100 - np.hypot(*middles.T)
    assert 0.005 < sag.max() <= 0.0101


def test_circle_is_recognised_and_an_obround_is_not():
    assert bulge.as_circle(bulge.circle(3, 4, 5)) == pytest.approx((3, 4, 5))
    quarters = np.vstack([bulge.arc(3, 4, 5, k * pi / 2, pi / 2)[:-1] for k in range(4)])
    assert bulge.as_circle(quarters) == pytest.approx((3, 4, 5))
    assert bulge.as_circle(stadium(0.01, 4)) is None
