"""Materials by id and designation, what may cut them, how they bend."""

import pytest

from flatprep.base.errors import ProfileError
from flatprep.base.names import plain
from flatprep.profile.material_load import all_materials, load_material, parse_material
from flatprep.profile.process_load import load_process, parse_process

GOOD = {"name": "x", "family": "aluminium", "density": 2700}


@pytest.mark.parametrize(
    ("name", "material"),
    [
        ("mild-steel", "mild-steel"), ("S235", "mild-steel"), ("s 235 jr", "mild-steel"), ("A36", "mild-steel"),
        ("EN AW-5052", "al-5052-h32"), ("5052", "al-5052-h32"), ("AL_5052_H32", "al-5052-h32"),
        ("6061-T6", "al-6061-t6"), ("1.4301", "stainless-304"), ("304", "stainless-304"), ("V2A", "stainless-304"),
        ("AR500", "wear-plate-500"), ("500 HBW", "wear-plate-500"), ("PMMA", "acrylic"), ("vinyl", "pvc"),
        ("Birch Plywood", "birch-ply"), ("PE-HD", "hdpe"),
    ],
)  # fmt: skip
def test_common_designations(name, material):
    assert load_material(name).id == material


def test_no_designation_means_two_materials():
    seen: dict[str, str] = {}
    for material in all_materials():
        for word in {plain(w) for w in (material.id, material.name, *material.aliases)}:
            assert seen.setdefault(word, material.id) == material.id, word


@pytest.mark.parametrize(
    ("name", "nearest"),
    [
        ("mild-stel", "mild-steel"),
        ("al-5052-h23", "al-5052-h32"),
        ("acryllic", "acrylic"),
        ("aluminium", "aluminium 6"),
        ("zzz", "known: abs"),
    ],
)
def test_unknown_materials_get_the_nearest(name, nearest):
    with pytest.raises(ProfileError, match=f'unknown material "{name}"') as caught:
        load_material(name)
    assert nearest in caught.value.remedy


def test_own_materials_go_before_the_shipped_ones(tmp_path):
    (tmp_path / "materials").mkdir()
    (tmp_path / "materials" / "acrylic.toml").write_text('family = "acrylic"\ndensity = 1200\nprice_per_kg = 4.10\n')
    (tmp_path / "materials" / "felt.toml").write_text('family = "leather"\ndensity = 300\naliases = ["wool felt"]\n')
    own = load_material("acrylic", (tmp_path,))
    assert (own.density_kg_m3, str(own.price_per_kg)) == (1200.0, "4.1")
    assert load_material("Wool Felt", (tmp_path,)).id == "felt"


@pytest.mark.parametrize("process", ["fibre-laser", "co2-laser", "router", "plasma", "waterjet"])
@pytest.mark.parametrize("material", ["pvc", "hdpe", "mild-steel", "birch-ply", "acrylic", "al-6061-t6", "cfrp"])
def test_the_verdict_is_that_of_the_technology(process, material):
    found = load_material(material)
    assert found.verdict(load_process(process)) == found.cuts[process]


@pytest.mark.parametrize(
    ("material", "level"),
    [
        # a laser whose beam is not stated: the better of both, but never what either forbids for want of a usable one
        ("mild-steel", "yes"), ("acrylic", "yes"), ("pvc", "never"), ("hdpe", "never"), ("titanium-gr2", "care"),
        ("pom", "care"), ("neoprene", "never"),
    ],
)  # fmt: skip
def test_a_bare_laser(material, level):
    bare = parse_process({"kind": "laser", "kerf": 0.2}, "p.toml", "p")
    assert load_material(material).verdict(bare).level == level


def test_where_no_name_is_near_all_ids_are_told_and_how_to_add_one():
    with pytest.raises(ProfileError) as caught:
        load_material("qqqq")
    assert "abs, acrylic" in caught.value.remedy
    assert "wear-plate-500; one of your own is a file under --profiles DIR" in caught.value.remedy


def test_a_material_that_says_nothing_is_unknown_to_every_process():
    mine = parse_material(GOOD, "m.toml", "m")
    bare = parse_process({"kind": "laser", "kerf": 0.2}, "p.toml", "p")
    assert mine.verdict(bare).level == mine.verdict(load_process("router")).level == "unknown"
    assert mine.bend is None


def test_a_ban_says_why_and_what_harms():
    verdict = load_material("pvc").verdict(load_process("co2-laser"))
    assert verdict.level == "never"
    assert "hydrogen chloride" in verdict.why
    assert "Prohibited Laser Cutter Materials" in verdict.source


def test_bend_limits_in_mm_and_table():
    # handbook table: 6061-T6 at 1/8 in 2.5 t, 5052-H32 1.5 t; 6061 is refused below 1.5 t and wanted at 4 t there
    rule = load_material("al-6061-t6").bend
    assert rule.table_ratio(3.175) == 2.5
    assert rule.limit(3.175).error == pytest.approx(1.5 * 3.175)
    assert rule.limit(3.175).warn == pytest.approx(4.0 * 3.175)
    soft = load_material("al-5052-h32").bend
    assert soft.table_ratio(3.175) == 1.5
    assert (soft.limit(3.175).error, soft.limit(3.175).warn) == pytest.approx((3.175, 1.5 * 3.175))
    # guideline: at least half the thickness and 0.8 mm; one thickness usual
    steel = load_material("mild-steel").bend
    assert (steel.limit(1.0).error, steel.limit(1.0).warn) == pytest.approx((0.8, 1.0))
    assert (steel.limit(6.0).error, steel.limit(6.0).warn) == pytest.approx((3.0, 6.0))
    assert load_material("acrylic").bend.limit(3.0) is None
    assert not load_material("acrylic").bend.bendable
    assert not load_material("al-7075-t6").bend.bendable


@pytest.mark.parametrize(
    ("extra", "words"),
    [
        ({"family": "metal"}, 'family = "metal": must be one of'),
        ({"density": 0}, "density = 0: must be a number above 0"),
        ({"density": 30001}, "density = 30001: must be kilograms per cubic metre"),
        ({"density": "heavy"}, 'density = "heavy"'),
        ({"densty": 1}, "unknown key densty = 1"),
        ({"density_range": [3, 1]}, "density_range = [3, 1]"),
        ({"aliases": "x"}, 'aliases = "x": must be a list of texts'),
        ({"gauge": "brass"}, 'gauge = "brass": must be one of'),
        ({"tap": "easy"}, 'tap = "easy"'),
        ({"strength_kind": "hard"}, 'strength_kind = "hard"'),
        ({"elastic_modulus": -1}, "elastic_modulus = -1"),
        ({"price_per_kg": -2}, "price_per_kg = -2"),
        ({"price_per_kg": 1e30}, "price_per_kg = 1e+30"),
        ({"cut": {"laser": {"verdict": "yes"}}}, "cut: unknown key laser"),
        ({"cut": {"router": {"verdict": "maybe"}}}, 'cut, router: verdict = "maybe"'),
        ({"cut": {"router": {"verdict": "no"}}}, "cut, router: why is missing"),
        ({"bend": {"table": [[2, 1], [1, 2]]}}, "table = [[2, 1], [1, 2]]"),
        ({"bend": {"along_grain": 0.5}}, "along_grain = 0.5"),
        ({"bend": {"radius": 2}}, "bend: unknown key radius = 2"),
        ({"face_grain": 1}, "face_grain = 1: must be true or false"),
    ],
)
def test_mistakes_name_file_key_and_value(extra, words):
    with pytest.raises(ProfileError) as caught:
        parse_material({**GOOD, **extra}, "m.toml", "m")
    assert caught.value.message.startswith("m.toml")
    assert words in caught.value.message
