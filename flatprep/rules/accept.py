"""Findings that someone looked at and lets stand, with the reason written down."""

from collections.abc import Sequence
from dataclasses import replace
from math import dist

from flatprep.job.values import Accept
from flatprep.model.finding import Finding, Severity

NEAR_MM = 1.0
"""An accepted place this near to a finding's own is meant."""


def accepted(finding: Finding, accepts: Sequence[Accept]) -> Finding:
    """Turn a finding that is accepted into a note that gives the reason; others stay as they are."""
    for one in accepts:
        here = one.at is None or (finding.at is not None and dist(one.at, finding.at) <= NEAR_MM)
        if one.rule == finding.rule and here:
            message = f"{finding.message} (accepted: {one.reason})"
            return replace(finding, severity=Severity.NOTE, message=message)
    return finding
