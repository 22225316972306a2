"""The rules with the limits in force for a process, material and thickness, and where each limit is from."""

from dataclasses import dataclass

from flatprep.job.context import JobOptions
from flatprep.profile.gauges import parse_thickness_mm
from flatprep.profile.material import Material
from flatprep.profile.material_load import load_material
from flatprep.profile.process import Process
from flatprep.profile.process_load import load_process
from flatprep.report.rules_text import LimitInForce, RuleInForce, RulesInForce
from flatprep.rules import ALL
from flatprep.rules.base import Rule


@dataclass(frozen=True, slots=True)
class _Held:
    """What the limits depend on."""

    process: Process | None
    material: Material | None
    thickness_mm: float | None


def rules_in_force(said: JobOptions | None = None) -> RulesInForce:
    """List every rule; limits are those of the process, material and thickness that are said.

    Raises
    ------
    FlatprepError
        When a profile or the thickness cannot be used.
    """
    said = said or JobOptions()
    material = load_material(said.material, said.profile_folders) if said.material else None
    held = _Held(
        load_process(said.process, said.profile_folders) if said.process else None,
        material,
        parse_thickness_mm(said.thickness, "mm", material) if said.thickness else None,
    )
    return RulesInForce(
        process=held.process.id if held.process else None,
        material=material.id if material else None,
        thickness_mm=held.thickness_mm,
        rules=tuple(_rule(rule, held) for rule in ALL),
    )


def _rule(rule: Rule, held: _Held) -> RuleInForce:
    limits = (_limit(feature, held) for feature in rule.limits)
    known = tuple(limit for limit in limits if limit is not None)
    return RuleInForce(rule.id, rule.severity, rule.summary, rule.why, rule.remedy, known)


def _limit(feature: str, held: _Held) -> LimitInForce | None:
    if held.process is None:
        return None
    limit = held.process.limit(feature, held.material.family if held.material else None, held.thickness_mm)
    return LimitInForce(feature, limit.error, limit.warn, limit.source) if limit else None
