"""Operations for screws that pass through: clearance, countersink, counterbore, plain drilling, pockets, pressing."""

import re
from dataclasses import replace
from math import radians, tan

from flatprep.bench.ops import CLOSE_MM, Ask, Op, Rank, open_up, spoilt
from flatprep.model.work import StepKind
from flatprep.practice.sinks import sink_depth_mm, sink_room
from flatprep.profile.hardware.clearance import find_clearance, split_series
from flatprep.profile.hardware.drills import find_drill
from flatprep.profile.hardware.heads import find_counterbore, find_countersink
from flatprep.profile.hardware.names import tidy
from flatprep.profile.hardware.nuts import find_nut
from flatprep.profile.hardware.rules import section

_PLAIN_SINK = re.compile(r"[ØøD]?\s*(\d+(?:\.\d+)?)\s*(?:mm)?\s*(?:x|by|at)?\s*(60|75|82|90|100|110|120)\s*(?:°|deg)?")
_PLAIN_BORE = re.compile(r"[ØøD]?\s*(\d+(?:\.\d+)?)\s*(?:mm)?\s*(?:x|by|depth)\s*(\d+(?:\.\d+)?)\s*(?:mm)?(?:\s*deep)?")


def clearance_ops(ask: Ask) -> list[Op]:
    """Return the drill, or an inspection where the hole is cut to size."""
    screw, series = split_series(ask.work.size)
    found = find_clearance(screw)
    return through_ops(
        ask, found.series(series), f"{found.screw} clearance", _drill(found.drill(series)), f"{series} series"
    )


def _drill(name: str) -> str:
    return name if name.endswith("mm") else f"drill {name}"


def drill_ops(ask: Ask) -> list[Op]:
    """Return the drill, or an inspection where the hole is cut to size."""
    size = find_drill(ask.work.size)
    return through_ops(ask, size, ask.work.size if ask.work.size.strip()[-1:] == "m" else f"{size:g} mm", "", "")


def through_ops(ask: Ask, diameter_mm: float, size: str, drill: str, note: str) -> list[Op]:
    """Return what makes a plain hole: cut to size and measured, or drilled."""
    cut = _cuttable(ask, diameter_mm)
    as_cut = ask.as_cut_mm(cut)
    if as_cut is None or as_cut < diameter_mm - CLOSE_MM:
        ops = open_up(ask, as_cut, diameter_mm, cut, size)
        told = "; ".join(t for t in (drill, note) if t)
        return [op.with_note(told) if op.kind is StepKind.DRILL and told else op for op in ops]
    wide = as_cut > diameter_mm + CLOSE_MM
    told = f"drawn {as_cut:.4g} mm, wider than {diameter_mm:.4g}" if wide else "cut to size"
    return [
        Op(StepKind.INSPECT, Rank.CHECK_CUT, ask.at, size, diameter_mm, "", ask.work.depth_mm, cut, ask.work.side,
           "; ".join(t for t in (told, note) if t))
    ]  # fmt: skip


def countersink_ops(ask: Ask, hole_mm: float | None = None) -> list[Op]:
    """Return the hole (unless other work makes it) and its sink.

    Parameters
    ----------
    hole_mm
        Finished diameter of the hole where other work makes it.
    """
    plain = _PLAIN_SINK.fullmatch(tidy(ask.work.size))
    if plain:
        dia, angle, name, head = float(plain[1]), float(plain[2]), f"{float(plain[1]):g} x {plain[2]}°", ""
        holes: list[Op] = []
        hole, cut = hole_mm or ask.drawn_mm or 0.0, ask.drawn_mm
    else:
        found = find_countersink(ask.work.size)
        dia, angle, name = found.sink_dia_mm, found.angle_deg, found.name
        head = f"head {found.head_dia_mm:.4g} mm sharp, sink by {found.sink_rule}"
        under = find_clearance(found.screw).medium_mm
        holes = [] if hole_mm else through_ops(ask, under, f"{found.screw} clearance", "", "medium series")
        hole, cut = hole_mm or max(under, ask.drawn_mm or 0.0), _cuttable(ask, under)
    sink = _sink(ask, name, dia, angle, hole).with_note(head)
    return [*holes, replace(sink, cut_dia_mm=None if hole_mm else cut)]


def _cuttable(ask: Ask, diameter_mm: float) -> float | None:
    return diameter_mm if diameter_mm >= ask.bench.least_hole_mm - 1e-3 else None


def _sink(ask: Ask, name: str, dia_mm: float, angle_deg: float, hole_mm: float) -> Op:
    depth = sink_depth_mm(dia_mm, hole_mm, angle_deg)
    thickness = ask.bench.thickness_mm
    op = Op(
        StepKind.COUNTERSINK, Rank.COUNTERSINK, ask.at, name, dia_mm, f"countersink {angle_deg:g}°, {dia_mm:.4g} mm up",
        depth, None, ask.work.side, f"to {dia_mm:.2f} mm at the face, {angle_deg:g}°",
    )  # fmt: skip
    if thickness is None:
        return op
    room = sink_room(depth, thickness)
    if room.through:
        widest = hole_mm + 2.0 * (thickness - room.land_needed_mm) * tan(radians(angle_deg) / 2.0)
        return spoilt(
            op, f"the sink is {depth:.2f} mm deep in {thickness:g} mm sheet, which holds {widest:.2f} mm at most"
        )
    return op.with_note(f"{room.land_mm:.2f} mm of straight hole left under the sink") if room.thin else op


def counterbore_ops(ask: Ask, hole_mm: float | None = None) -> list[Op]:
    """Return the hole (unless other work makes it) and its counterbore."""
    plain = _PLAIN_BORE.fullmatch(tidy(ask.work.size))
    if plain:
        dia, depth, name, holes, cut = (
            float(plain[1]),
            float(plain[2]),
            f"{plain[1]} x {plain[2]} deep",
            [],
            ask.drawn_mm,
        )
    else:
        found = find_counterbore(ask.work.size)
        dia, depth, name = found.bore_mm, ask.work.depth_mm or found.depth_mm, f"{found.screw} ISO 4762"
        under = find_clearance(found.screw).medium_mm
        holes = [] if hole_mm else through_ops(ask, under, f"{found.screw} clearance", "", "medium series")
        cut = _cuttable(ask, under)
    op = Op(
        StepKind.COUNTERBORE, Rank.COUNTERBORE, ask.at, name, dia, f"counterbore {dia:g} mm", depth,
        None if hole_mm else cut, ask.work.side,
    )  # fmt: skip
    thickness = ask.bench.thickness_mm
    if thickness is not None and depth >= thickness - 1e-3:
        op = spoilt(op, f"{depth:g} mm deep in {thickness:g} mm sheet: the head falls through")
    return [*holes, op]


def nut_pocket_ops(ask: Ask) -> list[Op]:
    """Return the inspection of a nut pocket: across flats with its clearance, corners against the tool."""
    nut, rules = find_nut(ask.work.size), section("pocket")
    low, high = nut.flats_mm + rules["clearance_least"], nut.flats_mm + rules["clearance_most"]
    note = f"across flats {low:.2f} to {high:.2f} mm, the nut is {nut.corners_mm:.2f} mm across corners"
    radius = ask.bench.process.tool_diameter_mm / 2.0
    if radius > 0.0:
        note += f"; the tool leaves corners of {radius:g} mm radius: relieve them, or mill a circle across the corners"
    op = Op(
        StepKind.INSPECT,
        Rank.CHECK_CUT,
        ask.at,
        nut.name,
        None,
        "",
        None,
        None,
        ask.work.side,
        note,
        limits_mm=(low, high),
    )
    if ask.drawn_mm is not None and ask.drawn_mm < nut.flats_mm:
        return [spoilt(op, f"the pocket is {ask.drawn_mm:.4g} mm wide, the nut {nut.flats_mm:g}")]
    return [op]


def press_ops(ask: Ask) -> list[Op]:
    """Return the pressing step of a pin, bush, bearing or clinch part."""
    return [
        Op(StepKind.PRESS, Rank.PRESS, ask.at, ask.work.size, None, "", ask.work.depth_mm, None, ask.work.side,
           ask.work.note or "square to the plate, with a support right round the hole")
    ]  # fmt: skip
