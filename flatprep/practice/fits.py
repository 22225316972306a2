"""Fit holes: what is left for the reamer or the boring bar, what is cut before, and what a process can hold."""

from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from flatprep.profile.hardware.drills import metric_drill_below
from flatprep.profile.hardware.fits import Limits, it_um, limits
from flatprep.profile.hardware.names import UnknownHardwareError
from flatprep.profile.hardware.rules import section
from flatprep.profile.hardware.table import table
from flatprep.profile.hardware.tolerance import cut_range, thermal_cut_mm
from flatprep.profile.material import Material
from flatprep.profile.process import Process, ProcessKind

LIGHT = ("aluminium", "magnesium")
_PILOT = {ProcessKind.LASER: "thermal", ProcessKind.PLASMA: "thermal"}


@dataclass(frozen=True, slots=True)
class Allowance:
    """Material left on the diameter for the finishing tool, mm."""

    least_mm: float
    most_mm: float
    source: str

    @property
    def middle_mm(self) -> float:
        """What is usually left."""
        return (self.least_mm + self.most_mm) / 2.0


def allowance(diameter_mm: float, pilot: str, material: Material | None = None, own: Sequence[Path] = ()) -> Allowance:
    """Return what is left for reaming or boring.

    Parameters
    ----------
    diameter_mm
        Finished diameter.
    pilot
        How the hole was made before: ``drilled``, ``thermal`` (laser, plasma), ``machined`` (router, water jet).
    """
    sheet = table("reaming", own)
    rows = [row for row in sheet.rows if row.text("pilot") == pilot]
    row = next((r for r in rows if diameter_mm <= r.number("incl") + 1e-9), rows[-1])
    row.only(("pilot", "incl", "least", "most", "from"))
    light = material is not None and material.family in LIGHT
    factor = section("finishing", own)["light_metal"] if light and pilot != "thermal" else 1.0
    return Allowance(row.number("least") * factor, row.number("most") * factor, sheet.source(row))


@dataclass(frozen=True, slots=True)
class FinishPlan:
    """How a fit hole comes about.

    Attributes
    ----------
    limits : Limits
    cut_mm : float or None
        What is cut; None where the process cannot cut it.
    cut_range_mm : (float, float)
        Cut diameters that will do.
    drill_mm, largest_drill_mm : float
        The usual drill before the reamer, and the largest that leaves it enough.
    thermal : bool
        Whether the cut leaves a skin that is drilled away first.
    """

    limits: Limits
    cut_mm: float | None
    cut_range_mm: tuple[float, float]
    drill_mm: float
    largest_drill_mm: float
    thermal: bool
    source: str

    def drill_from(self, as_cut_mm: float | None) -> float | None:
        """Return the drill between a cut hole and the reamer; None where the reamer takes the rest at once."""
        if as_cut_mm is None or as_cut_mm < self.drill_mm - 0.05:
            return self.drill_mm
        return self.largest_drill_mm if self.thermal and as_cut_mm < self.largest_drill_mm - 0.05 else None


def finish_plan(
    size: Limits, process: Process, material: Material | None, thickness_mm: float | None, own: Sequence[Path] = ()
) -> FinishPlan:
    """Return what to cut and to drill before a hole is reamed or bored to a fit.

    Notes
    -----
    The cut is small enough that its own tolerance and taper stay under the finished size, and large enough that the
    tool has no more to take than the charts say.
    """
    cut = allowance(size.nominal_mm, _PILOT.get(process.kind, "machined"), material, own)
    drilled = allowance(size.nominal_mm, "drilled", material, own)
    keep = section("finishing", own)["keep_below"] + cut_spread_mm(size.nominal_mm, process, thickness_mm, own)
    least = max(cut.least_mm, keep)
    most = max(cut.most_mm, least)
    limit = process.limit("hole", material.family if material else None, thickness_mm)
    pilot = size.least_mm - least
    can_cut = limit is None or pilot >= limit.error - 1e-3
    over = section("finishing", own)["drill_over"]
    return FinishPlan(
        limits=size, cut_mm=round(pilot, 1) if can_cut else None,
        cut_range_mm=(size.least_mm - most, size.least_mm - least),
        drill_mm=metric_drill_below(size.least_mm - drilled.middle_mm - over),
        largest_drill_mm=metric_drill_below(size.least_mm - drilled.least_mm - over),
        thermal=process.kind in _PILOT, source=cut.source,
    )  # fmt: skip


def cut_spread_mm(diameter_mm: float, process: Process, thickness_mm: float | None, own: Sequence[Path] = ()) -> float:
    """Return how much wider than drawn a cut hole may come out: tolerance and taper of both sides, mm.

    ISO 9013 class 1 and range 1 for a laser, class 2 and range 3 for plasma, else the process's IT grade.
    """
    by_iso = {ProcessKind.LASER: (1, 1), ProcessKind.PLASMA: (2, 3)}.get(process.kind)
    if by_iso and thickness_mm is not None:
        try:
            taper = 2.0 * cut_range("u", by_iso[1], thickness_mm, own)
            return thermal_cut_mm(by_iso[0], diameter_mm, thickness_mm, own) + taper
        except UnknownHardwareError:
            pass  # sizes that the standard leaves open go by the IT grade
    return half_it_mm(diameter_mm, str(process.kind), own)


def half_it_mm(diameter_mm: float, made_by: str, own: Sequence[Path] = ()) -> float:
    """Return half the width of the best IT grade that a way of making holes reaches, mm (beyond 120 mm as there)."""
    grade = int(section("capability", own)[made_by])
    return it_um(min(diameter_mm, 120.0), grade, own) / 2000.0


def holds(process: Process, size: Limits, thickness_mm: float | None, own: Sequence[Path] = ()) -> bool:
    """Tell whether the process alone holds the limits of a hole."""
    width = size.most_mm - size.least_mm
    best = 2.0 * half_it_mm(size.nominal_mm, str(process.kind), own)
    return width >= max(best, cut_spread_mm(size.nominal_mm, process, thickness_mm, own)) - 1e-9


def seat_class(material: Material | None) -> tuple[str, str]:
    """Return the usual class of a bearing seat where none is named, and why.

    Bearing and pin catalogue practice, from memory: H7 where the outer ring stands still under load.
    """
    if material is not None and material.family in ("plastic", "wood"):
        return "H7", "in plastic and wood cut a test coupon first: size on size less 0.05 to 0.15 mm is usual"
    return "H7", "H7 for an outer ring that stands still under load; N7 or P7 where it turns with the load"


def press_limits(nominal_mm: float, zone: str = "H7", own: Sequence[Path] = ()) -> Limits:
    """Return the limits of a housing that something is pressed into."""
    return limits(nominal_mm, zone, own)
