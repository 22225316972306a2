"""A material: family, density, what may cut it, how it bends and takes a thread."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal

from flatprep.profile.points import Points, clamped
from flatprep.profile.process import Limit, Process

METAL_FAMILIES = (
    "low-carbon-steel", "stainless", "aluminium", "wear-plate", "titanium", "magnesium", "copper-brass",
)  # fmt: skip
FAMILIES = (
    *METAL_FAMILIES,
    "acrylic", "plastic", "laminate", "wood", "leather", "cardboard", "rubber",
)  # fmt: skip
"""The keys that a process's limits may be given for."""

TECHNOLOGIES = ("fibre-laser", "co2-laser", "router", "plasma", "waterjet")
LEVELS = ("yes", "care", "unknown", "no", "never")
"""From the best to the worst; ``no``: the process cannot, ``never``: it must not."""


@dataclass(frozen=True, slots=True)
class Verdict:
    """Whether a process may cut a material.

    Attributes
    ----------
    level : str
        ``yes``, ``care`` (with the caution), ``no`` (it cannot), ``never`` (it must not: people or machine would be
        harmed) or ``unknown`` (the material's profile says nothing).
    why, caution, source : str
    """

    level: str
    why: str = ""
    caution: str = ""
    source: str = ""


@dataclass(frozen=True, slots=True)
class BendRule:
    """How tight a material may be bent cold by 90 degrees across the rolling direction.

    Attributes
    ----------
    table, prefer : tuple of (thickness mm, radius / thickness)
        The published least inside radius, and below what a bend is a warning; without the latter the table is.
    refuse : float or None
        Radius over thickness below which a bend is an error; where the table allows less, the table holds.
    refuse_mm : float
        Least inside radius in mm whatever the thickness.
    along_grain : float
        Factor on the radius for bend lines along the rolling direction; 1.0 where it makes no difference.
    across_only : bool
        It cracks along the rolling direction at any usual radius: bends go across it.
    bendable : bool
        False where the material does not bend plastically when cold.
    """

    bendable: bool = True
    table: Points = ()
    refuse: float | None = None
    prefer: Points = ()
    refuse_mm: float = 0.0
    along_grain: float = 1.0
    across_only: bool = False
    note: str = ""
    source: str = ""

    def table_ratio(self, thickness_mm: float) -> float | None:
        """Return the published least radius over thickness, or None where none is known."""
        return clamped(self.table, thickness_mm) if self.table else None

    def limit(self, thickness_mm: float) -> Limit | None:
        """Return the least inside radius, mm, across the rolling direction; None where nothing is known."""
        wanted = self.prefer or self.table
        if self.refuse is None or not wanted:
            return None
        published = self.table_ratio(thickness_mm)
        least = self.refuse if published is None else min(self.refuse, published)
        error = max(least * thickness_mm, self.refuse_mm)
        return Limit(error, max(clamped(wanted, thickness_mm) * thickness_mm, error), self.source)


@dataclass(frozen=True, slots=True)
class Material:
    """A material profile.

    Attributes
    ----------
    id : str
        What `--material` names it by: file stem, such as ``al-5052-h32``.
    aliases : tuple of str
        Common designations, compared without case, spaces and hyphens.
    family : str
        The key of a process's limits: ``low-carbon-steel``, ``stainless``, ``aluminium``, ``wear-plate``,
        ``copper-brass``, ``plastic``, ``wood``, ...
    density_kg_m3 : float or None
    density_range : (float, float) or None
        What published tables print.
    face_grain : bool
        Plywood and the like: turns default to [0, 180].
    e_gpa : float or None
        Modulus of elasticity in bending.
    strength_mpa : float or None
        What bending strength is compared by; `strength_kind` says which: ``yield``, ``tensile`` or ``flexural``.
    gauge_metal : str or None
        The column of the gauge table: ``steel``, ``stainless``, ``aluminium``, ``galvanised``.
    stock_mm : tuple of float
        Thicknesses commonly sold.
    tap, tap_note : str
        How it takes a thread: ``good``, ``fair``, ``poor``, ``no`` or empty.
    hazards : tuple of str
        Keys of the cautions of bench work.
    cuts : mapping of str to Verdict
        By technology.
    price_per_kg : Decimal or None
        The user's own price; never shipped.
    """

    id: str
    name: str
    family: str
    density_kg_m3: float | None
    aliases: tuple[str, ...] = ()
    face_grain: bool = False
    source: str = ""
    density_range: tuple[float, float] | None = None
    e_gpa: float | None = None
    strength_mpa: float | None = None
    strength_kind: str = ""
    mechanical_source: str = ""
    hardness: str = ""
    gauge_metal: str | None = None
    stock_mm: tuple[float, ...] = ()
    tap: str = ""
    tap_note: str = ""
    cautions: tuple[str, ...] = ()
    hazards: tuple[str, ...] = ()
    bend: BendRule | None = None
    cuts: Mapping[str, Verdict] = field(default_factory=dict)
    price_per_kg: Decimal | None = None

    def verdict(self, process: Process) -> Verdict:
        """Tell whether `process` may cut the material.

        A laser whose profile does not say which beam it has gets the better of both, unless neither may be used.
        """
        if process.technology in self.cuts:
            return self.cuts[process.technology]
        if process.technology != "laser":
            return Verdict("unknown")
        found = [self.cuts[beam] for beam in ("fibre-laser", "co2-laser") if beam in self.cuts]
        if not found:
            return Verdict("unknown")
        usable = [v for v in found if v.level in ("yes", "care")]
        worst = max(found, key=lambda v: LEVELS.index(v.level))
        return min(usable, key=lambda v: LEVELS.index(v.level)) if usable else worst
