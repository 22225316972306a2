"""What a coating changes: threads and fits are masked, holes come out smaller, edges are broken rounder."""

import re
from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path

from flatprep.bench.ops import Op
from flatprep.bench.part import BenchPart
from flatprep.model.work import StepKind
from flatprep.profile.hardware.rules import section

_WORDS = {"powder": r"powder|paint|lacquer|enamel", "anodise": r"anodi[sz]", "zinc": r"zinc|galvani[sz]|plat(?:e|ing)"}
_MASKED = (StepKind.TAP, StepKind.REAM, StepKind.BORE, StepKind.THREAD_INSERT)
TIGHT_MM = 0.15
"""A clearance hole with less play than this after coating gets a word."""


def growth_mm(finish: str, own: Sequence[Path] = ()) -> tuple[str, float, float] | None:
    """Return the kind of coating and what it adds a side, least and most, mm; None where it adds nothing known."""
    for kind, pattern in _WORDS.items():
        if re.search(pattern, finish, re.IGNORECASE):
            least, most = section("finish_growth", own).numbers(kind)
            return kind, least, most
    return None


def coated(op: Op, bench: BenchPart) -> Op:
    """Return the operation with what the part's finish means for it."""
    grown = growth_mm(bench.finish, bench.own)
    if grown is None:
        return op
    kind, least, most = grown
    if op.kind in _MASKED:
        return op.with_note(f"mask before {kind} coating: it adds {1000 * least:g} to {1000 * most:g} µm a side")
    if op.kind is StepKind.INSPECT and op.at and op.tool_dia_mm is not None and 2.0 * most >= TIGHT_MM:
        return op.with_note(f"coating leaves {op.tool_dia_mm - 2.0 * most:.2f} mm or a little more")
    if op.kind is StepKind.DEBURR and not op.at:
        return replace(
            op, note=op.note.replace("break edges 0.2 to 0.5 mm", "round edges 0.5 mm or more for the coating")
        )
    return op
