"""Masses and moments against handbook rows and closed forms (Machinery's Handbook, moments of plane sections)."""

from fractions import Fraction
from math import cos, pi, sin, sqrt

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from flatprep.cost.mass import bench_removed_mm3, mass_kg, mass_properties
from flatprep.geom.bulge import Similarity
from flatprep.model.drawing import Contour, Part
from flatprep.model.work import Step, StepKind
from flatprep.profile.material_load import load_material
from tests.cost.shapes import disc, rectangle, ring
from tests.reference_tables import table


@pytest.mark.parametrize("row", table("mass_cost")["mass"], ids=lambda r: r["name"])
def test_handbook_masses(row):
    assert mass_kg(row["area"], row["thickness"], row["density"]) == pytest.approx(row["mass"], abs=row["tolerance"])


def test_a_plate_with_four_holes():
    # 200 x 100 x 3 of 6061 (2700 kg/m3) with four holes of 10 mm: (20000 - 100 pi) 3 2700e-9 = 0.159455 kg
    plate = rectangle("plate", 200, 100, [(20, 20, 10), (180, 20, 10), (180, 80, 10), (20, 80, 10)])
    density = load_material("al-6061-t6").density_kg_m3
    assert mass_kg(plate.area_mm2, 3.0, density) == pytest.approx(0.159455, abs=1e-6)


@pytest.mark.parametrize("at", [(0.0, 0.0), (1e4, -3e5), (1e6, 1e6)])
def test_rectangle(at):
    # b h^3 / 12 and h b^3 / 12; gyration sqrt((b^2 + h^2) / 12); the drawing's origin does not matter
    p = mass_properties(rectangle("r", 60.0, 20.0, at=at), 0.5)
    assert p.centroid_mm == pytest.approx((at[0] + 30.0, at[1] + 10.0), rel=1e-12)
    assert p.ixx_mm4 == pytest.approx(60.0 * 20.0**3 / 12.0, rel=1e-9)
    assert p.iyy_mm4 == pytest.approx(20.0 * 60.0**3 / 12.0, rel=1e-9)
    assert p.ixy_mm4 == pytest.approx(0.0, abs=1e-6)
    assert p.polar_mm4 == pytest.approx(p.ixx_mm4 + p.iyy_mm4, rel=1e-12)
    assert p.gyration_mm == pytest.approx(sqrt((60.0**2 + 20.0**2) / 12.0), rel=1e-9)
    assert p.spin_kg_mm2 == pytest.approx(0.5 * (60.0**2 + 20.0**2) / 12.0, rel=1e-9)


@pytest.mark.parametrize(("outside", "bore"), [(80.0, 0.0), (80.0, 22.0), (100.0, 99.0)])
@pytest.mark.parametrize("at", [(0.0, 0.0), (5e5, -5e5)])
def test_disc_and_ring(outside, bore, at):
    # pi (R^4 - r^4) / 4 about a diameter; m (R^2 + r^2) / 2 about the axis
    p = mass_properties(disc("d", outside, bore, at), 1.2)
    big, small = outside / 2.0, bore / 2.0
    assert p.ixx_mm4 == pytest.approx(pi * (big**4 - small**4) / 4.0, rel=1e-9)
    assert p.iyy_mm4 == pytest.approx(pi * (big**4 - small**4) / 4.0, rel=1e-9)
    assert p.spin_kg_mm2 == pytest.approx(1.2 * (big**2 + small**2) / 2.0, rel=1e-9)
    assert p.principal_deg == 0.0


def test_half_disc():
    # half circle on its diameter: centroid 4 r / 3 pi; about the axis along the diameter, through the centroid:
    # (pi / 8 - 8 / (9 pi)) r^4; about the symmetry axis pi r^4 / 8
    r = 30.0
    p = mass_properties(Part("h", Contour(np.array([[r, 0.0, 1.0], [-r, 0.0, 0.0]]))), None)
    assert p.centroid_mm == pytest.approx((0.0, 4.0 * r / (3.0 * pi)), abs=1e-9)
    assert p.ixx_mm4 == pytest.approx((pi / 8.0 - 8.0 / (9.0 * pi)) * r**4, rel=1e-9)
    assert p.iyy_mm4 == pytest.approx(pi * r**4 / 8.0, rel=1e-9)
    assert p.spin_kg_mm2 is None


def test_right_triangle_has_a_product_of_inertia():
    # legs b along x, h along y: b h^3 / 36, h b^3 / 36, -b^2 h^2 / 72
    p = mass_properties(Part("t", ring((0, 0), (40, 0), (0, 30))), None)
    assert p.ixx_mm4 == pytest.approx(40.0 * 30.0**3 / 36.0, rel=1e-9)
    assert p.iyy_mm4 == pytest.approx(30.0 * 40.0**3 / 36.0, rel=1e-9)
    assert p.ixy_mm4 == pytest.approx(-(40.0**2) * 30.0**2 / 72.0, rel=1e-9)


@pytest.mark.parametrize("turn", [0.0, 15.0, 45.0, 60.0, 89.0, 90.0, 120.0, 179.0])
def test_principal_axes_turn_with_the_part(turn):
    # a bar along x has its largest second moment about the y axis: 90 degrees, and `turn` more when it is turned
    bar = rectangle("bar", 60.0, 20.0)
    turned = Part("bar", Contour(Similarity(turn_deg=turn).polyline(bar.outer.xyb)))
    p = mass_properties(turned, None)
    assert p.principal_mm4 == pytest.approx((20.0 * 60.0**3 / 12.0, 60.0 * 20.0**3 / 12.0), rel=1e-9)
    assert -90.0 < p.principal_deg <= 90.0
    off = (p.principal_deg - 90.0 - turn) % 180.0
    assert min(off, 180.0 - off) == pytest.approx(0.0, abs=1e-6)


star = st.lists(st.tuples(st.integers(5, 400), st.integers(5, 85)), min_size=3, max_size=9)


@given(spokes=star, x=st.integers(-1000, 1000), y=st.integers(-1000, 1000))
def test_polygons_against_exact_fractions(spokes, x, y):
    """Second moments of a polygon summed over its triangles in exact fractions (Steiner 1840, triangle formulas)."""
    step = 2.0 * pi / len(spokes)
    points = [(x + round(r * cos(i * step)), y + round(r * sin(i * step))) for i, (r, _) in enumerate(spokes)]
    if len(set(points)) < len(points):
        return
    ixx, iyy, area = exact_moments(points)
    if area <= 1:
        return
    p = mass_properties(Part("s", ring(*points)), None)
    assert p.ixx_mm4 == pytest.approx(float(ixx), rel=1e-9)
    assert p.iyy_mm4 == pytest.approx(float(iyy), rel=1e-9)


def exact_moments(points):
    """∫y² dA and ∫x² dA about the centroid, and the area, from signed triangles to the origin."""
    area = sx = sy = xx = yy = Fraction(0)
    for (x0, y0), (x1, y1) in zip(points, points[1:] + points[:1], strict=True):
        double = Fraction(x0 * y1 - x1 * y0)
        area += double / 2
        sx += double * (x0 + x1) / 6
        sy += double * (y0 + y1) / 6
        xx += double * (x0 * x0 + x0 * x1 + x1 * x1) / 12
        yy += double * (y0 * y0 + y0 * y1 + y1 * y1) / 12
    if area == 0:
        return Fraction(0), Fraction(0), Fraction(0)
    return yy - sy * sy / area, xx - sx * sx / area, abs(area)


@given(turn=st.floats(0.0, 360.0), dx=st.floats(-1e5, 1e5), dy=st.floats(-1e5, 1e5), mirrored=st.booleans())
def test_spin_does_not_depend_on_where_the_part_lies(turn, dx, dy, mirrored):
    slot = np.array([[0, 0, 0], [40, 0, 1.0], [40, 12, 0], [0, 12, 0.3]], dtype=np.float64)
    moved = Similarity(turn_deg=turn, dx=dx, dy=dy, mirrored=mirrored).polyline(slot)
    here, there = (mass_properties(Part("s", Contour(xyb)), 1.0) for xyb in (slot, moved))
    assert there.spin_kg_mm2 == pytest.approx(here.spin_kg_mm2, rel=1e-9)
    assert there.principal_mm4 == pytest.approx(here.principal_mm4, rel=1e-8)


def step(kind, tool=None, depth=None, at=((20.0, 20.0),)):
    return Step(1, kind, tool_dia_mm=tool, depth_mm=depth, at=at)


PLATE = rectangle("plate", 100.0, 50.0, [(20, 20, 4.0), (60, 20, 6.6)])


@pytest.mark.parametrize(
    ("steps", "volume"),
    [
        ([], 0.0),
        # a drawn 4 mm hole drilled to 5: pi / 4 (25 - 16) 3
        ([step(StepKind.DRILL, 5.0)], pi / 4.0 * 9.0 * 3.0),
        # drilled, then reamed: only the last size counts
        ([step(StepKind.DRILL, 4.8), step(StepKind.REAM, 5.0)], pi / 4.0 * 9.0 * 3.0),
        # drilled solid where nothing is drawn
        ([step(StepKind.DRILL, 4.2, at=((40.0, 40.0),))], pi / 4.0 * 4.2**2 * 3.0),
        # a pilot smaller than the drawn hole takes nothing off
        ([step(StepKind.TAP, 3.3)], 0.0),
        # counterbore 11 by 2 over the drawn 6.6
        ([step(StepKind.COUNTERBORE, 11.0, 2.0, ((60.0, 20.0),))], pi / 4.0 * (11.0**2 - 6.6**2) * 2.0),
        # countersink 12.6 over 6.6, 90 degrees: depth 3; frustum pi h / 12 (D2 + D d + d2) less the hole
        (
            [step(StepKind.COUNTERSINK, 12.6, None, ((60.0, 20.0),))],
            pi / 12.0 * 3.0 * (12.6**2 + 12.6 * 6.6 + 6.6**2) - pi / 4.0 * 6.6**2 * 3.0,
        ),
        ([step(StepKind.COUNTERSINK, 5.0, None, ((60.0, 20.0),))], 0.0),
        ([step(StepKind.DEBURR), step(StepKind.DRILL)], 0.0),
    ],
    ids=["none", "opened", "reamed", "solid", "pilot", "counterbore", "countersink", "too-small-sink", "no-size"],
)
def test_what_bench_work_takes_off(steps, volume):
    assert bench_removed_mm3(PLATE, steps, 3.0) == pytest.approx(volume, abs=1e-9)
