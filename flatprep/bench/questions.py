"""What has to be asked back: callouts that are not certain, bare holes of a telling size, sides not named."""

from collections.abc import Iterator

from flatprep.bench.part import BenchPart
from flatprep.job.values import Work
from flatprep.measure.holes import Hole
from flatprep.practice.callout_holes import drawn_work
from flatprep.practice.meanings import is_unclear, meanings, nominal_of
from flatprep.practice.targets import targets_of

SIDED = ("countersink", "counterbore")
"""Work that can be done from one side only."""


def questions(bench: BenchPart, work: tuple[Work, ...]) -> tuple[str, ...]:
    """Return the questions about a part; nothing in them is taken as a fact.

    Parameters
    ----------
    work
        Everything that is asked of the part, by the job and by the drawing.
    """
    asked = [*drawn_work(bench.holes, bench.texts, bench.units).questions, *_sides(work), *_bare(bench, work)]
    return tuple(dict.fromkeys(asked))


def _sides(work: tuple[Work, ...]) -> Iterator[str]:
    for one in work:
        if one.kind in SIDED and one.side is None:
            yield f"{one.kind} {one.size}: from which side, A or B?"


def _bare(bench: BenchPart, work: tuple[Work, ...]) -> Iterator[str]:
    said = {target.at for one in work for target in targets_of(bench.holes, one)}
    groups: dict[tuple[float, str], list[Hole]] = {}
    for hole in bench.holes:
        if hole.at not in said:
            groups.setdefault((round(hole.width_mm, 2), str(hole.shape)), []).append(hole)
    for (size, _), holes in sorted(groups.items()):
        found = meanings(holes[0])
        if found:
            yield f"{_counted(holes)} of {size:g} mm: meant as {' or '.join(found[:4])}?"
        elif is_unclear(holes[0]):
            name = nominal_of(size, 0.01)
            yield f"{_counted(holes)} of {size:g} mm, the bare size of {name}: a thread, a clearance hole or a fit?"


def _counted(holes: list[Hole]) -> str:
    return "1 hole" if len(holes) == 1 else f"{len(holes)} holes"
