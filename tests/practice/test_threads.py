"""Threads in plate: pilots by process and material, engagement, percent, forming."""

from dataclasses import replace

import pytest

from flatprep.practice.threads import (
    drill_for_percent,
    engagement,
    equal_strength_mm,
    forming_drill_mm,
    hardens,
    percent_of_basic,
    percent_of_thread,
    stress_area_mm2,
    tap_pilot,
    taps_directly,
)
from flatprep.profile.hardware.rules import section
from flatprep.profile.hardware.threads import all_threads, find_thread
from flatprep.profile.material_load import load_material
from flatprep.profile.process_load import load_process


def _pilot(drill, process, material, thickness):
    return tap_pilot(drill, load_process(process), load_material(material), thickness)


@pytest.mark.parametrize(
    ("process", "material", "thickness", "drill", "cut"),
    [
        # soft metal to 6 mm is cut to the drill and tapped directly (common practice)
        ("fibre-laser", "mild-steel", 3.0, 4.2, 4.2), ("fibre-laser", "mild-steel", 6.0, 4.2, 4.2),
        ("fibre-laser", "al-5052-h32", 3.0, 4.2, 4.2), ("fibre-laser", "al-6061-t6", 6.0, 5.0, 5.0),
        # thicker, or stainless: 0.5 mm or a tenth of the drill under it, drilled out
        ("fibre-laser", "mild-steel", 6.01, 4.2, 3.7), ("fibre-laser", "stainless-304", 3.0, 4.2, 3.7),
        ("fibre-laser", "mild-steel", 8.0, 10.2, 9.18),
        # edges that harden: 1.25 mm under
        ("fibre-laser", "s355", 4.0, 6.8, 5.55), ("fibre-laser", "wear-plate-500", 5.0, 8.5, 7.25),
        # no heat, no skin
        ("router", "al-6061-t6", 12.0, 5.0, 5.0), ("waterjet", "s355", 10.0, 6.8, 6.8),
        # below the least hole of the process: nothing is cut
        ("fibre-laser", "mild-steel", 8.0, 4.2, None), ("router", "hdpe", 6.0, 2.5, None),
    ],
)  # fmt: skip
def test_pilots(process, material, thickness, drill, cut):
    found = _pilot(drill, process, material, thickness)
    assert found.diameter_mm == (None if cut is None else pytest.approx(cut, abs=1e-9))
    assert found.why


@pytest.mark.parametrize(
    ("own", "thickness", "cut"),
    [
        ({"direct_tap_mm": 0.0}, 3.0, 3.7), ({"direct_tap_mm": 10.0}, 8.0, 4.2), ({"direct_tap_mm": 3.0}, 3.001, 3.7),
        ({"direct_tap_mm": 0.0, "pilot_under_mm": 1.0}, 3.0, 3.2),
    ],
)  # fmt: skip
def test_a_shop_sets_its_own_pilots_in_the_process_profile(own, thickness, cut):
    process = replace(load_process("fibre-laser"), **own)
    found = tap_pilot(4.2, process, load_material("mild-steel"), thickness)
    assert found.diameter_mm == pytest.approx(cut)


def test_a_direct_pilot_is_not_drilled_and_an_under_size_one_is():
    assert not _pilot(4.2, "fibre-laser", "mild-steel", 3.0).drill_out
    assert _pilot(4.2, "fibre-laser", "stainless-304", 3.0).drill_out
    assert _pilot(4.2, "fibre-laser", "mild-steel", 8.0).drill_out


def test_plasma_is_never_tapped_directly():
    assert not taps_directly(load_process("plasma"), load_material("mild-steel"), 3.0)
    assert not taps_directly(load_process("fibre-laser"), None, 3.0)
    assert taps_directly(load_process("waterjet"), None, None)


@pytest.mark.parametrize(
    ("material", "hard"),
    [("mild-steel", False), ("s355", True), ("wear-plate-400", True), ("al-7075-t6", False), ("stainless-304", False)],
)
def test_which_edges_harden(material, hard):
    assert hardens(load_material(material)) is hard


@pytest.mark.parametrize(
    ("thread", "thickness", "material", "fails", "weak"),
    [
        ("M8", 1.0, "mild-steel", True, True),  # 0.8 threads
        ("M8", 2.5, "mild-steel", False, True),  # exactly two threads
        ("M8", 2.499, "mild-steel", True, True),
        ("M4", 2.0, "mild-steel", False, True),  # 2.9 threads: everyday, for light loads
        ("M5", 5.0, "mild-steel", False, False),  # 1 d in steel
        ("M5", 4.99, "mild-steel", False, True),
        ("M5", 7.5, "al-6061-t6", False, False),  # 1.5 d in aluminium
        ("M5", 7.49, "al-6061-t6", False, True),
        ("M6", 12.0, "hdpe", False, False),  # 2 d in plastic
        ("M6", 11.9, "hdpe", False, True),
        ("M6", 18.0, "birch-ply", True, True),  # no machine thread in wood
    ],
)  # fmt: skip
def test_engagement(thread, thickness, material, fails, weak):
    found = engagement(find_thread(thread), thickness, load_material(material))
    assert (found.fails, found.weak) == (fails, weak)
    assert found.threads == pytest.approx(thickness / find_thread(thread).pitch_mm)


@pytest.mark.parametrize(
    ("family", "diameters"),
    [
        ("low-carbon-steel", 1.0), ("stainless", 1.0), ("wear-plate", 1.0), ("titanium", 1.0), ("copper-brass", 1.5),
        ("aluminium", 1.5), ("magnesium", 2.0), ("acrylic", 2.0), ("plastic", 2.0), ("unheard-of", None),
    ],
)  # fmt: skip
def test_engagement_rules(family, diameters):
    """Length over diameter; two engineering pages and memory: steel 1.0, aluminium 1.5, plastics 2.0."""
    found = engagement(find_thread("M10"), 30.0, replace(load_material("mild-steel"), family=family))
    assert found.needed_mm == (None if diameters is None else 10.0 * diameters)


@pytest.mark.parametrize(("strength", "hard"), [(300.0, False), (300.1, True), (None, False)])
def test_steel_above_300_mpa_is_taken_to_harden(strength, hard):
    assert hardens(replace(load_material("mild-steel"), strength_mpa=strength)) is hard


@pytest.mark.parametrize(
    ("family", "forms"),
    [("aluminium", True), ("copper-brass", True), ("low-carbon-steel", True), ("stainless", True),
    ("wear-plate", False),
     ("acrylic", False), ("plastic", False)],
)  # fmt: skip
def test_which_metals_a_thread_may_be_formed_in(family, forms):
    assert (family in section("forming").words("families")) is forms


@pytest.mark.parametrize("family", ["wood", "cardboard", "leather", "rubber", "laminate"])
def test_what_takes_no_machine_thread(family):
    found = engagement(find_thread("M6"), 30.0, replace(load_material("mild-steel"), family=family))
    assert found.fails
    assert found.instead


def test_without_a_material_only_the_threads_count():
    assert engagement(find_thread("M8"), 4.0).needed_mm is None
    assert not engagement(find_thread("M8"), 4.0).weak


@pytest.mark.parametrize("thread", all_threads(), ids=lambda t: t.name)
def test_the_two_percents_differ_by_one_fifth(thread):
    """0.649519 P against 0.541266 P."""
    trade, basic = percent_of_thread(thread, thread.drill_mm), percent_of_basic(thread, thread.drill_mm)
    assert basic / trade == pytest.approx(1.2, abs=1e-5)
    assert 60.0 < trade < 86.0
    assert drill_for_percent(thread, trade) == pytest.approx(thread.drill_mm, abs=1e-9)


@pytest.mark.parametrize("thread", all_threads(), ids=lambda t: t.name)
def test_a_forming_drill_lies_between_minor_and_major(thread):
    assert thread.minor_max_mm < forming_drill_mm(thread) < thread.major_mm
    assert forming_drill_mm(thread, 75.0) < forming_drill_mm(thread)


@pytest.mark.parametrize(
    ("thread", "area"),
    [("M6", 20.1), ("M8", 36.6), ("M12", 84.3), ("M16", 157.0), ("1/4-20 UNC", 0.0318 * 645.16),
    ("1/2-13 UNC", 0.1419 * 645.16)],
)  # fmt: skip
def test_stress_areas(thread, area):
    """ISO 898-1 and ASME B1.1, from memory; printed to three digits (inches: four)."""
    assert stress_area_mm2(find_thread(thread)) == pytest.approx(area, rel=3e-3)


def test_equal_strength_of_half_inch():
    """1/2-13: 0.36 in by an engineering page after Machinery's Handbook, printed to 0.01."""
    assert equal_strength_mm(find_thread("1/2-13 UNC")) / 25.4 == pytest.approx(0.36, abs=0.005)


@pytest.mark.parametrize("thread", [t for t in all_threads() if t.major_mm >= 3], ids=lambda t: t.name)
def test_equal_strength_is_well_under_one_diameter(thread):
    """The handbook's bolts of equal strength need 0.6 to 0.8 d (fine threads a little more)."""
    assert 0.6 < equal_strength_mm(thread) / thread.major_mm < 1.0
