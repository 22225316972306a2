"""The usual cautions: at the step where someone can be hurt, and for the material and the process."""

from collections.abc import Iterable, Sequence

from flatprep.bench.ops import Op
from flatprep.bench.part import BenchPart
from flatprep.bench.tabs import tabs_of
from flatprep.model.work import StepKind
from flatprep.practice.threads import THERMAL
from flatprep.profile.hardware.hazards import caution, first_caution

_TAPPED = (StepKind.TAP, StepKind.THREAD_INSERT)
THIN_MM = 2.0
"""Sheet that climbs the drill at break-through."""


def step_caution(op: Op, bench: BenchPart, *, first: bool) -> str:
    """Return the caution of a step; `first` is the part's first step."""
    if op.kind is StepKind.DEBURR and first:
        return " ".join(caution(hazard, bench.own) for hazard in _at_edges(bench))
    if op.kind is StepKind.DRILL and bench.thickness_mm is not None and bench.thickness_mm < THIN_MM:
        return caution("drilling_thin_sheet", bench.own)
    if op.kind is StepKind.DRILL:
        return caution("hot_slugs", bench.own) if bench.process.kind in THERMAL else ""
    if op.kind in _TAPPED:
        return " ".join(caution(hazard, bench.own) for hazard in _at_taps(bench))
    return caution("press_brake", bench.own) if op.kind is StepKind.BEND else ""


def _at_taps(bench: BenchPart) -> Iterable[str]:
    """Yield the hazards of tapping."""
    yield "tapping"
    if bench.family == "wear-plate":
        yield "tapping_wear_plate"


def _at_edges(bench: BenchPart) -> Iterable[str]:
    """Yield the hazards of dressing the edges of a part as it comes from the cutter."""
    if bench.process.kind in THERMAL:
        yield "deburr" if bench.is_metal else "cut_edges"
    if tabs_of(bench):
        yield "tab_stubs"


def job_cautions(parts: Sequence[BenchPart]) -> tuple[str, ...]:
    """Return the cautions of a whole job: what goes before this list, then those of its materials and processes."""
    found: list[str] = [first_caution(parts[0].own if parts else ())]
    for bench in parts:
        found += _of_part(bench)
    return tuple(dict.fromkeys(text for text in found if text))


def _of_part(bench: BenchPart) -> Iterable[str]:
    if bench.process.caution:
        yield bench.process.caution
    if bench.material is None:
        return
    for hazard in bench.material.hazards:
        yield caution(hazard, bench.own)
    yield from bench.material.cautions
