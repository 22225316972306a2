"""Every rule, one module each, in one tuple that a person can read."""

from flatprep.model.finding import Finding, Severity
from flatprep.rules import (
    duplicate_line,
    empty_drawing,
    inside_corner,
    layer_role,
    loose_island,
    narrow_slot,
    not_measured,
    off_plane,
    open_contour,
    self_crossing,
    several_parts,
    small_hole,
    small_part,
    text_not_outlined,
    thickness_out_of_range,
    thin_web,
    tiny_segment,
    too_large,
    unknown_units,
    unsafe_material,
    unsupported_entity,
    wrong_process,
)
from flatprep.rules.base import Context, Rule, findings

ALL: tuple[Rule, ...] = (
    # the drawing itself
    empty_drawing.RULE,
    unknown_units.RULE,
    open_contour.RULE,
    duplicate_line.RULE,
    self_crossing.RULE,
    tiny_segment.RULE,
    unsupported_entity.RULE,
    text_not_outlined.RULE,
    off_plane.RULE,
    layer_role.RULE,
    # its parts
    several_parts.RULE,
    loose_island.RULE,
    small_part.RULE,
    too_large.RULE,
    # what is measured on them
    small_hole.RULE,
    thin_web.RULE,
    narrow_slot.RULE,
    inside_corner.RULE,
    not_measured.RULE,
    # material and process
    unsafe_material.RULE,
    wrong_process.RULE,
    thickness_out_of_range.RULE,
)

_LOUDNESS = {Severity.ERROR: 0, Severity.WARNING: 1, Severity.NOTE: 2}


def run(context: Context) -> tuple[Finding, ...]:
    """Ask every rule; the worst findings first, then in the order of `ALL`."""
    return tuple(sorted(findings(ALL, context), key=lambda f: _LOUDNESS[f.severity]))
