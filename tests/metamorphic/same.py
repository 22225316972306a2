"""What must be the same for every way of writing a drawing."""

from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass
from functools import cache
from pathlib import Path

from flatprep.base.tolerances import DEFAULT
from flatprep.drawing.read import ReadOptions, read
from flatprep.model.drawing import Drawing
from flatprep.model.finding import Finding
from flatprep.profile.material_load import load_material
from flatprep.profile.process_load import load_process
from flatprep.rules import run
from flatprep.rules.base import Context

from .vary import Variant, mapped, near, varied

AREA_SHARE = 1e-4
NOT_OF_THE_PART = {"unknown-units", "unsupported-entity", "layer-role", "text-not-outlined"}
"""Findings about the file rather than the part; exploding and wrapping may change how they are counted."""
MEASURED_MM = 0.02
TURNING = {"loose-island", "small-part"}
"""Measured on the upright box, which changes when a part is turned by other than quarter turns."""


@cache
def _ask():
    return load_process("fibre-laser", ()), load_material("mild-steel", ())


def findings_of(drawing: Drawing) -> list[Finding]:
    """Findings about the part, for 3 mm mild steel on a laser."""
    process, material = _ask()
    found = run(Context(drawing, process, material, 3.0))
    return [f for f in found if f.rule not in NOT_OF_THE_PART and not _on_the_limit(f)]


def _on_the_limit(finding: Finding) -> bool:
    """Tell whether a measure is so near its limit that the slack for drawings in inches decides."""
    if finding.measured is None or finding.limit is None:
        return False
    return abs(finding.measured - finding.limit) <= DEFAULT.limit_chord_mm + 1e-4


@dataclass(frozen=True)
class Base:
    """A drawing as it is read from its own file."""

    drawing: Drawing
    findings: list[Finding]


@cache
def base_of(path: Path, unit: str) -> Base:
    """Read a drawing, once."""
    drawing = read(path, ReadOptions(units=unit))
    return Base(drawing, findings_of(drawing))


def differences(path: Path, unit: str, how: Variant, folder: Path) -> tuple[list[str], list[str]]:
    """Say what is not the same in a variant: of the parts, and of the findings."""
    base = base_of(path, unit)
    other = read(varied(path, unit, how, folder / "variant.dxf"), ReadOptions(units=how.unit))
    parts = list(part_differences(base.drawing, other))
    return parts, list(finding_differences(base.findings, findings_of(other), how))


def part_differences(base: Drawing, other: Drawing) -> Iterator[str]:
    """Say how the parts differ, whatever their order."""
    if len(base.parts) != len(other.parts):
        yield f"{len(base.parts)} parts, {len(other.parts)} in the variant"
        return
    keys = [sorted((len(p.holes), p.area_mm2, p.cut_length_mm) for p in d.parts) for d in (base, other)]
    for (holes, area, cut), (holes2, area2, cut2) in zip(*keys, strict=True):
        if holes != holes2:
            yield f"{holes} holes, {holes2} in the variant"
        elif abs(area - area2) > AREA_SHARE * area:
            yield f"area {area:.3f}, {area2:.3f} in the variant"
        elif abs(cut - cut2) > AREA_SHARE * cut:
            yield f"cut length {cut:.3f}, {cut2:.3f} in the variant"


def finding_differences(base: list[Finding], other: list[Finding], how: Variant) -> Iterator[str]:
    """Say which findings have no counterpart of the same rule, severity, place and measure."""
    counts = [Counter(_kind(f) for f in group) for group in (base, other)]
    # of these it is known that there are some; how many depends on how the lines are told apart
    counts = [Counter({k: 1 if k[0] in OF_LINES else n for k, n in c.items()}) for c in counts]
    if counts[0] != counts[1]:
        lost, new = dict(counts[0] - counts[1]), dict(counts[1] - counts[0])
        yield f"findings lost {lost}, new {new}"
        return
    rest = list(other)
    for finding in (f for f in base if f.rule not in OF_LINES):
        match = next((f for f in rest if _alike(finding, f, how)), None)
        if match is None:
            yield f"{finding.rule} at {finding.at} {finding.measured}: no counterpart"
        else:
            rest.remove(match)


def _alike(a: Finding, b: Finding, how: Variant) -> bool:
    if a.rule != b.rule or a.severity != b.severity:
        return False
    if a.rule in TURNING and how.turn_deg % 90.0:
        return True
    if a.measured is not None and b.measured is not None and abs(a.measured - b.measured) > MEASURED_MM:
        return False
    if a.at is None or b.at is None or a.rule in OF_GROUPS:
        return True
    return near(mapped(a.at, how), b.at, 0.5)


OF_LINES = {"open-contour", "duplicate-line", "tiny-segment", "self-crossing"}
"""Told for lines, several in one finding where they are many: only whether there are any is compared."""


OF_GROUPS = {"unclear-hole", "hole-near-bend", "thin-web", "narrow-slot"}
"""Told at the first, or at any, of several places that are alike: teeth of one width, holes of one size."""


def _kind(finding: Finding) -> tuple[str, str]:
    return finding.rule, str(finding.severity)


def is_ambiguous(drawing: Drawing) -> bool:
    """Tell whether outlines cross or branch, so that a drawing has no one reading."""
    crossing = any(f.kind == "self-crossing" or "branch" in f.detail for f in drawing.faults)
    return crossing or any("share an edge" in f.detail for f in drawing.faults)
