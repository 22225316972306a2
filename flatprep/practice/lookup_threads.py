"""Answers about threads, screws, nuts and their holes."""

import re

from flatprep.practice.question import Question, Value, Values
from flatprep.practice.sinks import sink_depth_mm
from flatprep.practice.threads import (
    drill_for_percent,
    engagement,
    equal_strength_mm,
    forming_drill_mm,
    percent_of_basic,
    percent_of_thread,
    stress_area_mm2,
)
from flatprep.profile.hardware.clearance import find_clearance, split_series
from flatprep.profile.hardware.drills import find_drill
from flatprep.profile.hardware.heads import find_counterbore, find_countersink
from flatprep.profile.hardware.nuts import find_nut
from flatprep.profile.hardware.pins import find_shoulder_screw
from flatprep.profile.hardware.threads import find_thread

_WITH = re.compile(r"(.+?)(?:,|\s)\s*(?:(?:drill|with)\s+(?P<drill>\S+(?:\s*mm)?)|(?P<percent>\d+(?:\.\d+)?)\s*%)\s*")


def thread(q: Question) -> Values:
    """``M6``; also ``M6 drill 5.1`` and ``M10 75 %``; with a thickness what a plate holds."""
    match = _WITH.fullmatch(q.name)
    found = find_thread(match[1] if match else q.name, q.own)
    drill = found.drill_mm
    if match and match["drill"]:
        drill = find_drill(match["drill"], q.own)
    elif match:
        drill = drill_for_percent(found, float(match["percent"]), q.own)
    values: dict[str, Value] = {
        "pitch_mm": found.pitch_mm, "drill_mm": drill, "minor_min_mm": found.minor_min_mm,
        "minor_max_mm": found.minor_max_mm, "limits": found.limits,
        "drill": None if match else found.drill, "metric_drill_mm": found.metric_drill_mm,
        "percent_thread": percent_of_thread(found, drill, q.own),
        "percent_thread_basic": percent_of_basic(found, drill, q.own),
        "forming_drill_mm": forming_drill_mm(found, own=q.own), "major_mm": found.major_mm,
        "stress_area_mm2": stress_area_mm2(found), "equal_strength_engagement_mm": equal_strength_mm(found),
    }  # fmt: skip
    source = found.source
    if q.thickness_mm is not None:
        held = engagement(found, q.thickness_mm, q.material, q.own)
        values |= {"engaged_threads": held.threads, "refuse_below_threads": held.refuse_threads,
                   "warn_below_threads": held.least_threads, "engagement_rule_mm": held.needed_mm}  # fmt: skip
        source += f"; {held.source}"
    return found.name, values, source


def clearance(q: Question) -> Values:
    """``M6``, ``1/4``."""
    found = find_clearance(split_series(q.name)[0], q.own)
    values: dict[str, Value] = {"fine_mm": found.fine_mm, "medium_mm": found.medium_mm, "coarse_mm": found.coarse_mm}
    values |= {f"{series}_drill": found.drill(series) for series in ("fine", "medium", "coarse")}
    values |= {f"{series}_metric_drill_mm": found.metric_drill_mm(series) for series in ("fine", "medium", "coarse")}
    return found.screw, values, found.source


def nut(q: Question) -> Values:
    """``M8``, ``M10 DIN 934``, ``1/4``."""
    found = find_nut(q.name, q.own)
    values: dict[str, Value] = {
        "across_flats_mm": found.flats_mm, "across_corners_mm": found.corners_mm, "height_mm": found.height_mm
    }  # fmt: skip
    return found.name, values, found.source


def countersink(q: Question) -> Values:
    """``M5 ISO 10642``; the depth is over the medium clearance hole, and over a hole named: ``... hole 5.5``."""
    match = re.fullmatch(r"(.+?)\s+(?:hole|over)\s+(\d+(?:\.\d+)?)\s*(?:mm)?", q.name)
    found = find_countersink(match[1] if match else q.name, q.own)
    hole = float(match[2]) if match else find_clearance(found.screw, q.own).medium_mm
    values: dict[str, Value] = {
        "head_dia_mm": found.head_dia_mm, "sink_dia_mm": found.sink_dia_mm, "angle_deg": found.angle_deg,
        "head_real_mm": found.head_real_mm, "head_height_mm": found.height_mm, "hole_mm": hole,
        "depth_mm": sink_depth_mm(found.sink_dia_mm, hole, found.angle_deg), "sink_rule": found.sink_rule,
    }  # fmt: skip
    return found.name, values, found.source


def counterbore(q: Question) -> Values:
    """``M6``."""
    found = find_counterbore(q.name, q.own)
    values: dict[str, Value] = {
        "bore_mm": found.bore_mm, "depth_mm": found.depth_mm, "head_dia_mm": found.head_dia_mm,
        "head_height_mm": found.head_height_mm,
    }  # fmt: skip
    return f"{found.screw} ISO 4762", values, found.source


def shoulder_screw(q: Question) -> Values:
    """``1/4``, ``8``."""
    found = find_shoulder_screw(q.name, q.own)
    values: dict[str, Value] = {
        "shoulder_mm": found.shoulder_mm, "thread": found.thread, "thread_length_mm": found.thread_length_mm,
        "head_dia_mm": found.head_dia_mm, "head_height_mm": found.head_height_mm, "fit": found.fit or None,
    }  # fmt: skip
    if found.under_mm:
        most, least = found.under_mm
        values |= {"shoulder_min_mm": found.shoulder_mm - most, "shoulder_max_mm": found.shoulder_mm - least}
    return found.name, values, found.source
