"""Coupons of a job: one drawing for each material, thickness and process that its parts are cut from and by."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from math import ceil
from pathlib import Path

from flatprep.api.pieces import Piece, ReadJob
from flatprep.base.files import make_folder, write_together
from flatprep.base.safe_names import safe_stems
from flatprep.bench.cautions import job_cautions
from flatprep.bench.coupon_plates import Room, plates
from flatprep.bench.part import BenchPart
from flatprep.bench.trials import Sheet, trials
from flatprep.drawing.write import NOTE, clean_drawing
from flatprep.job.values import Job
from flatprep.model.coupon import Coupon

STEP_MM = 0.5
"""Webs of a coupon are rounded up to this."""
LEAST_WEB_MM = 4.0
"""A coupon is handled: thinner webs bend between the fingers, whatever the process can cut (common practice)."""


@dataclass(frozen=True, slots=True)
class Coupons:
    """The coupons of a job, and the cautions for cutting them."""

    coupons: tuple[Coupon, ...]
    cautions: tuple[str, ...] = ()


def coupons_of(read: ReadJob) -> Coupons:
    """Return a coupon for each material, thickness and process in which the job has slots for sheets, or fits.

    Raises
    ------
    JobError
        When bench work names fits that do not exist.
    """
    groups: dict[tuple[str, float, str], list[Piece]] = {}
    for piece in read.pieces:
        ask = piece.ask
        if ask.material is not None and ask.thickness_mm is not None:
            groups.setdefault((ask.material.id, ask.thickness_mm, ask.process.id), []).append(piece)
    sheets = _sheets(read.job)
    stems = safe_stems([f"coupon-{material}-{thickness:g}mm-{process}" for material, thickness, process in groups])
    made = [_coupon(stem, [p.bench for p in group], sheets) for stem, group in zip(stems, groups.values(), strict=True)]
    kept = [(one, group) for one, group in zip(made, groups.values(), strict=True) if one.trials or one.left_out]
    cautions = job_cautions([piece.bench for _, group in kept for piece in group]) if kept else ()
    return Coupons(tuple(one for one, _ in kept), cautions)


def write_coupons(made: Coupons, folder: Path) -> tuple[Path, ...]:
    """Write the drawings of coupons, all together or not at all.

    Raises
    ------
    OutputError
        When the folder cannot be written into.
    """
    make_folder(folder)
    return write_together(_files(made.coupons, folder))


def _files(coupons: Sequence[Coupon], folder: Path) -> Iterator[tuple[Path, str]]:
    for one in coupons:
        if one.plates:
            cut = [contour for part in one.plates for contour in (*part.holes, part.outer)]
            yield folder / f"{one.stem}.dxf", clean_drawing(cut, [], [], [], one.labels)


def _sheets(job: Job) -> tuple[Sheet, ...]:
    """Every thickness of the job, the thinnest first, with what the calliper says where it says one thing."""
    clearances = {part.slot_clearance_mm for part in job.parts}
    clearance = clearances.pop() if len(clearances) == 1 else None
    nominals = {part.thickness_mm for part in job.parts if part.thickness_mm}
    return tuple(Sheet(nominal, _measured(job, nominal), clearance) for nominal in sorted(nominals))


def _measured(job: Job, nominal_mm: float) -> float | None:
    said = {s.measured_thickness_mm for s in job.stock if s.thickness_mm == nominal_mm}
    return said.pop() if len(said) == 1 else None


def _coupon(stem: str, parts: Sequence[BenchPart], sheets: Sequence[Sheet]) -> Coupon:
    first = parts[0]
    found, left_out = trials(parts, sheets)
    cut, labels = plates(found, _room(first), name=stem, inch=first.inch, layer=NOTE)
    material = first.material.id if first.material else ""
    return Coupon(stem, material, first.thickness_mm or 0.0, first.process.id, found, cut, labels, left_out)


def _room(bench: BenchPart) -> Room:
    """Return what the process asks for between edges, its warnings kept too, and of a part."""
    limits = [bench.process.limit(name, bench.family, bench.thickness_mm) for name in ("web", "edge", "part")]
    web, edge, part = (max(limit.error, limit.warn or 0.0) if limit else 0.0 for limit in limits)
    least = max(web, edge, LEAST_WEB_MM)
    return Room(ceil(least / STEP_MM - 1e-9) * STEP_MM, part, max(bench.process.spacing_mm, bench.process.kerf_mm))
