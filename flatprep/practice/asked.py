"""What is asked of the holes of a part, by the job and by the drawing's own callouts."""

from collections.abc import Iterable, Iterator, Sequence
from functools import lru_cache

from flatprep.job.values import Work
from flatprep.measure.holes import Hole
from flatprep.model.drawing import Drawing, Text
from flatprep.practice.callout_holes import drawn_work
from flatprep.practice.targets import Target, targets_of


def all_work(
    holes: Sequence[Hole], work: Sequence[Work], texts: Iterable[Text] = (), unit: str = "mm"
) -> tuple[Work, ...]:
    """Return the job's work and, for holes that the job says nothing of, what the drawing's callouts ask."""
    return _all_work(tuple(holes), tuple(work), tuple(texts), unit)


@lru_cache(maxsize=8)
def _all_work(holes: tuple[Hole, ...], work: tuple[Work, ...], texts: tuple[Text, ...], unit: str) -> tuple[Work, ...]:
    said = {target.at for one in work for target in targets_of(holes, one)}
    drawn = [one for one in drawn_work(holes, texts, unit).work if not set(one.at) & said]
    return (*work, *drawn)


def asked_at(
    holes: Sequence[Hole], work: Sequence[Work], drawing: Drawing, kinds: Sequence[str]
) -> Iterator[tuple[Work, Target]]:
    """Yield every place that work of some kinds is asked at, by the job or by the drawing's callouts."""
    for one in all_work(holes, work, drawing.texts, drawing.units):
        if one.kind in kinds:
            for target in targets_of(holes, one):
                yield one, target
