"""Joints with dowel pins: which plates hold the pin, which slide on it, and how long it may be."""

from collections.abc import Sequence

from flatprep.bench.joint_bolts import bought
from flatprep.bench.joint_layers import Layer, judged
from flatprep.job.values import JointAsk
from flatprep.model.work import JointCheck, JointReport, Outcome
from flatprep.practice.fasteners import Fastener, lengths_mm
from flatprep.profile.hardware.fits import limits

CUT_TOLERANCE_MM = 0.1
"""A hole whose limits are wider apart, or unknown, is no dowel hole."""


def work_out(joint: JointAsk, fastener: Fastener, stack: Sequence[Layer]) -> JointReport:
    """Return the report of a joint that a dowel locates."""
    pin = fastener.pin
    assert pin is not None
    size = limits(pin.diameter_mm, pin.pin_class, stack[0].own)
    fits = [_fit(layer, size.least_mm, size.most_mm) for layer in stack]
    checks = [check for check, _ in fits]
    if not any(tight for _, tight in fits):
        checks.append(JointCheck("hold", Outcome.BAD, "no plate holds the pin: it may fall out"))
    total = sum(layer.thickness_mm for layer in stack)
    length = joint.length_mm or max(
        (one for one in lengths_mm(fastener, stack[0].own) if one <= total + 1e-6), default=None
    )
    if length is None:
        checks.append(JointCheck("length", Outcome.BAD, f"no standard pin is as short as {total:.4g} mm"))
        return JointReport(joint.name, fastener.title, joint.count, total, "", tuple(checks))
    rest = total - length
    checks.append(
        JointCheck(
            "length", judged(fits=rest >= -1e-6), f"{length:.4g} mm in {total:.4g} mm of plates, {rest:.4g} mm below"
        )
    )
    return JointReport(joint.name, fastener.title, joint.count, total, bought(fastener, length), tuple(checks))


def _fit(layer: Layer, least_mm: float, most_mm: float) -> tuple[JointCheck, bool]:
    """Return how a plate takes the pin, and whether it holds it."""
    what = f"pin in {layer.label}"
    if layer.hole_mm is None:
        return JointCheck(what, Outcome.OPEN, "the hole is not named (hole or at)"), False
    low, high = layer.hole_mm
    text = f"hole {low:.3f} to {high:.3f}, pin {least_mm:.3f} to {most_mm:.3f} mm"
    if low == high:
        return JointCheck(what, Outcome.BAD, f"{text}: a cut hole is no dowel hole, ream it"), False
    loosest, tightest = high - least_mm, low - most_mm
    tight = loosest <= CUT_TOLERANCE_MM and tightest < 0.0 and (low + high) < (least_mm + most_mm)
    if tight:
        return JointCheck(what, Outcome.GOOD, f"{text}: up to {-tightest:.3f} mm tight, it holds the pin"), True
    return JointCheck(
        what, judged(fits=loosest <= CUT_TOLERANCE_MM), f"{text}: {tightest:.3f} to {loosest:.3f} mm of play"
    ), False
