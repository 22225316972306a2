"""What if: the same part in other thicknesses and materials, at equal bending stiffness or strength.

A flat part bent by a given load deflects with 1 / (E t³) and breaks or yields at a moment of σ t² / 6 per width
(beam theory, Euler and Bernoulli; Roark's Formulas for Stress and Strain, plates likewise). Hence

    equal stiffness  t = t0 (E0 / E)^(1/3)      steel to aluminium: 1.44, the cube root of 3
    equal strength   t = t0 (σ0 / σ)^(1/2)

Poisson's ratio, creep, temperature and notches are left out: the table is for choosing, not for approving.
"""

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from decimal import Decimal

from flatprep.cost.estimate import Costed
from flatprep.cost.mass import mass_kg
from flatprep.cost.share import decimal, to_cents
from flatprep.model.alternative import Alternative, Basis, PartAlternatives
from flatprep.profile.material import Material
from flatprep.profile.process import Process

Judge = Callable[[Material, float, Process], tuple[str, ...]]
"""Lint of the part in a material, thickness (mm) and process: the findings that count, in words."""

_SLACK_MM = 1e-6


@dataclass(frozen=True, slots=True)
class Choice:
    """What the part may be made of.

    Attributes
    ----------
    materials : tuple of Material
        Those to look at; the present one may be among them.
    processes : tuple of Process
        Those at hand; the part's own goes first.
    utilisation : float or None
        Share of the sheet that the parts take, by which the net mass grows to what is bought; None: net.
    judge : callable or None
        Lint, handed in by whoever can run it.
    """

    materials: tuple[Material, ...]
    processes: tuple[Process, ...] = ()
    utilisation: float | None = None
    judge: Judge | None = None


def stiffness_ratio(e0_gpa: float, e_gpa: float) -> float:
    """Thickness for equal bending stiffness over the present one: (E0 / E)^(1/3)."""
    return float((e0_gpa / e_gpa) ** (1.0 / 3.0))


def strength_ratio(s0_mpa: float, s_mpa: float) -> float:
    """Thickness for equal bending strength over the present one: (σ0 / σ)^(1/2)."""
    return float((s0_mpa / s_mpa) ** 0.5)


def next_stock_mm(needed_mm: float, stock_mm: Sequence[float]) -> float | None:
    """Return the least thickness sold that is enough, or None."""
    return next((t for t in sorted(stock_mm) if t >= needed_mm - _SLACK_MM), None)


def alternatives(item: Costed, choice: Choice) -> PartAlternatives | None:
    """Return the what-if table of a part, lightest first within each basis; None without material or thickness."""
    now, thickness = item.material, item.thickness_mm
    if now is None or thickness is None:
        return None
    options = [
        _line(item, now, basis, material, needed, choice) for basis, material, needed in _asks(item, now, choice)
    ]
    order = list(Basis)
    options.sort(key=lambda o: (order.index(o.basis), o.thickness_mm is None, o.mass_kg or 0.0, o.material))
    return PartAlternatives(
        part=item.part.name,
        material=now.id,
        thickness_mm=thickness,
        mass_kg=item.mass_kg,
        cost=_cost(now, item.mass_kg, choice),
        options=tuple(options),
        notes=tuple(_notes(now, choice)),
    )


def _asks(item: Costed, now: Material, choice: Choice) -> Iterator[tuple[Basis, Material, float]]:
    """Thicknesses to look at: the neighbours of the present one, then by each basis in every other material."""
    thickness = item.thickness_mm or 0.0
    for other in _neighbours(thickness, now.stock_mm):
        yield Basis.SAME_MATERIAL, now, other
    for material in choice.materials:
        if material.id == now.id:
            continue
        yield Basis.SAME_THICKNESS, material, thickness
        if now.e_gpa and material.e_gpa:
            yield Basis.STIFFNESS, material, thickness * stiffness_ratio(now.e_gpa, material.e_gpa)
        if now.strength_mpa and material.strength_mpa:
            yield Basis.STRENGTH, material, thickness * strength_ratio(now.strength_mpa, material.strength_mpa)


def _neighbours(thickness_mm: float, stock_mm: Sequence[float]) -> tuple[float, ...]:
    """Return up to two thinner and two thicker sheets that are sold."""
    thinner = [t for t in sorted(stock_mm) if t < thickness_mm - _SLACK_MM]
    thicker = [t for t in sorted(stock_mm) if t > thickness_mm + _SLACK_MM]
    return (*thinner[-2:], *thicker[:2])


def _line(
    item: Costed, now: Material, basis: Basis, material: Material, needed_mm: float, choice: Choice
) -> Alternative:
    sold = next_stock_mm(needed_mm, material.stock_mm)
    thickness = needed_mm if not material.stock_mm else sold
    if thickness is None:
        return Alternative(
            basis, material.id, material.name, needed_mm, None, note="not sold so thick, as far as the profile knows"
        )
    density = material.density_kg_m3
    mass = None if density is None else mass_kg(item.part.area_mm2, thickness, density)
    process = _process(item, material, thickness, choice)
    present = item.thickness_mm or thickness
    return Alternative(
        basis=basis,
        material=material.id,
        material_name=material.name,
        needed_mm=needed_mm,
        thickness_mm=thickness,
        mass_kg=mass,
        mass_ratio=_ratio(mass, _net_mass(item)),
        cost=_cost(material, mass, choice),
        deflection_ratio=_ratio(_stiffness(now, present), _stiffness(material, thickness)),
        strength_ratio=_ratio(_strength(material, thickness), _strength(now, present)),
        process=process.id if process else None,
        caution=material.verdict(process).caution if process else _why_not(item, material),
        findings=choice.judge(material, thickness, process) if choice.judge and process else None,
        note="" if material.stock_mm else "the profile lists no thicknesses sold",
    )


def _net_mass(item: Costed) -> float | None:
    density = item.material.density_kg_m3 if item.material else None
    return None if density is None else mass_kg(item.part.area_mm2, item.thickness_mm or 0.0, density)


def _stiffness(material: Material, thickness_mm: float) -> float | None:
    return None if material.e_gpa is None else material.e_gpa * thickness_mm**3


def _strength(material: Material, thickness_mm: float) -> float | None:
    return None if material.strength_mpa is None else material.strength_mpa * thickness_mm**2


def _ratio(above: float | None, below: float | None) -> float | None:
    return above / below if above is not None and below else None


def _cost(material: Material, mass: float | None, choice: Choice) -> Decimal | None:
    """Return the price of the sheet a piece takes: its mass over the utilisation, at the user's price per kg."""
    if material.price_per_kg is None or mass is None:
        return None
    return to_cents(material.price_per_kg * decimal(mass / (choice.utilisation or 1.0)))


def _process(item: Costed, material: Material, thickness_mm: float, choice: Choice) -> Process | None:
    """Return the first process that may cut the material in that thickness: the part's own goes first."""
    for process in (item.process, *choice.processes):
        span = process.thickness_mm(material.family)
        fits = span is None or span[0] - _SLACK_MM <= thickness_mm <= span[1] + _SLACK_MM
        if fits and material.verdict(process).level in ("yes", "care"):
            return process
    return None


def _why_not(item: Costed, material: Material) -> str:
    verdict = material.verdict(item.process)
    return verdict.why or "too thick or too thin for the processes at hand"


def _notes(now: Material, choice: Choice) -> Iterator[str]:
    if choice.utilisation is not None:
        yield f"cost is that of the sheet taken, at {100.0 * choice.utilisation:.0f} % utilisation as now"
    else:
        yield "cost is that of the net mass, without the scrap"
    yield "stiffness by E t³, strength by σ t²: for choosing, not for approving"
    kinds = {m.strength_kind for m in (now, *choice.materials) if m.strength_kind}
    if len(kinds) > 1:
        yield f"strengths are not of one kind ({', '.join(sorted(kinds))}): see the material profiles"
