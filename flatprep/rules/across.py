"""What is noticed between the parts of a job: hole patterns that nearly agree."""

from collections.abc import Sequence

from flatprep.measure.part import MeasuredPart
from flatprep.measure.patterns import Shared, shared_patterns
from flatprep.model.finding import Finding, Severity

LEAST_HOLES = 3
"""Two holes a few tenths further apart than two others are no pattern."""
NEAR_DIAMETER_MM = 0.5
"""Holes for the same bolt."""
RULE_ID = "nearly-same-pattern"


def near_misses(parts: Sequence[MeasuredPart]) -> tuple[Finding, ...]:
    """Note patterns of equal holes in two parts whose distances nearly agree, once a pair.

    Congruent ones are as they should be and are not told; so are patterns for other bolts, and those of two holes.
    """
    return tuple(_told(one) for one in shared_patterns(parts) if not one.congruent and _meant(one))


def _meant(shared: Shared) -> bool:
    alike = abs(shared.first.diameter_mm - shared.second.diameter_mm) <= NEAR_DIAMETER_MM
    return alike and len(shared.first.at) >= LEAST_HOLES


def _told(shared: Shared) -> Finding:
    here, there = shared.distances_mm
    xs, ys = zip(*shared.first.at, strict=True)
    return Finding(
        rule=RULE_ID,
        severity=Severity.NOTE,
        message=(
            f"{len(shared.first.at)} holes of {shared.first.diameter_mm:.4g} mm nearly agree with those of "
            f"{shared.second.part}: {here:.2f} mm here, {there:.2f} mm there"
        ),
        part=shared.first.part,
        at=(sum(xs) / len(xs), sum(ys) / len(ys)),
        measured=here,
        limit=there,
        unit="mm",
        remedy="If one bolt circle goes through both, draw it once and copy it.",
    )
