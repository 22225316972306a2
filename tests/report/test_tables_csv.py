"""CSV tables: what a spreadsheet reads back."""

import csv
import io
from dataclasses import replace

from flatprep.report.tables_csv import findings_csv, parts_csv, sheets_csv


def rows(text: str) -> list[dict[str, str]]:
    assert text.endswith("\r\n")
    return list(csv.DictReader(io.StringIO(text, newline="")))


def test_parts(bundle):
    leaf, tray = rows(parts_csv(bundle))
    assert (leaf["part"], leaf["quantity"], leaf["quantity_opposite"]) == ("leaf", "4", "2")
    assert (leaf["width_mm"], leaf["height_mm"]) == ("120.0", "60.0")
    # 120 x 60 less the circles of 5 and 11.5 mm
    assert abs(float(leaf["area_mm2"]) - (7200 - 3.141592653589793 * (2.5**2 + 5.75**2))) < 1e-6
    assert (leaf["line_cost"], leaf["errors"], leaf["warnings"], leaf["notes"]) == ("15.00", "1", "1", "1")
    assert (tray["mass_kg"], tray["line_cost"]) == ("", "")


def test_findings_and_unreadable_drawings(bundle):
    table = rows(findings_csv(bundle))
    assert [row["rule"] for row in table] == ["small-hole", "unclear-hole", "unknown-units", "unreadable"]
    assert (table[0]["measured"], table[0]["limit"], table[0]["x_mm"]) == ("5.0", "6.0", "20.0")
    assert (table[2]["x_mm"], table[2]["number"]) == ("", "3")
    assert table[3]["drawing"] == "bad.dxf"


def test_a_sheet_adds_up_to_its_pieces(bundle):
    table = rows(sheets_csv(bundle))
    assert [(row["part"], row["pieces"]) for row in table] == [("leaf", "2"), ("seed tray", "1")]
    assert (table[0]["length_mm"], table[0]["width_mm"]) == ("600.0", "300.0")


def test_a_name_is_no_formula(bundle):
    hostile = replace(bundle, cards=(replace(bundle.cards[0], name='=HYPERLINK("x")', note="+1", drawing="@a,b\n"),))
    (row,) = rows(parts_csv(hostile))
    assert (row["part"], row["note"], row["drawing"]) == ('\'=HYPERLINK("x")', "'+1", "'@a,b\n")
