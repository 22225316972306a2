"""Answers about fits, seats, pins, drills, bends and gauges."""

import re

from flatprep.base.errors import UsageError
from flatprep.practice.bends import FILE, bend, measured_k_factor
from flatprep.practice.question import Question, Value, Values
from flatprep.profile.gauges import gauge_mm, gauge_source, metal_of
from flatprep.profile.hardware.bearings import find_bearing, find_bush
from flatprep.profile.hardware.drills import find_drill, inch_drill
from flatprep.profile.hardware.fits import Limits, it_um, limits, parse_fit
from flatprep.profile.hardware.names import tidy, unknown
from flatprep.profile.hardware.pins import find_pin
from flatprep.profile.hardware.table import table


def fit(q: Question) -> Values:
    """``22 N7``, ``25 H7/k6``, and the width of a grade alone: ``60 IT7``."""
    grade = re.fullmatch(r"(\d*\.?\d+)\s*(?:mm)?\s*IT\s*(\d{1,2})", tidy(q.name), re.IGNORECASE)
    if grade:
        width = it_um(float(grade[1]), int(grade[2]), q.own)
        return f"{float(grade[1]):g} IT{grade[2]}", {"width_mm": width / 1000.0}, q.table_source("it_grades", ("incl",))
    found = parse_fit(q.name, q.own)
    values = _limits(found.first)
    name = found.first.name
    if found.second is not None and found.clearance_um is not None:
        name += f"/{found.second.zone}"
        values |= {f"shaft_{key}": value for key, value in _limits(found.second).items()}
        values |= {
            "clearance_min_mm": found.clearance_um[0] / 1000.0, "clearance_max_mm": found.clearance_um[1] / 1000.0
        }  # fmt: skip
    return name, values, found.first.source


def _limits(size: Limits) -> dict[str, Value]:
    return {
        "min_mm": size.least_mm, "max_mm": size.most_mm, "lower_um": size.lower_um, "upper_um": size.upper_um,
    }  # fmt: skip


def bearing(q: Question) -> Values:
    """``608``, ``6205-2RS``; the seat's limits stand beside, H7 and N7."""
    found, shielded = find_bearing(q.name, q.own)
    width = found.shielded_mm if shielded and found.shielded_mm is not None else found.width_mm
    values: dict[str, Value] = {
        "bore_mm": found.bore_mm, "outside_mm": found.outside_mm, "width_mm": width,
        "width_open_mm": found.width_mm, "width_shielded_mm": found.shielded_mm,
    }  # fmt: skip
    for zone in ("H7", "N7"):
        seat = limits(found.outside_mm, zone, q.own)
        values |= {f"seat_{zone.lower()}_min_mm": seat.least_mm, f"seat_{zone.lower()}_max_mm": seat.most_mm}
    return found.name, values, found.source


def bush(q: Question) -> Values:
    """``10``, ``10 sintered``: the housing is H7."""
    found = find_bush(q.name, q.own)
    housing = limits(found.outside_mm, "H7", q.own)
    values: dict[str, Value] = {
        "bore_mm": found.bore_mm, "outside_mm": found.outside_mm, "housing_min_mm": housing.least_mm,
        "housing_max_mm": housing.most_mm,
    }  # fmt: skip
    return found.name, values, found.source


def pin(q: Question) -> Values:
    """``6``, ``6 ISO 2338``: the holes for pressing in and for sliding."""
    found = find_pin(q.name, q.own)
    values: dict[str, Value] = {"diameter_mm": found.diameter_mm, "pin": found.pin_class, "note": found.note}
    for use, zone in (("press", found.press), ("slip", found.slip)):
        hole = limits(found.diameter_mm, zone, q.own)
        values |= {use: zone, f"{use}_min_mm": hole.least_mm, f"{use}_max_mm": hole.most_mm}
    return f"{found.diameter_mm:g} {found.standard}", values, found.source


def drill(q: Question) -> Values:
    """``#7``, ``F``, ``17/64``, ``5.1``."""
    size = find_drill(q.name, q.own)
    near_mm, near = inch_drill(size, q.own)
    values: dict[str, Value] = {"diameter_mm": size, "nearest_inch_drill": near, "nearest_inch_drill_mm": near_mm}
    return q.name, values, q.table_source("drills_inch")


def bend_answer(q: Question) -> Values:
    """Answer with allowance, deduction and k by DIN 6935; with a material what handbooks measured."""
    if q.thickness_mm is None or q.radius_mm is None or q.angle_deg is None:
        raise UsageError("bend: needs thickness, inside radius and angle", "add --thickness 2 --radius 2 --angle 90")
    found = bend(q.thickness_mm, q.radius_mm, q.angle_deg, own=q.own)
    values: dict[str, Value] = {
        "allowance_mm": found.allowance_mm, "deduction_mm": found.deduction_mm, "k": found.k,
        "k_factor": found.k_factor, "setback_mm": found.setback_mm,
    }  # fmt: skip
    if q.material is not None:
        values |= _bend_in_material(q, q.thickness_mm, q.radius_mm)
    sheet = table(FILE, q.own, ("din6935", "near_bend", "springback"))
    name = f"{q.radius_mm:g} mm in {q.thickness_mm:g} mm, {q.angle_deg:g}°"
    return name, values, "; ".join(t for t in (sheet.source(), sheet.note) if t)


def _bend_in_material(q: Question, thickness_mm: float, radius_mm: float) -> dict[str, Value]:
    assert q.material is not None
    measured = measured_k_factor(q.material.family, q.own)
    ratio = q.material.bend.table_ratio(thickness_mm) if q.material.bend else None
    rule = q.material.bend.limit(thickness_mm) if q.material.bend else None
    return {
        "k_factor_measured_min": measured[0] if measured else None,
        "k_factor_measured_max": measured[1] if measured else None,
        "radius_to_thickness": radius_mm / thickness_mm, "least_radius_to_thickness": ratio,
        "refuse_below_mm": rule.error if rule else None, "prefer_above_mm": rule.warn if rule else None,
    }  # fmt: skip


def bend_radius(q: Question) -> Values:
    """``6061-T6`` with a thickness: the published least inside radius over thickness, 90 degrees, cold."""
    sheet = table("bend_radius", q.own)
    asked = tidy(q.name).upper().removeprefix("AL-").removeprefix("AL ").removeprefix("EN AW-")
    rows = [row for row in sheet.rows if row.text("alloy").upper() == asked]
    if not rows:
        raise unknown("alloy and temper", q.name, dict.fromkeys(row.text("alloy") for row in sheet.rows))
    thickness = q.need_thickness("bend-radius")
    values: dict[str, Value] = {}
    for row in rows:
        row.only(("alloy", "kind", "thickness", "ratio", "from"))
        steps, ratios = row.numbers("thickness"), row.numbers("ratio")
        ratio = next((r for t, r in zip(steps, ratios, strict=True) if thickness <= t + 1e-3), ratios[-1])
        values |= {f"{row.text('kind')}_ratio": ratio, f"{row.text('kind')}_radius_mm": ratio * thickness}
    return rows[0].text("alloy"), values, sheet.source(rows[0])


def gauge(q: Question) -> Values:
    """``16`` with a material: the thickness in its metal."""
    match = re.fullmatch(r"#?\s*(\d{1,2})\s*-?\s*(?:ga(?:uge|ge)?\.?)?", tidy(q.name), re.IGNORECASE)
    if match is None:
        raise UsageError(f'gauge "{q.name}" is not a gauge number', "write a whole number, such as 16")
    metal = metal_of(q.material, f"gauge {match[1]}")
    return f"{match[1]} {metal}", {"thickness_mm": gauge_mm(int(match[1]), metal), "metal": metal}, gauge_source()
