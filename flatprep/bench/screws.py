"""Operations for screws that pass through: clearance, countersink, counterbore, plain drilling, pockets, pressing."""

from dataclasses import replace

from flatprep.bench.ops import CLOSE_MM, Ask, Op, Rank, open_up, spoilt
from flatprep.bench.part import BenchPart
from flatprep.model.work import StepKind
from flatprep.practice.bits import Bit, bit_for, clearance_bit
from flatprep.practice.sinks import Sink, find_sink, sink_room
from flatprep.profile.hardware.clearance import Clearance, find_clearance, split_series
from flatprep.profile.hardware.drills import find_drill
from flatprep.profile.hardware.nuts import find_nut
from flatprep.profile.hardware.rules import section


def clearance_ops(ask: Ask) -> list[Op]:
    """Return the drill, or an inspection where the hole is cut to size."""
    screw, series = split_series(ask.work.size)
    return _clearance(ask, find_clearance(screw, ask.own), series)


def _clearance(ask: Ask, hole: Clearance, series: str = "medium") -> list[Op]:
    bit = clearance_bit(hole, series, inch=ask.bench.inch)
    return through_ops(ask, bit, f"{hole.screw} clearance", f"{series} series")


def drill_ops(ask: Ask) -> list[Op]:
    """Return the drill, or an inspection where the hole is cut to size."""
    size = find_drill(ask.work.size, ask.own)
    named = not ask.work.size.replace("mm", "").replace(".", "").replace(",", "").strip().isdigit()
    return through_ops(ask, Bit(size, ask.work.size) if named else bit_for(size, inch=ask.bench.inch))


def through_ops(ask: Ask, bit: Bit, size: str = "", note: str = "") -> list[Op]:
    """Return what makes a plain hole: cut to size and measured, or drilled."""
    cut = _cuttable(ask, bit.diameter_mm)
    opened = ask.drawn_mm is None or ask.drawn_mm < bit.diameter_mm - CLOSE_MM
    as_cut = ask.as_cut_mm(cut, opened=opened)
    if as_cut is None or as_cut < bit.diameter_mm - CLOSE_MM:
        ops = open_up(ask, as_cut, bit, cut, size)
        return [op.with_note(note) if op.kind is StepKind.DRILL and note else op for op in ops]
    wide = as_cut > bit.diameter_mm + CLOSE_MM
    told = f"drawn {as_cut:.4g} mm, wider than {bit.diameter_mm:.4g} mm" if wide else "cut to size"
    return [
        Op(StepKind.INSPECT, Rank.CHECK_CUT, ask.at, size or bit.name, bit.diameter_mm, "", ask.work.depth_mm, cut,
           note="; ".join(t for t in (told, note) if t))
    ]  # fmt: skip


def sink_ops(ask: Ask, hole_mm: float | None = None) -> list[Op]:
    """Return the hole (unless other work makes it), and its countersink or counterbore.

    Parameters
    ----------
    hole_mm
        Finished diameter of the hole where other work makes it.
    """
    sink = find_sink(ask.work.kind, ask.work.size, hole_mm or ask.drawn_mm, ask.work.depth_mm, ask.own)
    holes: list[Op] = []
    cut = ask.drawn_mm
    if sink.through_mm is not None and hole_mm is None:
        holes = _clearance(ask, find_clearance(sink.screw, ask.own))
        cut = _cuttable(ask, sink.through_mm)
    op = _countersink(ask, sink) if sink.angle_deg is not None else _counterbore(ask, sink)
    return [
        *holes,
        _in_sheet(replace(op, cut_dia_mm=cut if ask.drawn_mm is not None else None), sink, ask.bench),
    ]


def _cuttable(ask: Ask, diameter_mm: float) -> float | None:
    return diameter_mm if diameter_mm >= ask.bench.least_hole_mm - 1e-3 else None


def _countersink(ask: Ask, sink: Sink) -> Op:
    note = f"to {sink.dia_mm:.2f} mm at the face, {sink.angle_deg:g}°"
    tool = f"countersink {sink.angle_deg:g}°, {sink.dia_mm:.4g} mm or larger"
    return Op(
        StepKind.COUNTERSINK, Rank.COUNTERSINK, ask.at, sink.name, sink.dia_mm, tool, sink.depth_mm,
        side=ask.work.side, note="; ".join(t for t in (note, sink.note) if t),
    )  # fmt: skip


def _counterbore(ask: Ask, sink: Sink) -> Op:
    return Op(
        StepKind.COUNTERBORE, Rank.COUNTERBORE, ask.at, sink.name, sink.dia_mm, f"counterbore {sink.dia_mm:g} mm",
        sink.depth_mm, side=ask.work.side, note=sink.note,
    )  # fmt: skip


def _in_sheet(op: Op, sink: Sink, bench: BenchPart) -> Op:
    thickness_mm = bench.thickness_mm
    if thickness_mm is None:
        return op
    room = sink_room(sink.depth_mm, thickness_mm, bench.own)
    if room.through:
        return spoilt(op, f"{sink.depth_mm:.2f} mm deep in {thickness_mm:g} mm sheet")
    return op.with_note(f"only {room.land_mm:.2f} mm of straight hole left below") if room.thin else op


def nut_pocket_ops(ask: Ask) -> list[Op]:
    """Return the inspection of a nut pocket: across flats with its clearance, corners against the tool."""
    nut, rules = find_nut(ask.work.size, ask.own), section("pocket", ask.own)
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
