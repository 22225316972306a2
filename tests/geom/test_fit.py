"""Arcs that stand for splines and ellipses."""

from math import pi

import numpy as np
import pytest
from ezdxf.math import BSpline

from flatprep.geom import bulge
from flatprep.geom.fit import fit_all, fit_arcs
from flatprep.geom.smooth import ellipse, nurbs


def whole_ellipse(a: float, b: float):
    return ellipse(np.array([7.0, -3.0]), np.array([a, 0.0]), np.array([0.0, b]), 0.0, 2 * pi)


def test_ellipse_area_is_pi_a_b():
    made = fit_arcs(whole_ellipse(100, 50), 0.001)[:-1]
    # Green's theorem on the fitted arcs; a ring 0.001 mm wide around the ellipse holds 0.48 mm2
    assert bulge.signed_area(made) == pytest.approx(15707.963268, abs=0.48)


def test_ellipse_with_equal_axes_is_one_circle():
    made = fit_arcs(whole_ellipse(50, 50), 0.001)
    assert len(made) == 3
    assert bulge.as_circle(made[:-1]) == pytest.approx((7, -3, 50))


def test_every_arc_stays_within_tolerance_of_the_ellipse():
    made = bulge.points_along(fit_arcs(whole_ellipse(40, 8), 0.001), closed=False, chord_mm=1e-5)
    x, y = (made - np.array([7.0, -3.0])).T
    # distance to first order: |f| / |grad f|
    f = (x / 40) ** 2 + (y / 8) ** 2 - 1
    gradient = np.hypot(2 * x / 40**2, 2 * y / 8**2)
    assert np.abs(f / gradient).max() < 0.0015


@pytest.mark.parametrize("weights", [None, [1, 2, 0.5, 1.5, 1]])
def test_spline_follows_the_reference_library(weights):
    control = [(0, 0), (10, 30), (40, 10), (50, 60), (80, 0)]
    reference = BSpline(control, order=4, weights=weights)
    ours = fit_arcs(nurbs(3, reference.knots(), np.array(control, dtype=float), weights), 0.001)
    points = np.array([(p.x, p.y) for p in reference.flattening(1e-5)])
    assert bulge.length(ours, closed=False) == pytest.approx(np.hypot(*np.diff(points, axis=0).T).sum(), abs=2e-3)
    from shapely import LineString
    from shapely import points as shapely_points

    line = LineString(bulge.points_along(ours, closed=False, chord_mm=1e-5))
    assert max(line.distance(p) for p in shapely_points(points)) < 0.0012


def test_straight_spline_is_a_line():
    made = fit_arcs(nurbs(3, [0, 0, 0, 0, 1, 1, 1, 1], np.array([[0.0, 0], [1, 1], [2, 2], [3, 3]])), 0.001)
    assert made.tolist() == [[0, 0, 0], [3, 3, 0]]


def test_spline_of_a_quarter_circle_is_one_arc():
    # the rational quadratic that is a quarter circle exactly (Piegl and Tiller, The NURBS Book, 7.3)
    made = fit_arcs(nurbs(2, [0, 0, 0, 1, 1, 1], np.array([[10.0, 0], [10, 10], [0, 10]]), [1, np.sqrt(0.5), 1]), 0.001)
    assert len(made) == 2
    assert made[0, 2] == pytest.approx(np.tan(pi / 8), rel=1e-6)


def test_kink_at_a_full_knot_is_kept():
    control = np.array([[0.0, 0], [5, 5], [10, 0], [10, 10], [20, 10]])
    made = fit_arcs(nurbs(2, [0, 0, 0, 1, 1, 2, 2, 2], control), 0.001)
    assert np.hypot(*(made[:, :2] - [10, 0]).T).min() < 1e-9


@pytest.mark.parametrize(
    ("degree", "knots", "weights"),
    [
        pytest.param(3, [0, 0, 0, 0, 1, 1, 1], None, id="a knot is missing"),
        pytest.param(3, [0, 0, 0, 0, 0, 0, 0, 0], None, id="no span"),
        pytest.param(3, [0, 0, 0, 0, 1, 1, 1, float("nan")], None, id="not a number"),
        pytest.param(3, [0, 0, 0, 0, 1, 1, 1, 1], [1, 0, 1, 1], id="zero weight"),
        pytest.param(3, [0, 0, 0, 0, 1, 1, 1, 1], [1, -5, 1, 1], id="negative weight"),
    ],
)
def test_senseless_splines_are_refused(degree, knots, weights):
    with pytest.raises(ValueError, match=r"knots|weight|spline"):
        nurbs(degree, knots, np.zeros((4, 2)), weights)


def test_points_that_are_no_numbers_are_passed_on_without_a_word(capfd):
    """LAPACK complains of them on stdout, where a document may be written."""
    curve = ellipse(np.zeros(2), np.array([np.nan, 5.0]), np.array([-5.0, 1.0]), 0.0, pi)
    assert not np.isfinite(fit_arcs(curve, 0.001)).all()
    assert capfd.readouterr().out == ""


def test_many_curves_at_once_as_each_by_itself():
    rng = np.random.default_rng(7)
    curves = [
        whole_ellipse(40, 8),
        whole_ellipse(50, 50),
        ellipse(np.zeros(2), np.array([9.0, 2]), np.array([-1.0, 4]), 0.3, 2),
    ]
    for degree in (2, 3, 3, 5):
        n = degree + 1 + int(rng.integers(0, 6))
        knots = [0.0] * degree + np.arange(n - degree + 1.0).tolist() + [float(n - degree)] * degree
        curves.append(nurbs(degree, knots, rng.uniform(0, 60, (n, 2)), rng.uniform(0.5, 2, n).tolist()))
    line = np.column_stack([np.linspace(0, 30, 4), np.linspace(5, 1, 4)])
    curves.insert(4, nurbs(3, [0, 0, 0, 0, 1, 1, 1, 1], line))
    curves.append(nurbs(2, [0, 0, 0, 1, 1, 1], np.array([[10.0, 0], [10, 10], [0, 10]]), [1, np.sqrt(0.5), 1]))
    together = fit_all(curves, 0.001)
    assert [len(xyb) for xyb in together] == [len(fit_arcs(curve, 0.001)) for curve in curves]
    for xyb, curve in zip(together, curves, strict=True):
        assert xyb == pytest.approx(fit_arcs(curve, 0.001), abs=1e-12)


def test_no_curves():
    assert fit_all([], 0.001) == []


@pytest.mark.parametrize("sweep", [0.004, 0.05, 1.0, 3.0, 6.0])
@pytest.mark.parametrize("off", [0.0, 0.0008, 0.003])
def test_arcs_are_told_from_what_is_nearly_one(sweep, off):
    """Points on a circle of radius 100, every other one `off` outside: within 0.001 only while half of `off` is.

    The chords between them rise by 100 (6 / 2000)^2 / 8 = 0.0001 at the most.
    """
    n = 2001
    angle = np.linspace(0.0, sweep, n)
    radius = 100.0 + off * (np.arange(n) % 2)
    xy = np.column_stack([radius * np.cos(angle), radius * np.sin(angle)])
    knots = [0.0, *np.arange(float(n)).tolist(), n - 1.0]
    made = fit_arcs(nurbs(1, knots, xy), 0.001)
    if off <= 0.0008:
        assert len(made) == (2 if sweep <= pi else 3)
    else:
        assert len(made) > 3
