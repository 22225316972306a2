"""Repair as text for people: what was changed, kind by kind, and what was left to them."""

from collections.abc import Iterator, Sequence

from flatprep.model.drawing import Part
from flatprep.model.finding import Finding, Severity
from flatprep.repair.values import Change, Repaired
from flatprep.report.figures import area, counted, length, place, size

KINDS = {
    "unit": "unit",
    "layer": "layers",
    "exploded": "blocks taken apart",
    "curve": "curves written as arcs",
    "flattened": "flattened to z = 0",
    "joined": "ends joined",
    "double": "doubles taken out",
    "no-length": "without length, taken out",
    "rounded": "chords turned into arcs and circles",
    "slot": "slots made to fit the sheet",
    "relief": "inside corners opened",
    "left-out": "left out",
}
"""Kinds of change in the order in which they are told, with their headings."""
TOLD = 12
"""So many changes of a kind are told one by one; of more, the first ones and how many there are."""


def repair_text(repaired: Repaired, out: str, *, every: bool = False) -> str:
    """Return the text for one drawing; with `every`, each change has its line.

    Parameters
    ----------
    repaired
    out
        Where it was written, as it was given.
    """
    units = repaired.units
    lines = [f"{repaired.file} -> {out}"]
    lines += [f"  {line}" for line in _parts(repaired, units)]
    for kind, heading in KINDS.items():
        group = [c for c in repaired.changes if c.kind == kind]
        if group:
            lines.append(f"  {heading}: {len(group)}")
            lines += _changes(group, units, every=every)
    if repaired.left:
        lines.append("  left as it is, for somebody to decide:")
        lines += _left(repaired.left, units, every=every)
    lines.append(f"{counted(len(repaired.changes), 'change')}, {_verdict(repaired)}")
    return "\n".join(lines)


def _verdict(repaired: Repaired) -> str:
    if not repaired.left:
        return "nothing left wrong"
    return f"{counted(len(repaired.left), 'thing')} that repair will not guess"


def _parts(repaired: Repaired, units: str) -> Iterator[str]:
    for part in repaired.after:
        yield _part(part, units)
    before, after = (sum(p.area_mm2 for p in parts) for parts in (repaired.before, repaired.after))
    if before > 0.0 and abs(after - before) > 1e-9 * before:
        yield f"net area {100.0 * (after / before - 1.0):+.4f} %"


def _part(part: Part, units: str) -> str:
    return (
        f"{part.name}: {size(*part.size_mm, units)}, {area(part.area_mm2, units)}, {counted(len(part.holes), 'hole')}"
    )


def _changes(group: Sequence[Change], units: str, *, every: bool) -> Iterator[str]:
    shown = group if every or len(group) <= TOLD else group[: TOLD - 2]
    for change in shown:
        where = f" at {place(change.at, units)}" if change.at is not None else ""
        yield f"    {change.message}{where}{_measured(change, units)}"
    if len(shown) < len(group):
        sizes = [c.measured_mm for c in group if c.measured_mm is not None]
        worst = f"; the largest {_what(group[0])} {_fine(max(sizes), units)}" if sizes else ""
        yield f"    and {len(group) - len(shown)} more{worst}"


def _what(change: Change) -> str:
    return "deviation" if change.kind == "rounded" else "gap"


def _measured(change: Change, units: str) -> str:
    if change.measured_mm is None or change.kind not in ("joined", "rounded"):
        return ""
    return f", {_what(change)} {_fine(change.measured_mm, units)}"


def _fine(mm: float, units: str) -> str:
    """Return a small length to a micrometre: hundredths would show most gaps as 0."""
    return f"{mm:.3f} mm" if units not in ("in", "ft") else f"{mm / 25.4:.4f} in"


def _left(left: Sequence[Finding], units: str, *, every: bool) -> Iterator[str]:
    """Tell what is left, rule by rule, the remedy once for all that have the same."""
    for rule in dict.fromkeys(finding.rule for finding in left):
        group = [finding for finding in left if finding.rule == rule]
        shown = group if every or len(group) <= TOLD else group[: TOLD - 2]
        for finding, following in zip(shown, [*shown[1:], None], strict=True):
            yield f"    {_loud(finding)} {finding.rule}: {finding.message}{_where(finding, units)}"
            if finding.remedy and (following is None or following.remedy != finding.remedy):
                yield f"      → {finding.remedy}"
        if len(shown) < len(group):
            yield f"    and {len(group) - len(shown)} more"


def _loud(finding: Finding) -> str:
    return "ERROR" if finding.severity is Severity.ERROR else str(finding.severity)


def _where(finding: Finding, units: str) -> str:
    where = f" at {place(finding.at, units)}" if finding.at is not None else ""
    return where + (f", {length(finding.measured, units)}" if finding.measured else "")
