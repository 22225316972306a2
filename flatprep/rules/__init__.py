"""Every rule, one module each, in one tuple that a person can read."""

from flatprep.model.finding import Finding, Severity
from flatprep.rules import (
    bend_along_grain,
    bore_size,
    chord_density,
    countersink_too_deep,
    doubtful_units,
    duplicate_line,
    empty_drawing,
    flat_length,
    hole_near_bend,
    inside_corner,
    joint_fit,
    layer_role,
    loose_island,
    lost_in_kerf,
    narrow_slot,
    not_measured,
    off_plane,
    open_contour,
    self_crossing,
    several_parts,
    short_flange,
    small_hole,
    small_part,
    tap_hole_size,
    text_not_outlined,
    thickness_out_of_range,
    thin_web,
    thread_engagement,
    tight_bend,
    tiny_segment,
    too_large,
    tool_reach,
    unclear_hole,
    unknown_units,
    unsafe_material,
    unsupported_entity,
    work_without_hole,
    wrong_process,
)
from flatprep.rules.accept import accepted
from flatprep.rules.base import Context, Rule, findings
from flatprep.rules.lettering import gathered

ALL: tuple[Rule, ...] = (
    # the drawing itself
    empty_drawing.RULE,
    unknown_units.RULE,
    doubtful_units.RULE,
    open_contour.RULE,
    duplicate_line.RULE,
    self_crossing.RULE,
    tiny_segment.RULE,
    chord_density.RULE,
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
    tool_reach.RULE,
    joint_fit.RULE,
    lost_in_kerf.RULE,
    not_measured.RULE,
    # bends
    hole_near_bend.RULE,
    short_flange.RULE,
    tight_bend.RULE,
    bend_along_grain.RULE,
    flat_length.RULE,
    # bench work
    work_without_hole.RULE,
    tap_hole_size.RULE,
    thread_engagement.RULE,
    bore_size.RULE,
    countersink_too_deep.RULE,
    unclear_hole.RULE,
    # material and process
    unsafe_material.RULE,
    wrong_process.RULE,
    thickness_out_of_range.RULE,
)

_LOUDNESS = {Severity.ERROR: 0, Severity.WARNING: 1, Severity.NOTE: 2}


def run(context: Context) -> tuple[Finding, ...]:
    """Ask every rule; the worst findings first, then in the order of `ALL`; accepted ones are notes.

    What is wrong with the letters of a word is one finding a rule.
    """
    accepts = context.job_part.accepts if context.job_part else ()
    told = (accepted(finding, accepts) for finding in gathered(findings(ALL, context), context.parts))
    return tuple(sorted(told, key=lambda f: _LOUDNESS[f.severity]))
