"""Threads in plate: percent of thread, forming drills, engagement, and the hole that is cut before tapping."""

from collections.abc import Sequence
from dataclasses import dataclass
from math import cbrt, exp, log, pi, sqrt
from pathlib import Path

from flatprep.profile.hardware.rules import section
from flatprep.profile.hardware.threads import Thread
from flatprep.profile.material import Material
from flatprep.profile.process import Process, ProcessKind

THERMAL = (ProcessKind.LASER, ProcessKind.PLASMA)
"""Processes that leave a heated skin on the wall of a hole."""

_INCH = 25.4


def percent_of_thread(thread: Thread, drill_mm: float, own: Sequence[Path] = ()) -> float:
    """Return the per cent of thread that a drill leaves, as tap-drill tables reckon: 76.98 (d - drill) / P."""
    return 100.0 * (thread.major_mm - drill_mm) / (2.0 * section("percent_thread", own)["height"] * thread.pitch_mm)


def percent_of_basic(thread: Thread, drill_mm: float, own: Sequence[Path] = ()) -> float:
    """Return the per cent of the ISO and unified basic profile's height, 1.2 times what the tables print."""
    return (
        100.0 * (thread.major_mm - drill_mm) / (2.0 * section("percent_thread", own)["basic_height"] * thread.pitch_mm)
    )


def drill_for_percent(thread: Thread, percent: float, own: Sequence[Path] = ()) -> float:
    """Return the drill that leaves so many per cent of thread (as tap-drill tables reckon), mm."""
    return thread.major_mm - percent / 100.0 * 2.0 * section("percent_thread", own)["height"] * thread.pitch_mm


def forming_drill_mm(thread: Thread, percent: float | None = None, own: Sequence[Path] = ()) -> float:
    """Return the drill for a thread-forming tap: d - 0.0068 x per cent x P, mm."""
    rules = section("percent_thread", own)
    share = rules["form_default"] if percent is None else percent
    return thread.major_mm - rules["form_factor"] * share * thread.pitch_mm


def stress_area_mm2(thread: Thread) -> float:
    """Return the tensile stress area of the bolt, pi / 4 (d - 0.9743 p)² (ASME B1.1; ISO 898-1 has 0.9382 P), mm²."""
    factor = 0.9743 if thread.is_inch else 0.938194
    stressed = thread.major_mm - factor * thread.pitch_mm
    return pi / 4.0 * stressed * stressed


def equal_strength_mm(thread: Thread) -> float:
    """Return the engagement at which bolt and thread of the same strength break together, mm.

    Notes
    -----
    Machinery's Handbook, "Length of engagement": Le = 2 At / (pi Kn (1/2 + (Es - Kn) / (sqrt(3) p))), with Kn the
    greatest minor diameter of the nut thread and Es the least pitch diameter of the bolt thread, class 2A (tolerance
    and allowance by the formulas of ASME B1.1) or 6g (by those of ISO 965-1).
    """
    kn, es, p = thread.minor_max_mm, _least_pitch_dia_mm(thread), thread.pitch_mm
    return 2.0 * stress_area_mm2(thread) / (pi * kn * (0.5 + 0.57735 * (es - kn) / p))


def _least_pitch_dia_mm(thread: Thread) -> float:
    d, p = thread.major_mm, thread.pitch_mm
    basic = d - 0.649519 * p
    if thread.is_inch:
        tolerance = 0.0015 * cbrt(d / _INCH) + 0.0015 * sqrt(d / _INCH) + 0.015 * cbrt(p / _INCH) * cbrt(p / _INCH)
        return basic - 1.3 * tolerance * _INCH
    tolerance_um = 90.0 * exp(0.4 * log(p) + 0.1 * log(d))
    allowance_um = 15.0 + 11.0 * p
    return basic - (tolerance_um + allowance_um) / 1000.0


@dataclass(frozen=True, slots=True)
class Engagement:
    """How much thread a plate holds.

    Attributes
    ----------
    threads : float
        Engaged threads, length / P.
    length_mm : float
        Engaged length.
    needed_mm : float or None
        What the rule asks for in that material; None where no rule holds.
    refuse_threads, least_threads : float
        Below the first no thread; below the second for light loads only.
    instead : str
        What to do where the material takes no machine thread.
    """

    threads: float
    length_mm: float
    needed_mm: float | None
    refuse_threads: float
    least_threads: float
    instead: str
    source: str

    @property
    def fails(self) -> bool:
        """Whether there is no usable thread."""
        return bool(self.instead) or self.threads < self.refuse_threads - 1e-9

    @property
    def weak(self) -> bool:
        """Whether the thread is for light loads only."""
        short = self.needed_mm is not None and self.length_mm < self.needed_mm - 1e-3
        return self.fails or short or self.threads < self.least_threads - 1e-9


def engagement(
    thread: Thread, length_mm: float, material: Material | None = None, own: Sequence[Path] = ()
) -> Engagement:
    """Return the engagement of a thread over a length in a material."""
    rules = section("engagement", own)
    factor = rules.find(material.family) if material else None
    instead = (section("no_thread", own).text(material.family) or "") if material else ""
    return Engagement(
        threads=length_mm / thread.pitch_mm, length_mm=length_mm,
        needed_mm=None if factor is None else factor * thread.major_mm, refuse_threads=rules["refuse_threads"],
        least_threads=rules["least_threads"], instead=instead, source=rules.source,
    )  # fmt: skip


@dataclass(frozen=True, slots=True)
class PilotHole:
    """What is cut before a hole is drilled or tapped.

    Attributes
    ----------
    diameter_mm : float or None
        None: nothing is cut, mark the centre and drill solid.
    drill_out : bool
        Whether the drill has to open the cut hole before the tap.
    why : str
    """

    diameter_mm: float | None
    drill_out: bool
    why: str


def hardens(material: Material | None, own: Sequence[Path] = ()) -> bool:
    """Tell whether a thermal cut hardens the edge: wear plate, and steel stronger than the rules say."""
    if material is None or material.family not in ("low-carbon-steel", "wear-plate"):
        return False
    strong = material.strength_mpa is not None and material.strength_mpa > section("pilot", own)["hardening_strength"]
    return material.family == "wear-plate" or strong


def taps_directly(
    process: Process, material: Material | None, thickness_mm: float | None, own: Sequence[Path] = ()
) -> bool:
    """Tell whether a hole may be cut to the tap drill: no thermal skin, or thin soft metal."""
    if process.kind not in THERMAL:
        return True
    if process.kind is ProcessKind.PLASMA or material is None or thickness_mm is None or hardens(material, own):
        return False
    rules = section("pilot", own)
    most = rules["direct_up_to"] if process.direct_tap_mm is None else process.direct_tap_mm
    return material.family in rules.words("direct_families") and thickness_mm <= most + 1e-9


def tap_pilot(
    drill_mm: float, process: Process, material: Material | None, thickness_mm: float | None, own: Sequence[Path] = ()
) -> PilotHole:
    """Return the hole to cut before a tap drill: to size, under size, or none at all.

    Parameters
    ----------
    drill_mm
        Tap drill.
    """
    family = material.family if material else None
    limit = process.limit("hole", family, thickness_mm)
    least = limit.error if limit else 0.0
    direct = taps_directly(process, material, thickness_mm, own)
    under = 0.0 if direct else _under_mm(drill_mm, process, material, own)
    pilot = drill_mm - under
    if pilot < least - 1e-3:
        return PilotHole(
            None, drill_out=True, why="a hole this small cannot be cut in this thickness: mark the centre, drill solid"
        )
    if direct:
        return PilotHole(pilot, drill_out=False, why="cut to the tap drill and tapped directly")
    return PilotHole(pilot, drill_out=True, why="cut under size, the cut skin is drilled out before the tap")


def _under_mm(drill_mm: float, process: Process, material: Material | None, own: Sequence[Path]) -> float:
    rules = section("pilot", own)
    usual = max(rules["under"], rules["under_to_drill"] * drill_mm)
    usual = usual if process.pilot_under_mm is None else process.pilot_under_mm
    return max(usual, rules["under_hard"]) if hardens(material, own) else usual
