"""What makes mates fit, as it is asked for on the command line: corners opened, slots as wide as the sheet needs."""

from flatprep.base.errors import UsageError
from flatprep.job.context import JobOptions
from flatprep.job.corners import ReliefKind, WhichCorners
from flatprep.measure.relieved import ReliefAsk
from flatprep.measure.slots import SlotAsk
from flatprep.practice.tool import least_web_mm, tool_radius_mm
from flatprep.profile.gauges import parse_thickness_mm
from flatprep.profile.material import Material
from flatprep.profile.material_load import load_material
from flatprep.profile.process_load import load_process

FARTHEST = 0.3
"""No sheet misses its nominal thickness by more than this share of it."""


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
    material, thickness_mm = _sheet(said)
    family = material.family if material else None
    radius = tool_radius_mm(process, family, thickness_mm)
    if radius <= 0.0:
        raise UsageError(
            f"--relief {kind}: {process.id} has no round cutter, so its corners need no relief",
            "leave --relief out, or name a router with --process",
        )
    return ReliefAsk(kind, radius, least_web_mm(process, family, thickness_mm), corners)


def slot_ask(measured: str, clearance_mm: float, said: JobOptions) -> SlotAsk:
    """Return how wide slots that are drawn for the thickness that is said have to be.

    Raises
    ------
    FlatprepError
        When no thickness is said, or what was measured cannot be that sheet.
    """
    _, nominal = _sheet(said)
    if nominal is None:
        raise UsageError(
            f"--measured {measured}: for which thickness the slots are drawn is not known", "add --thickness"
        )
    thickness = parse_thickness_mm(measured)
    if abs(thickness - nominal) > FARTHEST * nominal:
        raise UsageError(
            f"--measured {measured}: no sheet of {nominal:g} mm measures that", "check --thickness and the calliper"
        )
    return SlotAsk(nominal, thickness + clearance_mm)


def _sheet(said: JobOptions) -> tuple[Material | None, float | None]:
    material = load_material(said.material, said.profile_folders) if said.material else None
    return material, parse_thickness_mm(said.thickness, "mm", material) if said.thickness else None
