"""Tolerances of a size without its own: ISO 2768-1, and what a thermal cut holds by ISO 9013."""

from bisect import bisect_left, bisect_right
from collections.abc import Sequence
from pathlib import Path

from flatprep.profile.hardware.names import UnknownHardwareError
from flatprep.profile.hardware.table import table

RANGE = ("range",)


def general_mm(zone: str, size_mm: float, kind: str = "linear", own: Sequence[Path] = ()) -> float:
    """Return the general tolerance ± mm of ISO 2768-1.

    Parameters
    ----------
    zone
        ``f``, ``m``, ``c`` or ``v``.
    size_mm
        Nominal size.
    kind
        ``linear``, or ``radius`` for external radii and chamfers.

    Raises
    ------
    UnknownHardwareError
        For a class or a size outside the table.
    """
    rows = [row for row in table("tolerance_iso2768", own).rows if row.text("kind") == kind]
    classes = [row.text("class") for row in rows]
    if zone not in classes:
        raise UnknownHardwareError(f"ISO 2768 class {zone} is not known", "known: " + ", ".join(classes))
    row = rows[classes.index(zone)].only(("class", "kind", "over", "incl", "plus_minus"))
    steps, low = row.numbers("incl"), row.number("over")
    # the first step takes its lower end in: the standard prints "0.5 up to 3"
    if not low <= size_mm <= steps[-1]:
        raise UnknownHardwareError(
            f"ISO 2768 {zone} says nothing of {size_mm:g} mm",
            f"it covers {low:g} to {steps[-1]:g} mm; below 0.5 mm the tolerance stands at the size itself",
        )
    return row.numbers("plus_minus")[bisect_left(steps, size_mm)]


def thermal_cut_mm(grade: int, size_mm: float, thickness_mm: float, own: Sequence[Path] = ()) -> float:
    """Return the limit deviation ± mm of ISO 9013:2017.

    Parameters
    ----------
    grade
        Tolerance class 1 or 2.
    size_mm
        Nominal dimension.
    thickness_mm
        Work piece thickness.

    Raises
    ------
    UnknownHardwareError
        For a class, thickness or size that the table does not hold.
    """
    rows = [row for row in table("tolerance_iso9013", own, RANGE).rows if row.integer("class") == grade]
    if not rows:
        raise UnknownHardwareError(f"ISO 9013 class {grade} is not known", "known: 1, 2")
    ends = [row.number("incl") for row in rows]
    if not 0.0 < thickness_mm <= ends[-1]:
        raise UnknownHardwareError(
            f"ISO 9013 class {grade} says nothing of {thickness_mm:g} mm thick", f"it covers up to {ends[-1]:g} mm"
        )
    row = rows[bisect_left(ends, thickness_mm)].only(("class", "over", "incl", "dim", "plus_minus"))
    dims = row.numbers("dim")
    if not dims[0] <= size_mm < dims[-1]:
        raise UnknownHardwareError(
            f"ISO 9013 class {grade} says nothing of {size_mm:g} mm in {thickness_mm:g} mm thick",
            f"it covers {dims[0]:g} to below {dims[-1]:g} mm",
        )
    return row.numbers("plus_minus")[bisect_right(dims, size_mm) - 1]


def cut_range(kind: str, number: int, thickness_mm: float, own: Sequence[Path] = ()) -> float:
    """Return squareness `u` (mm) or mean height `rz5` (µm) of an ISO 9013 range at a thickness.

    Raises
    ------
    UnknownHardwareError
        For a range that is not in the table.
    """
    held = table("tolerance_iso9013", own, RANGE).top.table("range")
    terms = held.pairs(kind) if held is not None else ()
    if not 1 <= number <= len(terms):
        raise UnknownHardwareError(f"ISO 9013 range {number} of {kind} is not known", f"known: 1 to {len(terms)}")
    constant, slope = terms[number - 1]
    return constant + slope * thickness_mm
