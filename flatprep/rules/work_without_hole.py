"""work-without-hole: bench work that the job asks for on holes that the drawing does not have."""

from collections.abc import Iterator

from flatprep.job.values import Work
from flatprep.model.finding import Finding, Severity
from flatprep.practice.targets import targets_of
from flatprep.rules.base import Context, Rule


def check(ctx: Context) -> Iterator[Finding]:
    """Count the holes that each piece of work matches, over all parts of the drawing."""
    for asked in ctx.job_part.work if ctx.job_part else ():
        found = sum(len(targets_of(part.holes, asked)) for part in ctx.parts)
        what = f"{asked.kind.replace('_', ' ')} {asked.size}"
        if found == 0 and asked.hole_mm is not None:
            message = f"{what} is asked for holes of a diameter that the drawing does not have"
            yield Finding(RULE.id, Severity.ERROR, message, measured=None, limit=asked.hole_mm, unit="mm")
        elif asked.count is not None and found != asked.count:
            yield Finding(RULE.id, Severity.ERROR, _miscounted(asked, what), None, None, found, asked.count)


def _miscounted(asked: Work, what: str) -> str:
    return f"{what} is asked for {asked.count} {'places' if asked.at else 'holes'}, not as many are there"


RULE = Rule(
    id="work-without-hole",
    severity=Severity.ERROR,
    summary="Bench work in the job names holes that the drawing does not have, or another number of them.",
    why="Work that matches nothing would be dropped in silence: the part comes back without its thread.",
    remedy="Correct hole, at or count in the job's [[part.work]], or the drawing.",
    check=check,
)
