"""Which slots and bores of a job are worth a trial cut: those whose fit hangs on a tenth of a millimetre."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from flatprep.bench.part import BenchPart
from flatprep.measure.part import MeasuredPart
from flatprep.measure.slots import sheet_slots
from flatprep.model.coupon import Trial, TrialKind
from flatprep.practice.asked import all_work
from flatprep.practice.targets import targets_of

STEPS_MM = (-0.2, -0.1, 0.0, 0.1, 0.2)
"""Around the wanted size: a kerf's error and a sheet's lie within it (common practice)."""
FITTED = ("ream", "bore", "press")
"""Work that sits in the hole as it was cut, or finishes it."""
SAME_MM = 0.01


@dataclass(frozen=True, slots=True)
class Sheet:
    """A thickness of the job, what it measures where somebody measured it, and how wide slots for it are cut.

    Attributes
    ----------
    clearance_mm : float or None
        So much wider than the sheet measures; None: as drawn.
    """

    nominal_mm: float
    measured_mm: float | None = None
    clearance_mm: float | None = None

    @property
    def wanted_mm(self) -> float | None:
        """Width of the slots where the job has them fitted, else None."""
        if self.measured_mm is None or self.clearance_mm is None:
            return None
        return self.measured_mm + self.clearance_mm

    @property
    def said(self) -> str:
        """In words."""
        measures = f", which measures {self.measured_mm:g} mm" if self.measured_mm is not None else ""
        return f"a sheet of {self.nominal_mm:g} mm{measures}"


@dataclass(frozen=True, slots=True)
class _Wish:
    kind: TrialKind
    mate: str
    size_mm: float
    part: str


def trials(parts: Sequence[BenchPart], sheets: Sequence[Sheet]) -> tuple[tuple[Trial, ...], tuple[str, ...]]:
    """Return the trials for parts of one material, thickness and process, and what cannot be cut, in words.

    Parameters
    ----------
    parts
    sheets
        Every thickness of the job: a slot in one may take another.
    """
    groups: list[list[_Wish]] = []
    for wish in sorted(_wishes(parts, sheets), key=lambda w: (w.kind != TrialKind.SLOT, w.size_mm, w.mate, w.part)):
        last = groups[-1][-1] if groups else None
        if last and last.kind == wish.kind and wish.size_mm - last.size_mm <= SAME_MM:
            groups[-1].append(wish)
        else:
            groups.append([wish])
    least = {kind: _least_mm(parts[0], kind) for kind in TrialKind}
    found = [_trial(group, least[group[0].kind]) for group in groups]
    kept = tuple(one for one in found if one.sizes_mm)
    gone = tuple(
        f"{one.kind} of {one.wanted_mm:g} mm for {one.mate}: the process cuts none below {least[one.kind]:g} mm"
        for one in found
        if not one.sizes_mm
    )
    return kept, gone


def _wishes(parts: Sequence[BenchPart], sheets: Sequence[Sheet]) -> Iterator[_Wish]:
    for bench in parts:
        measured = MeasuredPart(bench.part)
        for sheet in sheets:
            for slot in sheet_slots(measured, sheet.nominal_mm):
                yield _Wish(TrialKind.SLOT, sheet.said, sheet.wanted_mm or slot.width_mm, bench.name)
        for work in all_work(bench.holes, bench.work, bench.texts, bench.units):
            if work.kind in FITTED:
                for target in targets_of(bench.holes, work):
                    if target.drawn_mm is not None:
                        yield _Wish(TrialKind.BORE, work.size, target.drawn_mm, bench.name)


def _least_mm(bench: BenchPart, kind: TrialKind) -> float:
    feature = "slot" if kind is TrialKind.SLOT else "hole"
    limit = bench.process.limit(feature, bench.family, bench.thickness_mm)
    return limit.error if limit else 0.0


def _trial(group: Sequence[_Wish], least_mm: float) -> Trial:
    wanted = group[0].size_mm
    sizes = tuple(round(wanted + step, 6) for step in STEPS_MM)
    mates = ", ".join(dict.fromkeys(wish.mate for wish in group))
    names = tuple(dict.fromkeys(wish.part for wish in group))
    return Trial(group[0].kind, mates, wanted, tuple(s for s in sizes if s >= max(least_mm, 0.1)), names)
