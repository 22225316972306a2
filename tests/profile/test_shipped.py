"""Every figure that ships, against tables that were written apart from it; every profile names its sources."""

import tomllib

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
def test_kerf_spacing_margin(row):
    p = load_process(row["id"])
    assert (p.kerf_mm, p.spacing_mm, p.margin_mm, p.join_gap_mm) == (
        row["kerf"], row["spacing"], row["margin"], row["join_gap"],
    )  # fmt: skip


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
