"""Joints: whether a stack of plates, spacers and a fastener closes, and which fastener to buy."""

from collections.abc import Sequence

from flatprep.base.errors import FlatprepError, JobError
from flatprep.bench import joint_bolts, joint_pins, joint_shoulders
from flatprep.bench.joint_layers import layers, own_of
from flatprep.bench.part import BenchPart
from flatprep.job.values import JointAsk
from flatprep.model.work import JointReport
from flatprep.practice.fasteners import FastenerKind, find_fastener

_WORKED_BY = {FastenerKind.SHOULDER: joint_shoulders.work_out, FastenerKind.DOWEL: joint_pins.work_out}


def check_joints(joints: Sequence[JointAsk], parts: Sequence[BenchPart]) -> tuple[JointReport, ...]:
    """Work every joint of a job out: clearance, engagement, grip, protrusion, play, room for the head, length to buy.

    Raises
    ------
    JobError
        When a fastener, nut, part or hole is not known; the message names file, key and value.
    """
    by_name = {bench.name: bench for bench in parts}
    return tuple(_report(joint, by_name) for joint in joints)


def _report(joint: JointAsk, by_name: dict[str, BenchPart]) -> JointReport:
    try:
        fastener = find_fastener(joint.fastener, own_of(by_name))
    except FlatprepError as err:
        raise JobError(f'{joint.where}: fastener = "{joint.fastener}": {err.message}', err.remedy) from None
    stack = layers(joint.through, by_name)
    try:
        return _WORKED_BY.get(fastener.kind, joint_bolts.work_out)(joint, fastener, stack)
    except JobError:
        raise
    except FlatprepError as err:
        raise JobError(f'{joint.where}: nut = "{joint.nut}": {err.message}', err.remedy) from None
