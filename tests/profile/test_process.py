"""Limits, kerf and cutting time of a process."""

import pickle

import pytest

from flatprep.base.errors import ProfileError
from flatprep.profile.process_load import load_process, parse_process

BARE = {
    "name": "acceptance laser",
    "kind": "laser",
    "kerf": 0.2,
    "limits": {
        "hole_min": 1.0, "hole_to_thickness": 1.0, "web_min": 1.0, "web_to_thickness": 1.0, "slot_min": 0.5,
        "slot_to_thickness": 0.5, "part_min": 30.0, "join_gap": 0.07,
    },
}  # fmt: skip


def process(**extra):
    return parse_process({**BARE, **extra}, "p.toml", "p")


@pytest.mark.parametrize(
    ("feature", "thickness", "error"),
    [
        # a minimum is the larger of NAME_min and NAME_to_thickness x thickness
        ("hole", 3.0, 3.0),
        ("hole", 0.5, 1.0),
        ("web", 2.0, 2.0),
        ("slot", 3.0, 1.5),
        ("slot", 0.8, 0.5),
        ("part", 3.0, 30.0),
        ("part", None, 30.0),
    ],
)
def test_a_bare_profile_works_alone(feature, thickness, error):
    limit = process().limit(feature, "low-carbon-steel", thickness)
    assert limit.error == pytest.approx(error, rel=1e-12)
    assert limit.warn is None
    assert limit.source == "acceptance laser"


def test_what_a_bare_profile_does_not_say_is_unknown():
    p = process()
    assert p.limit("edge", None, 3.0) is None
    assert p.limit("hole", None, None) is None
    assert p.thickness_mm("aluminium") is None
    assert p.cut_seconds("aluminium", 3.0, 100.0, 1) is None
    assert (p.spacing_mm, p.margin_mm, p.join_gap_mm) == (3.0, 8.0, 0.07)
    assert p.windows


def test_bare_router_keeps_its_cutter_and_leaves_windows_alone():
    p = parse_process({"kind": "router", "tool_diameter": 3.0, "limits": {"hole_min": 3.0}}, "r.toml", "r")
    assert (p.kerf_mm, p.tool_diameter_mm, p.windows, p.technology) == (3.0, 3.0, False, "router")
    assert p.spacing_mm == 6.0


@pytest.mark.parametrize(("beam", "technology"), [(None, "laser"), ("fibre", "fibre-laser"), ("co2", "co2-laser")])
def test_technology(beam, technology):
    assert process(**({"beam": beam} if beam else {})).technology == technology


def test_warning_level_has_the_same_keys_and_is_never_under_the_error_level():
    p = process(warn={"hole_to_thickness": 1.5, "web_to_thickness": 0.2, "edge_min": 2.0})
    assert p.limit("hole", None, 4.0).warn == pytest.approx(6.0)
    assert p.limit("web", None, 4.0).warn == p.limit("web", None, 4.0).error == 4.0
    assert p.limit("slot", None, 4.0).warn is None
    assert (p.limit("edge", None, 4.0).error, p.limit("edge", None, 4.0).warn) == (0.0, 2.0)


def test_a_family_goes_before_the_general_key_by_key():
    p = process(family={"aluminium": {"limits": {"hole_to_thickness": 2.0}, "source": "own trial"}})
    assert p.limit("hole", "aluminium", 3.0).error == 6.0
    assert p.limit("hole", "aluminium", 0.2).error == 1.0  # hole_min stays the general one
    assert p.limit("hole", "stainless", 3.0).error == 3.0
    assert p.limit("hole", "aluminium", 3.0).source == "own trial"
    assert p.limit("web", "aluminium", 3.0).source == "acceptance laser"


@pytest.mark.parametrize(
    ("thickness", "error"), [(2.0, 2.0), (2.001, 4.002), (6.0, 12.0), (6.001, 6.001), (30.0, 30.0)]
)
def test_a_band_holds_above_one_thickness_up_to_another(thickness, error):
    p = process(band=[{"above": 2.0, "upto": 6.0, "limits": {"hole_to_thickness": 2.0}}])
    assert p.limit("hole", None, thickness).error == pytest.approx(error, rel=1e-12)


def test_tool_and_kerf_are_further_terms():
    limits = {"slot_min": 0.1, "slot_to_kerf": 2.0, "hole_to_tool": 1.5}
    p = parse_process({"kind": "router", "tool_diameter": 4.0, "kerf": 4.2, "limits": limits}, "r.toml", "r")
    assert p.limit("slot", None, 3.0).error == pytest.approx(8.4)
    assert p.limit("hole", None, 3.0).error == pytest.approx(6.0)


def test_sources_by_feature():
    p = process(sources={"hole": "trial of 3 May"})
    assert p.limit("hole", None, 3.0).source == "trial of 3 May"


def test_kerf_table_is_straight_between_and_flat_beyond():
    p = process(family={"aluminium": {"kerf_table": [[1, 0.1], [3, 0.2]]}})
    assert p.kerf_at("aluminium", 2.0) == pytest.approx(0.15)
    assert p.kerf_at("aluminium", 9.0) == pytest.approx(0.2)
    assert p.kerf_at("aluminium", None) == p.kerf_at("stainless", 2.0) == 0.2


def test_what_holds_without_any_table_of_limits():
    bare = parse_process({"kind": "laser", "kerf_table": [[0, 0.1], [4, 0.3]]}, "p.toml", "p")
    assert (bare.join_gap_mm, bare.kerf_mm, bare.limit("hole", None, 3.0)) == (0.05, 0.0, None)
    assert bare.kerf_at(None, 1.0) == pytest.approx(0.15)


def test_cutting_time_from_feeds():
    # 1000 mm at 2000 mm/min are 30 s, and three pierces of 0.5 s
    p = process(family={"aluminium": {"feed_mm_min": [[1, 3000], [3, 1000]], "pierce_s": [[1, 0.4], [3, 0.6]]}})
    assert p.cut_seconds("aluminium", 2.0, 1000.0, 3) == pytest.approx(31.5)
    assert p.cut_seconds("aluminium", 4.0, 1000.0, 3) is None  # nothing is extrapolated
    assert p.cut_seconds("aluminium", None, 1000.0, 3) is None
    assert p.cut_seconds("stainless", 2.0, 1000.0, 3) is None


def test_profiles_travel_to_worker_processes():
    assert pickle.loads(pickle.dumps(load_process("fibre-laser"))) == load_process("fibre-laser")


@pytest.mark.parametrize(
    ("extra", "words"),
    [
        ({"kind": "lazer"}, 'kind = "lazer": must be one of "laser", "router"'),
        ({"kerf": "thin"}, 'kerf = "thin": must be a length'),
        ({"kerf": -0.1}, "kerf = -0.1: must be a number of 0 or more"),
        ({"krf": 0.2}, "unknown key krf = 0.2"),
        ({"kind": "router"}, "tool_diameter is missing"),
        ({"kind": "router", "tool_diameter": 3, "beam": "co2"}, 'beam = "co2": must be left out'),
        ({"beam": "green"}, 'beam = "green": must be one of "fibre", "co2"'),
        ({"bed": [3000]}, "bed = [3000]: must be a list of 2 numbers"),
        ({"bed": [3000, 0]}, "bed = [3000, 0]: must be two lengths above 0"),
        ({"limits": 3}, "limits = 3: must be a table"),
        ({"limits": {"hole_mim": 1}}, "limits: unknown key hole_mim = 1"),
        ({"limits": {"hole_min": "x"}}, 'hole_min = "x": must be a length'),
        ({"limits": {"hole_to_thickness": -1}}, "hole_to_thickness = -1: must be a number of 0 or more"),
        ({"limits": {"join_gap": "x"}}, 'join_gap = "x": must be a length'),
        ({"warn": {"join_gap": 0.1, "hole": 1}}, "warn: unknown key hole = 1"),
        ({"sources": {"holes": "x"}}, 'sources: unknown key holes = "x"'),
        ({"thickness": [5, 1]}, "thickness = [5, 1]: must be the least and the most"),
        ({"kerf_table": [[2, 0.1], [1, 0.2]]}, "kerf_table"),
        ({"feed_mm_min": [[1, 0]]}, "value above 0"),
        ({"band": [{"above": 3, "upto": 2}]}, "upto = 2"),
        ({"band": [{"over": 3}]}, "band 1: unknown key over = 3"),
        ({"family": {"aluminium": {"limit": {}}}}, "family, aluminium: unknown key limit"),
        ({"family": {"aluminium": 3}}, "aluminium = 3: must be a table"),
        ({"windows": "yes"}, "windows = \"yes\": must be true or false"),
        ({"slat_pitch": 0}, "slat_pitch = 0"),
        ({"direct_tap_up_to": -1}, "direct_tap_up_to = -1"),
        ({"pilot_under": "x"}, 'pilot_under = "x"'),
        ({"machine_rate": -1}, "machine_rate = -1"),
    ],
)  # fmt: skip
def test_mistakes_name_file_key_and_value(extra, words):
    with pytest.raises(ProfileError) as caught:
        process(**extra)
    assert caught.value.message.startswith("p.toml")
    assert words in caught.value.message


def test_the_nearest_key_and_the_allowed_ones_are_named():
    with pytest.raises(ProfileError) as caught:
        process(limits={"hole_mim": 1})
    assert 'did you mean "hole_min"' in caught.value.remedy


def test_own_folders_go_before_the_shipped_ones(tmp_path):
    (tmp_path / "processes").mkdir()
    own = tmp_path / "processes" / "fibre-laser.toml"
    own.write_text('kind = "laser"\nkerf = 0.9\n')
    assert load_process("fibre-laser", (tmp_path,)).kerf_mm == 0.9
    assert load_process("fibre-laser").kerf_mm == 0.2
    loose = tmp_path / "shop.toml"
    loose.write_text('kind = "laser"\nkerf = 0.8\n')
    assert load_process("shop", (tmp_path,)).kerf_mm == 0.8
    assert load_process(str(loose)).id == "shop"


@pytest.mark.parametrize(
    ("name", "words"),
    [
        ("fiber-laser", 'unknown process "fiber-laser"'),
        ("", 'unknown process ""'),
        ("no/such.toml", "no such file"),
        ("../materials/pvc", "no such file"),
    ],
)
def test_unknown_processes(name, words):
    with pytest.raises(ProfileError, match=words):
        load_process(name)


def test_an_unknown_process_gets_the_nearest():
    with pytest.raises(ProfileError) as caught:
        load_process("fiber-laser")
    assert caught.value.remedy == 'did you mean "fibre-laser"?'


def test_how_a_shop_taps_is_its_own():
    assert (process().direct_tap_mm, process().pilot_under_mm) == (None, None)
    own = process(direct_tap_up_to=10, pilot_under="0.02in")
    assert own.direct_tap_mm == 10.0
    assert own.pilot_under_mm == pytest.approx(0.508)


def test_tabs_are_common_practice_where_a_profile_says_nothing_of_them():
    assert (process().tabs.source, process().tabs.count) == ("common practice", 2)


def test_tabs_of_a_profile():
    rule = process(tabs={"count": 3, "width": 1.5, "every": 100, "source": "measured"}).tabs
    assert (rule.count, rule.width(20.0), rule.number(301.0), rule.source) == (3, 1.5, 4, "measured")


@pytest.mark.parametrize(
    ("table", "words"), [({"count": 0}, "count = 0"), ({"width": 0}, "width = 0"), ({"depth": 1}, "unknown key depth")]
)
def test_mistakes_in_tabs(table, words):
    with pytest.raises(ProfileError, match=words):
        process(tabs=table)
