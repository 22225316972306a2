"""Inside corners of a drawing opened for square mates, told as changes; those that cannot be are left and told."""

from collections.abc import Container, Iterator, Sequence

from flatprep.job.corners import Corners
from flatprep.measure.corners import Corner
from flatprep.measure.part import MeasuredPart
from flatprep.measure.relief import Relief
from flatprep.measure.relieved import ReliefAsk, among, relieved
from flatprep.model.drawing import Part
from flatprep.model.finding import Finding, Severity
from flatprep.repair.values import Change

_REMEDY = "open it by hand in the drawing, take a thinner cutter, or round the mate's corner"


def relieve_part(part: Part, ask: ReliefAsk, fixed: Container[int]) -> tuple[Part, list[Change], list[Finding]]:
    """Open the corners of a part, but for those of the contours `fixed`, which are not written as they are seen."""
    measured = MeasuredPart(part)
    missed = [c for c in measured.unreached_corners(ask.tool_radius_mm) if c.contour not in fixed]
    wanted = among(missed, ask.corners)
    opened, found = relieved(measured, ask, wanted)
    changes = [relief_change(one) for one in found if not one.why_not]
    refused = [_refused(part.name, one, ask) for one in found if one.why_not]
    return opened, changes, [*refused, *_others(part.name, missed, wanted, ask)]


def relief_change(one: Relief) -> Change:
    """Tell a corner that was opened."""
    kind = "T-bone" if one.kind == "t-bone" else "dogbone"
    return Change("relief", f"{kind} of radius {one.radius_mm:.3f} mm", one.corner.at)


def _refused(part: str, one: Relief, ask: ReliefAsk) -> Finding:
    return _finding(part, one.corner, ask, f"no relief in this corner: {one.why_not}", _REMEDY)


def _others(part: str, missed: Sequence[Corner], wanted: Sequence[Corner], ask: ReliefAsk) -> Iterator[Finding]:
    """Tell corners that were not asked for, all in one."""
    rest = [corner for corner in missed if corner not in wanted]
    if rest and ask.corners is Corners.SQUARE:
        many = (
            "a corner that is not square stays" if len(rest) == 1 else f"{len(rest)} corners that are not square stay"
        )
        yield _finding(
            part, rest[0], ask, f"{many} as drawn", "--corners all opens them too, where a mate seats in them"
        )


def _finding(part: str, corner: Corner, ask: ReliefAsk, message: str, remedy: str) -> Finding:
    return Finding(
        "inside-corner", Severity.WARNING, message, part, corner.at, corner.radius_mm, ask.tool_radius_mm, "mm", remedy
    )
