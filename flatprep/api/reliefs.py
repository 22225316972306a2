"""Relief of inside corners as it is asked for on the command line or by a job."""

from flatprep.base.errors import UsageError
from flatprep.job.context import JobOptions
from flatprep.job.corners import ReliefKind, WhichCorners
from flatprep.measure.relieved import ReliefAsk
from flatprep.practice.tool import least_web_mm, tool_radius_mm
from flatprep.profile.gauges import parse_thickness_mm
from flatprep.profile.material_load import load_material
from flatprep.profile.process_load import load_process


def relief_ask(kind: ReliefKind, corners: WhichCorners, said: JobOptions) -> ReliefAsk:
    """Return how corners are opened for the cutter of the process that is said.

    Raises
    ------
    FlatprepError
        When no process is said, or one without a round tool, or a profile or the thickness cannot be used.
    """
    if not said.process:
        raise UsageError(f"--relief {kind}: the cutter is not known", "add --process router, or your own router's file")
    process = load_process(said.process, said.profile_folders)
    material = load_material(said.material, said.profile_folders) if said.material else None
    family = material.family if material else None
    thickness_mm = parse_thickness_mm(said.thickness, "mm", material) if said.thickness else None
    radius = tool_radius_mm(process, family, thickness_mm)
    if radius <= 0.0:
        raise UsageError(
            f"--relief {kind}: {process.id} has no round cutter, so its corners need no relief",
            "leave --relief out, or name a router with --process",
        )
    return ReliefAsk(kind, radius, least_web_mm(process, family, thickness_mm), corners)
