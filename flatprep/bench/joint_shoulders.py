"""Joints with shoulder screws: shoulder against the stack, axial play, the thread at its end."""

from collections.abc import Iterator, Sequence
from pathlib import Path

from flatprep.bench.joint_bolts import SLACK_MM, bought, room
from flatprep.bench.joint_layers import Layer, judged
from flatprep.job.values import JointAsk
from flatprep.model.work import JointCheck, JointReport, Outcome
from flatprep.practice.fasteners import Fastener, lengths_mm
from flatprep.practice.threads import engagement
from flatprep.profile.hardware.fits import limits
from flatprep.profile.hardware.nuts import find_nut
from flatprep.profile.hardware.pins import ShoulderScrew
from flatprep.profile.hardware.rules import section
from flatprep.profile.hardware.threads import Thread

LOOSE_MM = 0.5
"""A hole wider than the shoulder by more than this is hardly meant to turn on it."""


def work_out(joint: JointAsk, fastener: Fastener, stack: Sequence[Layer]) -> JointReport:
    """Return the report of a joint that turns on a shoulder screw."""
    screw, thread = fastener.shoulder, fastener.thread
    assert screw is not None
    assert thread is not None
    plain = [layer for layer in stack if not layer.threaded]
    grip = sum(layer.thickness_mm for layer in plain)
    least, most = shoulder_limits(screw, stack[0].own)
    checks = [_runs(layer, least, most) for layer in plain]
    checks += list(room("head", fastener.head_dia_mm, screw.shoulder_mm, stack[0], spanner=False))
    length = joint.length_mm or _nearest(grip + section("joint", stack[0].own)["play_least"], fastener, stack[0].own)
    if length is None:
        checks.append(JointCheck("play", Outcome.BAD, f"no standard shoulder reaches {grip:.2f} mm"))
        return JointReport(joint.name, fastener.title, joint.count, grip, "", tuple(checks))
    checks.append(_play(length, grip, stack[0].own))
    checks += list(_thread(joint, screw, thread, stack[-1]))
    return JointReport(joint.name, fastener.title, joint.count, grip, bought(fastener, length), tuple(checks))


def shoulder_limits(screw: ShoulderScrew, own: Sequence[Path] = ()) -> tuple[float, float]:
    """Return the least and the greatest diameter of a shoulder, mm; f9 from the fundamental deviation of f."""
    if screw.under_mm is not None:
        return screw.shoulder_mm - screw.under_mm[0], screw.shoulder_mm - screw.under_mm[1]
    size = limits(screw.shoulder_mm, screw.fit, own)
    return size.least_mm, size.most_mm


def _runs(layer: Layer, least_mm: float, most_mm: float) -> JointCheck:
    what = f"shoulder in {layer.label}"
    if layer.hole_mm is None:
        return JointCheck(what, Outcome.OPEN, "the hole is not named (hole or at)")
    low, high = layer.hole_mm
    text = f"hole {low:.3f} to {high:.3f}, shoulder {least_mm:.3f} to {most_mm:.3f} mm"
    if low < most_mm - 1e-6:
        return JointCheck(what, Outcome.BAD, f"{text}: it does not turn")
    play = f"{text}: {low - most_mm:.3f} to {high - least_mm:.3f} mm of play"
    if high - least_mm > LOOSE_MM:
        return JointCheck(what, Outcome.OPEN, f"{play}: is a bush or washer meant?")
    return JointCheck(what, Outcome.GOOD, play)


def _nearest(least_mm: float, fastener: Fastener, own: Sequence[Path]) -> float | None:
    return next((length for length in lengths_mm(fastener, own) if length >= least_mm - 1e-6), None)


def _play(length_mm: float, stack_mm: float, own: Sequence[Path]) -> JointCheck:
    rules, play = section("joint", own), length_mm - stack_mm
    text = f"shoulder {length_mm:.4g} mm over a stack of {stack_mm:.4g}: {play:.2f} mm of axial play"
    if play < rules["play_least"] - 1e-6:
        return JointCheck("play", Outcome.BAD, f"{text}: the plates are clamped")
    if play > rules["play_most"] + 1e-6:
        return JointCheck(
            "play",
            Outcome.BAD,
            f"{text}: add washers of {play - rules['play_most']:.2f} to {play - rules['play_least']:.2f} mm",
        )
    return JointCheck("play", Outcome.GOOD, text)


def _thread(joint: JointAsk, screw: ShoulderScrew, thread: Thread, last: Layer) -> Iterator[JointCheck]:
    long = screw.thread_length_mm
    if joint.nut:
        nut = find_nut(joint.nut, last.own)
        enough = nut.screw == thread.screw and (long is None or long >= nut.height_mm + thread.pitch_mm - SLACK_MM)
        yield JointCheck(
            "nut", judged(fits=enough), f"{nut.name}, {nut.height_mm:.4g} mm high, on {_shown(long)} of {thread.name}"
        )
        return
    what = f"thread in {last.label}"
    if not last.threaded:
        yield JointCheck("hold", Outcome.BAD, "neither a threaded layer nor a nut: nothing holds the screw")
    elif last.thread and last.thread != thread.name:
        yield JointCheck(what, Outcome.BAD, f"{last.thread} is tapped, the screw has {thread.name}")
    else:
        engaged = last.thickness_mm if long is None else min(long, last.thickness_mm)
        held = engagement(thread, engaged, last.bench.material if last.bench else None, last.own)
        out = "" if long is None or long <= last.thickness_mm else f", {long - last.thickness_mm:.4g} mm stands out"
        yield JointCheck(
            what,
            judged(fits=not held.weak),
            f"{_shown(long)} of {thread.name}: {engaged:.4g} mm engaged, {held.threads:.1f} threads{out}",
        )


def _shown(long_mm: float | None) -> str:
    return "an unknown length" if long_mm is None else f"{long_mm:.4g} mm"
