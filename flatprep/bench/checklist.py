"""The bench work of a job: per part the steps in order, and the kit list."""

from collections.abc import Sequence
from dataclasses import replace
from itertools import groupby

from flatprep.bench.bends import BendLines, bend_lines, check_bends
from flatprep.bench.cautions import job_cautions, step_caution
from flatprep.bench.finish import coated
from flatprep.bench.joints import check_joints
from flatprep.bench.match import Found, check_counts, places_of, targets
from flatprep.bench.ops import Op
from flatprep.bench.part import BenchPart
from flatprep.bench.plan import plan, reason
from flatprep.bench.questions import questions
from flatprep.bench.sides import opposite_note, side_bound
from flatprep.job.values import JointAsk
from flatprep.model.work import Checklist, PartSteps, Step, Tool
from flatprep.practice.asked import all_work


def checklist(parts: Sequence[BenchPart], joints: Sequence[JointAsk] = ()) -> Checklist:
    """Return the bench work of a job's parts, and its joints worked out.

    Raises
    ------
    JobError
        When work names holes that are not there, or not so many, or a thread, fit or head that is not known; the
        message names file, key and value.
    """
    done: list[PartSteps] = []
    for _, group in groupby(parts, key=lambda bench: bench.where or bench.name):
        done += _drawing(list(group))
    return Checklist(tuple(done), job_cautions(parts), _kit(done), check_joints(joints, parts))


def _drawing(group: list[BenchPart]) -> list[PartSteps]:
    """Return the steps of the parts of one drawing, which share the job's words."""
    found = [(bench, places_of(bench)) for bench in group]
    bends = [(bench, bend_lines(bench)) for bench in group]
    check_counts(found)
    check_bends(bends)
    return [_part(bench, places, lines) for (bench, places), (_, lines) in zip(found, bends, strict=True)]


def _part(bench: BenchPart, places: Found, bends: tuple[BendLines, ...]) -> PartSteps:
    full = replace(bench, work=all_work(bench.holes, bench.work, bench.texts, bench.units))
    drawn = tuple(targets(full, work) for work in full.work[len(bench.work) :])
    ops = [coated(opposite_note(op, bench), bench) for op in plan(full, (*places, *drawn), bends)]
    steps = tuple(_step(n, op, bench) for n, op in enumerate(ops, 1))
    bound = side_bound(full.work, bench.bends, bench.good_face)
    flip = f"not to be turned over to save material: {bound}" if bound else ""
    return PartSteps(bench.name, bench.quantity, steps, bench.quantity_opposite, questions(bench, full.work), flip)


def _step(order: int, op: Op, bench: BenchPart) -> Step:
    return Step(
        order=order, kind=op.kind, size=op.size, tool_dia_mm=op.tool_dia_mm, depth_mm=op.depth_mm,
        count=len(op.at) if op.count is None else op.count, at=op.at, cut_dia_mm=op.cut_dia_mm, side=op.side,
        note=op.note, caution=step_caution(op, bench, first=order == 1), tool=op.tool, why=reason(op),
        limits_mm=op.limits_mm, problem=op.problem,
    )  # fmt: skip


def _kit(parts: Sequence[PartSteps]) -> tuple[Tool, ...]:
    """Return every tool of the job with how often it is used, pieces counted."""
    uses: dict[str, int] = {}
    names: dict[str, list[str]] = {}
    for part in parts:
        for step in part.steps:
            if step.tool:
                pieces = part.quantity + part.quantity_opposite
                uses[step.tool] = uses.get(step.tool, 0) + step.count * pieces
                names.setdefault(step.tool, []).append(part.name)
    return tuple(Tool(tool, uses[tool], tuple(dict.fromkeys(names[tool]))) for tool in sorted(uses))
