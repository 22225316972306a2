"""unsupported-entity: what the drawing holds and the reader did not use."""

from collections.abc import Iterator

from flatprep.model.drawing import Skipped
from flatprep.model.finding import Finding, Severity
from flatprep.rules.base import Context, Rule, told

# fmt: off
NEVER_CUT = frozenset((
    "DIMENSION", "LEADER", "MULTILEADER", "MLEADER", "HATCH", "POINT", "VIEWPORT", "IMAGE", "XLINE", "RAY", "ATTDEF",
    "TOLERANCE", "ACAD_TABLE", "WIPEOUT", "OLE2FRAME", "OLEFRAME", "PDFUNDERLAY", "DWFUNDERLAY", "DGNUNDERLAY",
    "LAYOUT", "INVISIBLE",
))
# fmt: on
"""Kinds that draw no outline: leaving them out is noted, not warned of."""


def check(ctx: Context) -> Iterator[Finding]:
    """Tell what was left out once for each kind, layer and reason."""
    alike: dict[tuple[str, str, str], list[Skipped]] = {}
    for one in ctx.drawing.skipped:
        alike.setdefault((one.kind, one.layer, one.reason), []).append(one)
    for (kind, layer, reason), group in alike.items():
        count = f"{len(group)} x " if len(group) > 1 else ""
        where = f" on layer {layer}" if layer else ""
        yield Finding(
            rule=RULE.id,
            severity=Severity.NOTE if kind in NEVER_CUT else Severity.WARNING,
            message=f"{count}{kind}{where} not used: {reason}",
            at=next((one.at for one in group if one.at), None),
            handles=tuple(one.handle for one in group if one.handle),
        )
    yield from told(RULE.id, Severity.WARNING, ctx.faults(RULE.id))


RULE = Rule(
    id="unsupported-entity",
    severity=Severity.WARNING,
    summary="Something in the drawing was not used.",
    why="What is left out is not cut; if it was meant to be, the part comes out wrong.",
    remedy="Export it as lines, arcs, circles, polylines or splines, or delete it if it is no part of the outline.",
    check=check,
)
