"""Estimates as text, JSON and CSV."""

import csv
import io
import json
import re
from dataclasses import replace
from importlib.resources import files

import jsonschema
import pytest

from flatprep.cost.estimate import Ask, Costed, estimate
from flatprep.model.estimate import QuantityBreak
from flatprep.profile.material_load import load_material
from flatprep.profile.process_load import load_process
from flatprep.report.columns import columns
from flatprep.report.csv_table import safe
from flatprep.report.estimate_csv import estimate_csv
from flatprep.report.estimate_json import estimate_document
from flatprep.report.estimate_text import estimate_text
from tests.cost.shapes import layout, rectangle, sheet, stock

SHEET = stock("al3", "100.00", "al-6061-t6")
ITEMS = [
    Costed(rectangle(name, width, 100.0), 2, load_material("al-6061-t6"), 3.0, load_process("fibre-laser"))
    for name, width in (("leaf", 20.0), ("=1+1", 30.0))
]
DONE = estimate(ITEMS, [SHEET], layout(sheet(SHEET, "leaf", "leaf", "=1+1", "=1+1")), Ask(2, 0.05, "EUR"))


def shown(*given):
    """The text with plain spaces between figures and units."""
    return re.sub(r"[\u00a0\u202f]", " ", estimate_text(*given))


def test_json_has_the_fields_of_the_contract_and_nothing_rounded():
    document = json.loads(json.dumps(estimate_document(DONE)))
    assert (document["schema"], document["currency"]) == ("flatprep-estimate/1", "EUR")
    leaf = document["parts"][0]
    assert (leaf["name"], leaf["quantity"], leaf["area_mm2"], leaf["pierces"]) == ("leaf", 2, 2000.0, 1)
    # 20 x 100 x 3 of 2700 kg/m3 weigh 16.2 g; of the 100.00 two fifths go to two of it
    assert leaf["mass_kg"] == pytest.approx(0.0162, rel=1e-12)
    assert (leaf["cut_length_mm"], leaf["cut_time_s"]) == (240.0, None)
    assert (leaf["material_cost"], leaf["line_cost"]) == (pytest.approx(20.0), 40.0)
    assert document["stock"][0]["name"] == "al3"
    assert (document["stock"][0]["count"], document["stock"][0]["price"]) == (1, 100.0)
    # one set is one leaf and one other: 50 x 100 x 3 x 2700e-9
    assert document["mass_kg"] == pytest.approx(0.0405, rel=1e-12)
    assert (document["mass_limit_kg"], document["material_cost"]) == (0.05, 100.0)
    assert document["utilisation"] == pytest.approx(0.02)
    assert document["notes"]


def test_json_keeps_the_published_schema():
    schema = json.loads((files("flatprep.report") / "schemas" / "estimate.json").read_text())
    jsonschema.validate(estimate_document(DONE), schema)
    jsonschema.validate(estimate_document(estimate(ITEMS)), schema)


def test_text_tells_the_mass_after_bench_work_where_it_differs():
    lighter = estimate([replace(ITEMS[0], removed_mm3=3000.0)])
    # 2 x (6000 - 3000) x 2700e-9 = 16.2 g
    assert "after bench work 16.2 g" in shown(lighter)
    assert "after bench work" not in shown(DONE)


def test_json_of_quantity_breaks():
    breaks = (QuantityBreak(5, 2, DONE.material_cost, 20.0, 0.8),)
    assert estimate_document(DONE, breaks)["quantity_breaks"] == [
        {"sets": 5, "sheets": 2, "material_cost": 100.0, "cost_per_set": 20.0, "utilisation": 0.8, "unplaced": 0}
    ]


def test_text_shows_what_a_buyer_asks_for():
    text = shown(DONE)
    for words in ("leaf", "16.2 g", "40.00 EUR", "100.00 EUR", "utilisation 2.0 %", "mass of one set 40.5 g of 50.0 g"):
        assert words in text, words
    assert "9.50 g left" in text
    assert "note: " in text


def test_text_without_prices_says_so():
    text = estimate_text(estimate(ITEMS))
    assert "material cost not known: no layout" in text
    assert "None" not in text


def test_text_of_a_broken_limit_and_of_breaks():
    over = estimate(ITEMS, ask=Ask(2, 0.03))
    breaks = (QuantityBreak(5, 2, None, None, None),)
    text = shown(over, breaks)
    assert "10.5 g too much" in text
    assert "utilisation  material cost  per set" in text


def test_csv_is_one_line_a_part_and_no_formula():
    rows = list(csv.DictReader(io.StringIO(estimate_csv(DONE))))
    assert [row["name"] for row in rows] == ["leaf", "'=1+1"]
    assert (rows[0]["line_cost"], rows[0]["currency"], rows[0]["cut_time_s"]) == ("40.00", "EUR", "")
    assert float(rows[0]["mass_kg"]) == pytest.approx(0.0162, rel=1e-12)


@pytest.mark.parametrize(("text", "kept"), [("leaf", True), ("=x", False), ("+x", False), ("@x", False), ("-x", False)])
def test_names_that_a_spreadsheet_would_run(text, kept):
    assert (safe(text) == text) is kept


def test_columns_line_up():
    assert columns(["a", "bb"], [["xxx", "1"], ["y", "22"]]) == "a    bb\nxxx   1\ny    22"
