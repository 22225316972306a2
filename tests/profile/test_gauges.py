"""Thickness as people write it; gauges by metal."""

import pytest

from flatprep.base.errors import FlatprepError
from flatprep.profile.gauges import ThicknessError, gauge_mm, gauge_source, inch_stock_mm, parse_thickness_mm
from flatprep.profile.material_load import load_material
from tests.reference_tables import table


@pytest.mark.parametrize("row", table("gauges")["row"], ids=lambda r: str(r["gauge"]))
def test_gauges_against_the_printed_mm_column(row):
    for metal, mm in row["mm"].items():
        assert gauge_mm(row["gauge"], metal) == pytest.approx(
            mm, abs=0.0011
        )  # the page rounds to 0.001 mm, or cuts off


@pytest.mark.parametrize(
    ("text", "material", "mm"),
    [
        ("3", None, 3.0),
        (3, None, 3.0),
        ("3mm", None, 3.0),
        ("0.125in", None, 3.175),
        ("1/8in", None, 3.175),
        ('1/4"', None, 6.35),
        # Machinery's Handbook, 31st edition, page 1453: 16 gauge is three thicknesses; galvanised from memory
        ("16ga", "mild-steel", 0.0598 * 25.4),
        ("16 GA", "stainless-304", 0.0625 * 25.4),
        ("16 gauge", "al-5052-h32", 0.0508 * 25.4),
        ("16ga.", "galvanised-steel", 0.0635 * 25.4),
        ("#12ga", "mild-steel", 0.1046 * 25.4),
    ],
)
def test_thicknesses(text, material, mm):
    assert parse_thickness_mm(text, "mm", load_material(material) if material else None) == pytest.approx(mm, rel=1e-12)


def test_bare_numbers_are_in_the_given_unit():
    assert parse_thickness_mm(0.25, "in") == pytest.approx(6.35, rel=1e-12)
    assert parse_thickness_mm("3mm", "in") == 3.0


@pytest.mark.parametrize(
    ("text", "material", "words"),
    [
        ("-3", None, "not above 0"),
        (0, None, "not above 0"),
        ("1.001m", None, "over a metre"),
        ("thick", None, "not a length"),
        (True, None, "not a length"),
        ("16ga", None, "another thickness in each metal"),
        ("16ga", "acrylic", "not sold by gauge"),
        ("99ga", "mild-steel", "no gauge 99 in steel"),
        ("3ga", "galvanised-steel", "no gauge 3 in galvanised"),
    ],
)
def test_no_thicknesses(text, material, words):
    with pytest.raises(ThicknessError, match=words) as caught:
        parse_thickness_mm(text, "mm", load_material(material) if material else None)
    assert isinstance(caught.value, FlatprepError)
    assert caught.value.remedy


@pytest.mark.parametrize(
    ("material", "thin", "count"),
    [
        # steel from 26 gauge, 0.0179 in; 7 gauge is 0.1793, under 3/16; eleven gauges and eight fractions
        ("mild-steel", 0.0179, 19),
        ("al-6061-t6", 0.0159, 19),
        # 7 gauge stainless is 3/16 itself
        ("stainless-304", 0.0187, 18),
        # galvanised sheet has no 7 gauge in the table
        ("galvanised-steel", 0.0217, 18),
        ("acrylic", 0.0625, 10),
    ],
)
def test_thicknesses_sold_by_inches(material, thin, count):
    sold = inch_stock_mm(load_material(material))
    assert sold[0] == pytest.approx(thin * 25.4)
    assert sold[-1] == 25.4
    assert len(sold) == count
    assert {4.7625, 6.35, 7.9375, 9.525, 12.7, 15.875, 19.05} <= {round(t, 6) for t in sold}
    assert list(sold) == sorted(sold)


def test_the_source_is_told():
    assert "Machinery's Handbook" in gauge_source()
