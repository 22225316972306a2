"""What makes mates fit: corners opened, slots as wide as the sheet needs, as the command line or a job asks for it."""

from flatprep.base.errors import JobError, UsageError
from flatprep.job.context import JobOptions
from flatprep.job.corners import Corners, ReliefKind, WhichCorners
from flatprep.job.values import Job, JobPart
from flatprep.measure.relieved import ReliefAsk
from flatprep.measure.slots import SlotAsk
from flatprep.model.drawing import Part
from flatprep.practice.tool import least_web_mm, tool_radius_mm
from flatprep.profile.gauges import parse_thickness_mm
from flatprep.profile.material import Material
from flatprep.profile.material_load import load_material
from flatprep.profile.process_load import load_process
from flatprep.repair.reliefs import relieve_part
from flatprep.repair.slots import resize_part
from flatprep.repair.values import Change

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


def check_measured(job: Job) -> None:
    """Refuse a job that wants slots as the sheet measures, where no sheet was measured.

    Raises
    ------
    JobError
    """
    asked = any(part.slot_clearance_mm is not None for part in job.parts)
    if asked and not any(stock.measured_thickness_mm for stock in job.stock):
        raise JobError(
            f'{job.path}: slots = "measured": no stock says what it measures', "add measured_thickness to [[stock]]"
        )


def as_asked(part: Part, ask: JobPart, measured_mm: float | None) -> tuple[Part, tuple[str, ...]]:
    """Resize slots and open corners of a job's part, where the job asks for it.

    Parameters
    ----------
    part
    ask
    measured_mm
        What the sheets for it measure, None where nobody measured, or where they differ.

    Returns
    -------
    part, changes
        The part as it is cut (the same where nothing changes), and what was changed, in words.
    """
    changes: list[Change] = []
    family = ask.material.family if ask.material else None
    clearance, nominal, kind = ask.slot_clearance_mm, ask.thickness_mm, ask.relief
    if clearance is not None and nominal is not None and measured_mm is not None:
        part, changes, _ = resize_part(part, SlotAsk(nominal, measured_mm + clearance), ())
    radius = tool_radius_mm(ask.process, family, nominal)
    if kind is not None and radius > 0.0:
        web = least_web_mm(ask.process, family, nominal)
        part, opened, _ = relieve_part(part, ReliefAsk(kind, radius, web, ask.corners or Corners.SQUARE), ())
        changes = changes + opened
    return part, tuple(map(_said, changes))


def _said(change: Change) -> str:
    x, y = change.at or (0.0, 0.0)
    return f"{change.message} at ({x:.3f}, {y:.3f})"
