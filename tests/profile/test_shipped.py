"""Every figure that ships, against tables that were written apart from it; every profile names its sources."""

import tomllib
from dataclasses import replace
from itertools import pairwise

import pytest

from flatprep.profile.material import FAMILIES, TECHNOLOGIES
from flatprep.profile.material_load import all_materials, load_material
from flatprep.profile.process import FEATURES
from flatprep.profile.process_load import load_process
from flatprep.profile.where import SHIPPED, ids
from tests.reference_tables import table

LIMITS = table("process_limits")


@pytest.mark.parametrize(
    "row", LIMITS["row"], ids=lambda r: f"{r['process']}-{r['family']}-{r['feature']}-{r['thickness']}"
)
def test_least_sizes(row):
    limit = load_process(row["process"]).limit(row["feature"], row["family"], row["thickness"])
    assert limit.error == pytest.approx(row["error"], abs=1e-9), row["rule"]
    assert limit.warn == pytest.approx(row["warn"], abs=1e-9), row["rule"]
    assert limit.source


@pytest.mark.parametrize("row", LIMITS["thickness"], ids=lambda r: f"{r['process']}-{r['family']}")
def test_thickness_ranges(row):
    assert load_process(row["process"]).thickness_mm(row["family"]) == (row["least"], row["most"])


@pytest.mark.parametrize("row", LIMITS["process"], ids=lambda r: r["id"])
def test_kerf_spacing_margin_bed(row):
    p = load_process(row["id"])
    given = (p.kerf_mm, p.spacing_mm, p.margin_mm, p.join_gap_mm, p.bed_mm, p.slat_pitch_mm or 0)
    assert given == (*(row[k] for k in ("kerf", "spacing", "margin", "join_gap")), tuple(row["bed"]), row["slat_pitch"])


@pytest.mark.parametrize("name", ["fibre-laser", "co2-laser"])
def test_a_slot_is_never_under_two_kerfs(name):
    assert replace(load_process(name), kerf_mm=1.0).limit("slot", None, 0.6).error == 2.0


def test_a_wooden_web_is_never_under_half_the_cutter():
    assert replace(load_process("router"), tool_diameter_mm=10.0).limit("web", "wood", 6.0).error == 5.0


@pytest.mark.parametrize("row", table("kerf")["row"], ids=lambda r: f"{r['process']}-{r['family']}-{r['thickness']}")
def test_typical_kerf(row):
    assert load_process(row["process"]).kerf_at(row["family"], row["thickness"]) == pytest.approx(row["kerf"])


@pytest.mark.parametrize("row", table("materials")["row"], ids=lambda r: r["id"])
def test_densities_and_verdicts(row):
    material = load_material(row["id"])
    assert material.density_kg_m3 == row["density"]
    assert material.density_range == tuple(row["range"])
    levels = [material.cuts[t].level if t in material.cuts else "unknown" for t in TECHNOLOGIES]
    assert " ".join(levels) == row["cut"]


@pytest.mark.parametrize("row", table("mechanical")["row"], ids=lambda r: r["id"])
def test_modulus_and_strength(row):
    material = load_material(row["id"])
    assert (material.e_gpa, material.strength_mpa) == (row["e"], row["strength"])


@pytest.mark.parametrize("row", table("stock_thickness")["row"], ids=lambda r: r["id"])
def test_thicknesses_sold(row):
    assert list(load_material(row["id"]).stock_mm) == row["thicknesses"]


@pytest.mark.parametrize("row", table("bend_limits")["row"], ids=lambda r: f"{r['id']}-{r['thickness']}")
def test_least_bend_radii(row):
    rule = load_material(row["id"]).bend
    limit = rule.limit(row["thickness"])
    assert (limit.error, limit.warn) == pytest.approx((row["refuse"], row["prefer"]), abs=1e-6), row["rule"]
    assert rule.along_grain == row["along_grain"]


def between(rows, group, value):
    """The middle of neighbouring rows of one table: straight between them."""
    for one, two in pairwise(rows):
        if all(one[key] == two[key] for key in group) and one["thickness"] < two["thickness"]:
            middle = {**one, "thickness": (one["thickness"] + two["thickness"]) / 2}
            yield {**middle, value: (one[value] + two[value]) / 2}


@pytest.mark.parametrize("row", list(between(table("bend_radius")["row"], ("material",), "ratio")), ids=str)
def test_bend_radii_between_the_rows(row):
    assert load_material(row["material"]).bend.table_ratio(row["thickness"]) == pytest.approx(row["ratio"])


@pytest.mark.parametrize("row", list(between(table("kerf")["row"], ("process", "family"), "kerf")), ids=str)
def test_kerf_between_the_rows(row):
    assert load_process(row["process"]).kerf_at(row["family"], row["thickness"]) == pytest.approx(row["kerf"])


@pytest.mark.parametrize("row", table("bend_radius")["row"], ids=lambda r: f"{r['material']}-{r['thickness']}")
def test_published_bend_radii(row):
    assert load_material(row["material"]).bend.table_ratio(row["thickness"]) == pytest.approx(row["ratio"])


def test_every_shipped_material_stands_in_the_reference():
    assert {row["id"] for row in table("materials")["row"]} == set(ids("materials"))
    with_modulus = {m.id for m in all_materials() if m.e_gpa is not None}
    assert {row["id"] for row in table("mechanical")["row"]} == with_modulus


@pytest.mark.parametrize("name", ids("processes"))
def test_every_process_names_the_source_of_each_limit(name):
    p = load_process(name)
    assert p.source
    assert p.caution
    assert p.power, "the power class belongs to the figures"
    for family in (None, *p.families):
        for feature in FEATURES:
            limit = p.limit(feature, family, 3.0)
            assert limit is None or len(limit.source) > 10
    assert all(family in FAMILIES for family in p.families)
    assert all(terms.source for terms in p.families.values())


@pytest.mark.parametrize("name", ids("materials"))
def test_every_material_names_its_sources(name):
    data = tomllib.loads((SHIPPED / "materials" / f"{name}.toml").read_text())
    assert data["source"]
    assert data["bend"]["source"]
    assert all(verdict["source"] for verdict in data["cut"].values())
    assert ("elastic_modulus" in data) <= ("mechanical_source" in data)
    assert ("stock" in data) <= ("stock_source" in data)
    low, high = data["density_range"]
    assert low <= data["density"] <= high
    assert "price_per_kg" not in data, "prices are the user's"


def test_a_bend_is_never_refused_above_what_is_preferred():
    for material in all_materials():
        if material.bend is None:
            continue
        for thickness in (0.5, 1.0, 2.0, 3.0, 5.0, 8.0, 12.0):
            limit = material.bend.limit(thickness)
            assert limit is None or limit.warn is None or limit.error <= limit.warn


def test_profiles_name_no_maker():
    text = "".join(file.read_text() for file in SHIPPED.rglob("*.toml")).lower()
    for word in ("hardox", "plexiglas", "delrin", "perspex", "trespa", "teflon", "lexan", "corian", "strenx"):
        assert word not in text


@pytest.mark.parametrize(("alloy", "taken_as"), [("al-5754-h22", "al-5052-h32"), ("al-6082-t6", "al-6061-t6")])
def test_alloys_that_are_bent_as_their_neighbours(alloy, taken_as):
    one, other = load_material(alloy).bend, load_material(taken_as).bend
    assert replace(one, note="", source="") == replace(other, note="", source="")
    assert "taken" in one.source


def test_the_two_places_that_hold_bend_radii_agree():
    data = tomllib.loads((SHIPPED / "hardware" / "bend_radius.toml").read_text())
    checked = 0
    for material in all_materials():
        for row in data["row"]:
            if row["kind"] == "least" and row["alloy"] in material.aliases and material.bend.table:
                given = tuple(zip(row["thickness"], row["ratio"], strict=True))
                assert material.bend.table == given, material.id
                checked += 1
    assert checked >= 6
