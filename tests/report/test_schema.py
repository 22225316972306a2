"""The schemas are sound, and each refuses what its document must not hold."""

import copy

import pytest
from jsonschema import Draft202012Validator

from flatprep.report.schema import KINDS, schema

# documents as the interface states them
GOOD = {
    "lint": {
        "schema": "flatprep-lint/1",
        "drawings": [
            {
                "file": "leaf.dxf", "units": "mm", "units_from": "header",
                "parts": [{"name": "leaf", "area_mm2": 1.0, "cut_length_mm": 4.0, "holes": 0, "pierces": 1,
                           "size_mm": [1.0, 1.0], "centroid_mm": [0.5, 0.5], "mass_kg": None}],
                "findings": [{"rule": "thin-web", "severity": "error", "part": "leaf", "message": "thin",
                              "at": [0.0, 0.0], "measured": 0.8, "limit": 1.0, "unit": "mm", "remedy": "",
                              "handles": ["2F"]}],
            }
        ],
        "unreadable": [{"file": "x.dxf", "message": "broken"}],
    },
    "layout": {
        "schema": "flatprep-layout/1", "spacing_mm": 3.0, "margin_mm": 8.0,
        "parts": [{"name": "leaf", "drawing": "leaf.dxf", "units": "mm", "quantity": 1, "layers": ["0"],
                   "at": [3.0, 3.0]}],
        "sheets": [{"file": "sheet-01.dxf", "stock": "al3", "material": "al", "thickness_mm": 3.0,
                    "outline": [[0, 0], [1, 0], [1, 1]], "holes": [], "used_length_mm": 0.0, "utilisation": 0.0,
                    "placements": [{"part": "leaf", "copy": 1, "turn_deg": 90.0, "mirrored": False,
                                    "dx": 0.0, "dy": 0.0}]}],
        "unplaced": [{"part": "leaf", "count": 1, "why": "too large"}],
    },
    "checklist": {
        "schema": "flatprep-checklist/1",
        "parts": [{"name": "leaf", "quantity": 12,
                   "steps": [{"order": 1, "kind": "tap", "size": "M5", "tool_dia_mm": 4.2, "depth_mm": None, "count": 4,
                              "at": [[10.0, 12.0]], "cut_dia_mm": 4.2, "side": None, "note": "", "caution": ""}]}],
        "cautions": [],
    },
    "estimate": {
        "schema": "flatprep-estimate/1", "currency": None,
        "parts": [{"name": "leaf", "quantity": 12, "area_mm2": 1.0, "mass_kg": None, "cut_length_mm": 1.0, "pierces": 1,
                   "material_cost": None, "line_cost": None, "cut_time_s": None}],
        "stock": [{"name": "al3", "count": 1, "price": None}],
        "mass_kg": None, "mass_limit_kg": None, "material_cost": None, "utilisation": None,
    },
    "alternatives": {
        "schema": "flatprep-alternatives/1", "currency": None,
        "parts": [{"part": "leaf", "material": "mild-steel", "thickness_mm": 4.0, "mass_kg": 1.0, "cost": None,
                   "notes": [],
                   "options": [{"basis": "stiffness", "material": "al", "material_name": "aluminium", "needed_mm": 5.8,
                                "thickness_mm": 6.0, "mass_kg": None, "mass_ratio": 0.5, "cost": None,
                                "deflection_ratio": 0.9, "strength_ratio": None, "process": None, "caution": "",
                                "findings": None, "note": ""}]}],
    },
    "book": {
        "schema": "flatprep-book/1", "rack": "rack",
        "sheets": [
            {"sheet": 1, "stock": "al3", "taken": "counted", "left": 0,
             "offcut": {"label": "R0001", "drawing": "R0001.dxf", "material": "al", "thickness_mm": 3.0,
                        "rectangle_mm": [200.0, 100.0]}},
            {"sheet": 2, "stock": "R0007", "taken": "remnant", "left": None, "offcut": None},
        ],
    },
    "coupon": {
        "schema": "flatprep-coupon/1", "cautions": [],
        "coupons": [{"file": "coupon.dxf", "material": "al", "thickness_mm": 3.0, "process": "router", "left_out": [],
                     "trials": [{"kind": "slot", "mate": "a sheet", "wanted_mm": 3.0, "sizes_mm": [2.9, 3.0],
                                 "parts": ["leaf"]}]}],
    },
    "repair": {
        "schema": "flatprep-repair/1", "file": "a.dxf", "out": "b.dxf", "units_before": "mm",
        "parts": [{"name": "leaf", "area_mm2": 1.0, "cut_length_mm": 4.0, "holes": 0, "size_mm": [1.0, 1.0]}],
        "area_before_mm2": 1.0, "area_after_mm2": 1.0,
        "changes": [{"kind": "joined", "message": "a gap", "at": None, "measured_mm": 0.02, "handles": ["2F"]}],
        "left": [],
    },
    "compare": {
        "schema": "flatprep-compare/1", "old": "a.dxf", "new": "b.dxf", "same": False,
        "parts": [{"old": {"name": "leaf", "area_mm2": 1.0, "cut_length_mm": 4.0, "holes": 0, "size_mm": [1.0, 1.0]},
                   "new": {"name": "leaf", "area_mm2": 1.0, "cut_length_mm": 4.0, "holes": 1, "size_mm": [1.0, 1.0]},
                   "same": False, "motion": {"mirrored": False, "turn_deg": 90.0, "dx": 1.0, "dy": 0.0},
                   "holes": [{"change": "appeared", "old": None, "moved_mm": None,
                              "new": {"shape": "circle", "at": [0.5, 0.5], "diameter_mm": 0.2, "width_mm": 0.2,
                                      "length_mm": 0.2}}],
                   "outline": [{"added": False, "at": [0.0, 0.0], "depth_mm": 0.1, "length_mm": 1.0, "area_mm2": 0.1}],
                   "bends": {"appeared": 0, "gone": 0}, "marks": {"appeared": 1, "gone": 0},
                   "rework": {"possible": True, "motion": {"mirrored": False, "turn_deg": 0.0, "dx": 0.0, "dy": 0.0},
                              "missing": [],
                              "steps": [{"task": "drill", "at": [0.5, 0.5], "to_mm": 0.2, "from_mm": None,
                                         "length_mm": None}]}}],
        "appeared": [], "gone": [],
    },
    "lookup": {"kind": "nut", "name": "M8", "values": {"across_flats_mm": 13.0}, "source": "ISO 4032"},
}  # fmt: skip
BAD = [
    ("lint", ("drawings", 0, "units_from"), "guessed"),
    ("lint", ("drawings", 0, "findings", 0, "severity"), "loud"),
    ("lint", ("drawings", 0, "findings", 0, "at"), [1.0]),
    ("lint", ("drawings", 0, "parts", 0, "pierces"), 0),
    ("layout", ("sheets", 0, "utilisation"), 1.2),
    ("layout", ("sheets", 0, "placements", 0, "copy"), 0),
    ("layout", ("unplaced", 0, "why"), ""),
    ("checklist", ("parts", 0, "steps", 0, "kind"), "weld"),
    ("checklist", ("parts", 0, "steps", 0, "tool_dia_mm"), 0),
    ("checklist", ("parts", 0, "steps", 0, "side"), "C"),
    ("estimate", ("material_cost",), -1.0),
    ("estimate", ("parts", 0, "mass_kg"), "heavy"),
    ("alternatives", ("parts", 0, "options", 0, "basis"), "colour"),
    ("alternatives", ("parts", 0, "options", 0, "mass_kg"), -1.0),
    ("book", ("sheets", 0, "left"), -1),
    ("book", ("sheets", 1, "taken"), "stolen"),
    ("book", ("sheets", 0, "offcut", "rectangle_mm"), [1.0]),
    ("coupon", ("coupons", 0, "trials", 0, "sizes_mm"), []),
    ("coupon", ("coupons", 0, "trials", 0, "kind"), "tooth"),
    ("repair", ("changes", 0, "message"), ""),
    ("repair", ("parts", 0, "holes"), 0.5),
    ("compare", ("parts", 0, "holes", 0, "change"), "vanished"),
    ("compare", ("parts", 0, "motion", "turn_deg"), 360.0),
    ("compare", ("parts", 0, "rework", "steps", 0, "task"), "weld"),
    ("lookup", ("source",), ""),
    ("lookup", ("values",), {}),
]


@pytest.mark.parametrize("kind", KINDS)
def test_a_schema_is_sound_and_takes_the_document_of_the_interface(kind):
    Draft202012Validator.check_schema(schema(kind))
    Draft202012Validator(schema(kind)).validate(GOOD[kind])


@pytest.mark.parametrize(("kind", "path", "value"), BAD)
def test_a_schema_refuses_what_is_wrong(kind, path, value):
    document = copy.deepcopy(GOOD[kind])
    inner = document
    for key in path[:-1]:
        inner = inner[key]
    inner[path[-1]] = value
    assert not Draft202012Validator(schema(kind)).is_valid(document)


@pytest.mark.parametrize("kind", KINDS)
def test_every_key_of_the_interface_is_required(kind):
    for key in GOOD[kind]:
        document = {k: v for k, v in GOOD[kind].items() if k != key}
        assert not Draft202012Validator(schema(kind)).is_valid(document), key


def test_an_unknown_document_has_no_schema():
    with pytest.raises(KeyError):
        schema("../../secret")
