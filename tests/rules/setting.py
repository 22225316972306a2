"""Processes, materials and contexts for tests of rules."""

from pathlib import Path

from flatprep.job.values import BendAsk, JobPart
from flatprep.profile.material import BendRule, Material, Verdict
from flatprep.profile.process import Band, Process, ProcessKind, Terms
from flatprep.rules import run
from flatprep.rules.base import Context
from tests.measure.shapes import drawing, rectangle

ERRORS = {
    "hole_min": 1.0, "hole_to_thickness": 1.0, "web_min": 1.0, "web_to_thickness": 1.0,
    "slot_min": 0.5, "slot_to_thickness": 0.5, "part_min": 30.0,
}  # fmt: skip
"""At 3 mm: holes and webs 3 mm, slots 1.5 mm."""
PLATE = rectangle(0, 0, 100, 60)


def laser(errors=None, warns=None, **rest):
    band = Band(errors if errors is not None else ERRORS, warns or {}, {})
    return Process("shop-laser", "shop laser", ProcessKind.LASER, 0.2, general=Terms((band,)), **rest)


def router(tool=3.0, **rest):
    nothing = Terms((Band({}, {}, {}),))
    return Process("shop-router", "shop router", ProcessKind.ROUTER, tool, tool, general=nothing, **rest)


def steel(**rest):
    return Material("mild-steel", "mild steel", "low-carbon-steel", 7850.0, **rest)


def context(*parts, process=None, material=None, thickness=3.0, job_part=None, **of_drawing):
    return Context(drawing(*parts, **of_drawing), process or laser(), material, thickness, job_part)


def found(rule, ctx):
    """Findings of one rule, of all that every rule says."""
    return [f for f in run(ctx) if f.rule == rule]


def asked(process, material, *bends, grain=None):
    return JobPart(Path("plate.dxf"), "plate", material, 2.0, process, bends=bends, grain=grain)


def bend_at(y, radius=2.0, angle=90.0):
    return BendAsk(angle, radius, line=((0.0, y), (100.0, y)))


BENDS = BendRule(refuse=1.0, prefer=((2.0, 1.5),), along_grain=1.5)
"""At 2 mm: refused below 2 mm, preferred from 3 mm on."""
NEVER = Verdict("never", "it gives off acid gas", "Do not try.", "made up for the test")
