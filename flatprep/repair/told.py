"""What the reader noticed, sorted: what repair has put right, and what it leaves to a person."""

from collections.abc import Iterator
from dataclasses import replace

from flatprep.drawing.collect import NOT_CUT
from flatprep.drawing.roles import role_of
from flatprep.drawing.write import BEND, CUT, MARK, NOTE
from flatprep.model.drawing import Drawing, Fault, Role, Skipped, Text
from flatprep.model.finding import Finding, Severity
from flatprep.practice.callouts import parse_callouts
from flatprep.repair.rearc import Rounded
from flatprep.repair.values import Change, Place

OWN_LAYERS = (CUT, MARK, BEND, NOTE)
_MENDED = ("duplicate-line", "tiny-segment", "layer-role")
"""Kinds of faults that repair puts right, or that are guesses it tells as changes."""
_ERRORS = ("open-contour", "self-crossing", "empty-drawing")
_REMEDY = {
    "open-contour": "close it in the drawing, or take it off the cut layer with --layer NAME=mark",
    "self-crossing": "trim the lines where they cross, so that every outline closes without a crossing",
    "off-plane": "check that everything on layer CUT is to be cut through",
    "unknown-units": "say it with --units",
    "unsupported-entity": "export it as lines, arcs or polylines, or delete it",
    "empty-drawing": "check that the outline was exported, lies in model space, and closes",
    "text-not-outlined": "turn it into outlines, or put it on a layer for notes",
}


def changes_of(drawing: Drawing, gap_mm: float) -> Iterator[Change]:
    """Tell what reading alone has put right; one change a place."""
    if drawing.units != "mm":
        yield Change("unit", f"written in mm; it was drawn in {drawing.units}")
    for one in drawing.simplified:
        if one.kind == "INSERT":
            yield Change("exploded", f"block “{one.name}” taken apart", one.at, handles=(one.handle,))
        else:
            yield Change("curve", f"{one.kind.lower()} written as arcs within 0.001 mm", one.at, handles=(one.handle,))
    for fault in drawing.faults:
        yield from _change(fault, gap_mm)
    for name, role, why in drawing.roles:
        if name not in OWN_LAYERS and role != "ignore":
            yield Change("layer", f"layer “{name}” written to {str(role).upper()}{_because(why)}")
    for name, kind, role, why in drawing.linetypes:
        if role != "ignore":
            yield Change("layer", f"{kind} lines on layer “{name}” written to {str(role).upper()}: {why}")
    yield from _left_out(drawing)


def _because(why: str) -> str:
    return "" if why == "nothing says otherwise" else f": {why}"


def _change(fault: Fault, gap_mm: float) -> Iterator[Change]:
    kind, places = fault.kind, fault.places or (fault.at,)
    if kind == "open-contour" and is_joined(fault, gap_mm):
        for at in places:
            gap = fault.measured_mm if at == fault.at else None
            yield Change("joined", "two ends joined", at, gap, fault.handles)
    elif kind == "duplicate-line":
        for at in places:
            yield Change("double", _single(fault), at, handles=fault.handles)
    elif kind == "tiny-segment":
        for at in places:
            yield Change("no-length", "an entity without length taken out", at, handles=fault.handles)
    elif kind == "off-plane":
        yield Change("flattened", fault.detail, fault.at, handles=fault.handles)
    elif kind == "layer-role" and fault.handles:
        yield Change("left-out", fault.detail, fault.at, handles=fault.handles)


def _single(fault: Fault) -> str:
    return "the second of two equal lines taken out" if "twice" in fault.detail else fault.detail


def is_joined(fault: Fault, gap_mm: float) -> bool:
    """Tell whether an open contour is one that repair has closed."""
    return fault.closed and fault.measured_mm is not None and fault.measured_mm <= gap_mm


def _left_out(drawing: Drawing) -> Iterator[Change]:
    for name, role, why in drawing.roles:
        if role == "ignore":
            yield Change("left-out", f"layer “{name}”: {why}")
    for name, linetype, role, why in drawing.linetypes:
        if role == "ignore":
            yield Change("left-out", f"{linetype} lines on layer “{name}”: {why}")
    for kind, layer, reason, group in _alike(drawing):
        if kind in NOT_CUT or kind == "LAYOUT":
            handles = tuple(s.handle for s in group if s.handle)
            where = f" on layer “{layer}”" if layer else ""
            yield Change("left-out", f"{len(group)} x {kind}{where}: {reason}", group[0].at, handles=handles)


def _alike(drawing: Drawing) -> list[tuple[str, str, str, list[Skipped]]]:
    groups: dict[tuple[str, str, str], list[Skipped]] = {}
    for one in drawing.skipped:
        groups.setdefault((one.kind, one.layer, one.reason), []).append(one)
    return [(*key, group) for key, group in groups.items()]


def left_of(drawing: Drawing, gap_mm: float) -> Iterator[Finding]:
    """Tell what is still wrong because it cannot be known how it should be."""
    if not drawing.parts:
        yield _finding("empty-drawing", "no outline closes, so there is no part", None)
    for fault in drawing.faults:
        yield from _left(fault, gap_mm)
    for kind, layer, reason, group in _alike(drawing):
        if kind not in NOT_CUT and kind != "LAYOUT":
            handles = tuple(s.handle for s in group if s.handle)
            where = f" on layer “{layer}”" if layer else ""
            message = f"{len(group)} x {kind}{where} not used: {reason}"
            yield _finding("unsupported-entity", message, group[0].at, handles)
    for text in drawing.texts:
        if stands_on_part(drawing, text):
            message = f"“{' '.join(text.text.split())[:40]}” stands as text on the part and will not be cut"
            yield _finding("text-not-outlined", message, text.at, (text.handle,))


def _left(fault: Fault, gap_mm: float) -> Iterator[Finding]:
    if fault.kind in _MENDED or is_joined(fault, gap_mm) or (fault.kind == "off-plane" and fault.measured_mm == 0.0):
        return
    found = _finding(fault.kind, fault.detail, fault.at, fault.handles)
    if fault.measured_mm is not None:
        found = replace(found, measured=fault.measured_mm, unit="mm")
        if fault.closed:
            found = replace(found, remedy=f"--gap {fault.measured_mm + 0.005:.2f}mm closes it with a straight line")
    yield found


def _finding(rule: str, message: str, at: Place | None, handles: tuple[str, ...] = ()) -> Finding:
    severity = Severity.ERROR if rule in _ERRORS else Severity.WARNING
    return Finding(rule, severity, message, at=at, remedy=_REMEDY.get(rule, ""), handles=handles)


def stands_on_part(drawing: Drawing, text: Text) -> bool:
    """Tell whether a text lies on a part and on a layer that may be cut: letters that will be missing."""
    roles = {name: role for name, role, _ in drawing.roles}
    if (roles.get(text.layer) or role_of(text.layer, "", {}, off=False).role) is not Role.CUT:
        return False
    if text.points_to or parse_callouts(text.text, drawing.units):
        return False  # it speaks of the part
    boxes = (part.outer.bounds for part in drawing.parts)
    return any(x0 <= text.at[0] <= x1 and y0 <= text.at[1] <= y1 for x0, y0, x1, y1 in boxes)


def rounded_change(one: Rounded) -> Change:
    """Tell an arc or circle that took the place of chords."""
    if one.sweep_deg >= 360.0:
        message = f"circle of diameter {2.0 * one.radius_mm:.3f} mm for {one.chords} chords"
    else:
        message = f"arc of radius {one.radius_mm:.3f} mm over {one.sweep_deg:.1f}° for {one.chords} chords"
    return Change("rounded", message, one.at, one.deviation_mm)


__all__ = ["changes_of", "is_joined", "left_of", "rounded_change", "stands_on_part"]
