"""Operations for threads: tap, and thread insert."""

from collections.abc import Sequence
from pathlib import Path

from flatprep.bench.ops import Ask, Op, Rank, open_up, spoilt
from flatprep.model.work import StepKind
from flatprep.practice.bits import bit_for, tap_bit
from flatprep.practice.threads import (
    PilotHole,
    engagement,
    forming_drill_mm,
    hardens,
    percent_of_thread,
    tap_pilot,
    taps_directly,
)
from flatprep.profile.hardware.names import UnknownHardwareError
from flatprep.profile.hardware.rules import section
from flatprep.profile.hardware.threads import Thread, find_thread


def tap_cut_mm(ask: Ask, thread: Thread) -> float | None:
    """Return the diameter to cut before the tap: the drawn one where it will do."""
    bench, drawn = ask.bench, ask.drawn_mm
    pilot = _pilot(ask, thread.drill_mm)
    if pilot.diameter_mm is None or drawn is None:
        return pilot.diameter_mm
    if not pilot.drill_out:
        return drawn if thread.admits(drawn) else pilot.diameter_mm
    return drawn if bench.least_hole_mm - 1e-3 <= drawn <= pilot.diameter_mm + 1e-3 else pilot.diameter_mm


def _pilot(ask: Ask, drill_mm: float) -> PilotHole:
    return tap_pilot(drill_mm, ask.bench.process, ask.bench.material, ask.bench.thickness_mm, ask.own)


def tap_ops(ask: Ask) -> list[Op]:
    """Return drill (where needed) and tap."""
    thread = find_thread(ask.work.size, ask.own)
    cut = tap_cut_mm(ask, thread)
    as_cut = ask.as_cut_mm(cut)
    tap = Op(
        StepKind.TAP, Rank.TAP, ask.at, thread.name, thread.drill_mm, f"tap {thread.name}", ask.work.depth_mm,
        ask.told_mm(cut), ask.work.side, _tap_note(ask, thread), limits_mm=(thread.minor_min_mm, thread.minor_max_mm),
    )  # fmt: skip
    if as_cut is not None and as_cut > thread.minor_max_mm + 0.001:
        most = f"{thread.minor_max_mm:.4g} mm"
        return [spoilt(tap, f"the hole of {as_cut:.4g} mm is above the greatest minor diameter {most}")]
    if as_cut is not None and thread.admits(as_cut):
        return [
            tap if taps_directly(ask.bench.process, ask.bench.material, ask.bench.thickness_mm, ask.own) else _skin(tap)
        ]
    return [*open_up(ask, as_cut, tap_bit(thread, inch=ask.bench.inch), cut), tap]


def _skin(tap: Op) -> Op:
    return tap.with_note(
        "the hole is cut to the tap drill: its skin is hard or rough, the tap wears; better cut it under size"
    )


def _tap_note(ask: Ask, thread: Thread) -> str:
    height = section("percent_thread", ask.own)["height"]
    notes = [f"{percent_of_thread(thread, thread.drill_mm, ask.own):.0f} % thread (of the {height:.4f} P height)"]
    notes += [*_held(ask, thread), *_blind(ask, thread), *_of_material(ask, thread)]
    return "; ".join(notes)


def _held(ask: Ask, thread: Thread) -> list[str]:
    """Return how many threads engage, and what to do where they are too few."""
    depth = ask.work.depth_mm or ask.bench.thickness_mm
    if depth is None:
        return []
    held = engagement(thread, depth, ask.bench.material, ask.own)
    notes = [f"{held.threads:.1f} threads engaged"]
    if held.instead:
        notes.append(f"{ask.bench.family} takes no machine thread: {held.instead}")
    elif held.fails:
        notes.append("too thin for a thread: rivet nut, weld nut, clinch nut or thicker plate")
    elif held.weak:
        notes.append("light loads only, or a thread insert")
    return notes


def _of_material(ask: Ask, thread: Thread) -> list[str]:
    """Return what the material asks of drill and tap."""
    family = ask.bench.family
    if family == "wear-plate":
        least = section("carbide", ask.own)["least_thread"]
        small = [f"under M{least:g} better a through bolt, a weld nut or an insert"] if thread.major_mm < least else []
        return ["cobalt or carbide drill, rigid machine, low speed; no thread without carbide tooling", *small]
    hard = ["the cut rim is hard: drill it away"] if hardens(ask.bench.material, ask.own) else []
    forms = family in section("forming", ask.own).words("families")
    return [*hard, f"forming tap: drill {forming_drill_mm(thread, own=ask.own):.2f} mm"] if forms else hard


def _blind(ask: Ask, thread: Thread) -> list[str]:
    """Return how deep a blind hole is drilled, and that a thread longer than two diameters gains nothing."""
    thickness, depth = ask.bench.thickness_mm, ask.work.depth_mm
    useful = section("engagement", ask.own)["most_useful"] * thread.major_mm
    if depth is None:
        long = thickness is not None and thickness > useful + 1e-9
        return [f"more than {useful:g} mm of thread gains nothing: clear the rest"] if long else []
    drilled = depth + runout_mm(thread, ask.own)
    if thickness is not None and drilled >= thickness:
        return [f"drill through: a blind hole would be {drilled:.1f} mm deep"]
    return [f"drill {drilled:.1f} mm deep: the usable thread ends {drilled - depth:.1f} mm before the bottom"]


def runout_mm(thread: Thread, own: Sequence[Path] = ()) -> float:
    """Return what a blind hole is deeper than its thread, mm: DIN 76-2 by pitch, the next larger pitch between."""
    rules = section("runout", own)
    pitches, lengths = rules.numbers("pitch"), rules.numbers("length")
    return next((n for p, n in zip(pitches, lengths, strict=True) if thread.pitch_mm <= p + 1e-9), lengths[-1])


def insert_ops(ask: Ask) -> list[Op]:
    """Return drill and thread insert."""
    thread = find_thread(ask.work.size, ask.own)
    rules = section("insert", ask.own)
    drill = rules.find(thread.name)
    if drill is None:
        known = ", ".join(k for k in rules.table.data if k != "from")
        raise UnknownHardwareError(f'thread insert "{ask.work.size}" is not known', f"known: {known}")
    cut = _pilot(ask, drill).diameter_mm
    as_cut = ask.as_cut_mm(cut)
    note = f"tap for the insert's outer thread, wind it in to half a turn below the face; {rules.source}"
    insert = Op(
        StepKind.THREAD_INSERT, Rank.INSERT, ask.at, thread.name, drill, f"insert tap {thread.name}",
        ask.work.depth_mm, ask.told_mm(cut), ask.work.side, note,
    )  # fmt: skip
    if as_cut is not None and as_cut > drill + 0.2:
        return [spoilt(insert, f"the hole of {as_cut:.4g} mm is wider than the insert's drill of {drill:g} mm")]
    return [*open_up(ask, as_cut, bit_for(drill, inch=ask.bench.inch), cut), insert]
