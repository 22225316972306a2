"""Joints with bolts and screws: clearance in each plate, thread, grip, protrusion, room for head and nut."""

from collections.abc import Iterator, Sequence
from pathlib import Path

from flatprep.bench.joint_layers import Layer, judged
from flatprep.job.values import JointAsk
from flatprep.model.work import JointCheck, JointReport, Outcome
from flatprep.practice.fasteners import Fastener, FastenerKind, lengths_mm
from flatprep.practice.threads import engagement
from flatprep.profile.hardware.clearance import find_clearance
from flatprep.profile.hardware.nuts import Nut, find_nut
from flatprep.profile.hardware.rules import section
from flatprep.profile.hardware.threads import Thread

SLACK_MM = 0.02
"""Holes are drawn and tables are printed to about this."""


def work_out(joint: JointAsk, fastener: Fastener, stack: Sequence[Layer]) -> JointReport:
    """Return the report of a joint with a bolt or screw."""
    thread = fastener.thread
    assert thread is not None
    plain = [layer for layer in stack if not layer.threaded]
    sunk = stack[0].sunk_mm if fastener.kind is FastenerKind.SOCKET else 0.0
    grip = sum(layer.thickness_mm for layer in plain) - sunk
    nut = find_nut(joint.nut, stack[0].own) if joint.nut else None
    checks = [passes(layer, thread.screw, thread.major_mm) for layer in plain]
    checks += list(_order(stack, nut))
    checks += list(_head(fastener, stack[0]))
    needed, holds = (nut.height_mm, _nut_holds(nut, thread)) if nut else _thread_holds(stack[-1], thread)
    checks.append(holds)
    length = joint.length_mm or _standard(
        grip + needed + _stand_out_mm(nut, thread, stack[0].own), fastener, stack[0].own
    )
    if length is None:
        checks.append(JointCheck("length", Outcome.BAD, f"no standard length reaches {grip + needed:.1f} mm"))
        return JointReport(joint.name, fastener.title, joint.count, grip, "", tuple(checks))
    checks.append(_length(length, grip, needed, nut, thread, stack[-1]))
    if nut:
        checks += list(room("nut", nut.corners_mm, thread.major_mm, stack[-1], spanner=True))
    return JointReport(joint.name, fastener.title, joint.count, grip, bought(fastener, length, nut), tuple(checks))


def passes(layer: Layer, screw: str, major_mm: float) -> JointCheck:
    """Hold a plate's hole against the clearance holes of a screw."""
    what = f"clearance in {layer.label}"
    if layer.hole_mm is None:
        return JointCheck(what, Outcome.OPEN, "the hole is not named (hole or at)")
    hole, table = layer.hole_mm[0], find_clearance(screw, layer.own)
    shown = f"hole {hole:.4g} mm, {screw} {major_mm:.4g} mm"
    if hole < major_mm:
        return JointCheck(what, Outcome.BAD, f"{shown}: the screw does not pass")
    if hole < table.fine_mm - SLACK_MM:
        return JointCheck(what, Outcome.BAD, f"{shown}: tighter than the fine clearance of {table.fine_mm:.4g} mm")
    if layer.hole_mm[1] > table.coarse_mm + SLACK_MM:
        return JointCheck(what, Outcome.BAD, f"{shown}: wider than the coarse clearance of {table.coarse_mm:.4g} mm")
    return JointCheck(what, Outcome.GOOD, f"{shown}: {hole - major_mm:.2f} mm of play")


def _order(stack: Sequence[Layer], nut: Nut | None) -> Iterator[JointCheck]:
    threaded = [k for k, layer in enumerate(stack) if layer.threaded]
    if not threaded and nut is None:
        yield JointCheck("hold", Outcome.BAD, "neither a threaded layer nor a nut: nothing holds the screw")
    elif threaded and nut is not None:
        yield JointCheck("hold", Outcome.BAD, "a threaded layer and a nut hold against each other")
    elif threaded and threaded != [len(stack) - 1]:
        yield JointCheck(
            "hold",
            Outcome.BAD,
            "the threaded layer is not the last: nothing draws the plates together",
        )


def _head(fastener: Fastener, first: Layer) -> Iterator[JointCheck]:
    if fastener.kind is FastenerKind.SUNK:
        fits = first.sink and fastener.title.endswith(first.sink)
        told = first.sink or "no countersink"
        yield JointCheck(f"head in {first.label}", judged(fits=bool(fits)), f"{fastener.title} over {told}")
    major = fastener.thread.major_mm if fastener.thread else 0.0
    yield from room("head", fastener.head_dia_mm, major, first, spanner=fastener.kind is FastenerKind.HEX)


def room(what: str, width_mm: float, major_mm: float, layer: Layer, *, spanner: bool) -> Iterator[JointCheck]:
    """Hold a head or nut against the edge of its plate and the holes beside it."""
    if layer.edge_mm is None or width_mm <= 0.0:
        return
    rules, radius = section("joint", layer.own), width_mm / 2.0
    edge = layer.edge_mm - radius
    bolt = section("edges", layer.own)["bolt"] * major_mm
    weak = f", centre nearer to it than {bolt:.4g} mm: weak" if layer.edge_mm < bolt - SLACK_MM else ""
    yield JointCheck(f"{what} to the edge of {layer.label}", judged(fits=edge >= -SLACK_MM), f"{edge:.2f} mm{weak}")
    if layer.neighbour_mm is not None:
        clear = layer.neighbour_mm - radius
        needed = rules["head_clear"] + (rules["spanner"] * major_mm if spanner else 0.0)
        if clear < needed:
            outcome = Outcome.BAD if clear < 0.0 else Outcome.OPEN
            told = "it covers part of it" if clear < 0.0 else "look whether the tool comes round"
            yield JointCheck(f"{what} to the next hole of {layer.label}", outcome, f"{clear:.2f} mm: {told}")


def _nut_holds(nut: Nut, thread: Thread) -> JointCheck:
    same = nut.screw == thread.screw
    return JointCheck("nut", judged(fits=same), f"nut {nut.name} on {thread.name}" + ("" if same else ": another size"))


def _thread_holds(last: Layer, thread: Thread) -> tuple[float, JointCheck]:
    """Return the engagement that is aimed at, and how the last layer holds the screw."""
    what = f"thread in {last.label}"
    if not last.threaded:
        return 0.0, JointCheck(what, Outcome.BAD, "the last layer is not threaded")
    if last.thread and last.thread != thread.name:
        return last.thickness_mm, JointCheck(what, Outcome.BAD, f"{last.thread} is tapped, the screw is {thread.name}")
    material = last.bench.material if last.bench else None
    held = engagement(thread, last.thickness_mm, material, last.own)
    aim = min(last.thickness_mm, held.needed_mm or thread.major_mm)
    rule = f", {held.needed_mm:.4g} mm wanted" if held.needed_mm else ""
    text = f"{last.thickness_mm:.4g} mm, {held.threads:.1f} threads{rule}"
    if not last.thread and last.bench is not None:
        return aim, JointCheck(
            what, Outcome.BAD if held.fails else Outcome.OPEN, f"{text}; no tap is asked for at that hole"
        )
    return aim, JointCheck(what, judged(fits=not held.weak), text)


def _stand_out_mm(nut: Nut | None, thread: Thread, own: Sequence[Path]) -> float:
    return section("joint", own)["protrusion"] * thread.pitch_mm if nut else 0.0


def _standard(least_mm: float, fastener: Fastener, own: Sequence[Path]) -> float | None:
    return next((length for length in lengths_mm(fastener, own) if length >= least_mm - 1e-6), None)


def _length(
    length_mm: float, grip_mm: float, needed_mm: float, nut: Nut | None, thread: Thread, last: Layer
) -> JointCheck:
    """Tell what the chosen length engages and how far it stands out."""
    behind = length_mm - grip_mm
    if nut is None:
        out = behind - last.thickness_mm
        text = f"{length_mm:.4g} mm: grip {grip_mm:.4g}, engaged {min(behind, last.thickness_mm):.4g} mm"
        text += f", {out:.4g} mm stands out behind" if out > 1e-6 else ""
        return JointCheck("length", judged(fits=behind >= needed_mm - 1e-6), text)
    out = behind - nut.height_mm
    rules = section("joint", last.own)
    text = f"{length_mm:.4g} mm: grip {grip_mm:.4g}, nut {nut.height_mm:.4g}, {out:.4g} mm stands out"
    if out > rules["protrusion_most"] * thread.pitch_mm:
        text += ": a shorter one would do"
    return JointCheck("length", judged(fits=out >= rules["protrusion"] * thread.pitch_mm - 1e-6), text)


def bought(fastener: Fastener, length_mm: float, nut: Nut | None = None) -> str:
    """Return what to buy, with the length in the fastener's own unit."""
    inch = fastener.shoulder.is_inch if fastener.shoulder else fastener.is_inch
    shown = f"{length_mm / 25.4:.4g} in" if inch else f"{length_mm:g} mm"
    return f"{fastener.title} x {shown}" + (f", nut {nut.name}" if nut else "")
