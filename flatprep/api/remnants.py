"""The remnants of a rack as stock: their drawings read, those that a job can use taken."""

from collections import Counter
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from decimal import Decimal, InvalidOperation
from itertools import chain, count
from pathlib import Path

from flatprep.api.pieces import ReadJob
from flatprep.base.errors import DrawingError, FlatprepError
from flatprep.base.names import one_line
from flatprep.base.progress import Progress, Silent
from flatprep.drawing.label import RemnantLabel, read_label
from flatprep.drawing.read import read
from flatprep.drawing.remnant import outline_of
from flatprep.geom.bulge import Floats
from flatprep.job.context import MOST_MONEY
from flatprep.job.rack import LIST
from flatprep.job.values import Job, Point, Rack, Stock
from flatprep.model.drawing import Drawing
from flatprep.nest.allowed import SAME_THICKNESS_MM
from flatprep.profile.gauges import parse_thickness_mm
from flatprep.profile.material import Material
from flatprep.profile.material_load import load_material

GRAINS = ("length", "width")
_UNSURE = ("unknown-units", "doubtful-units")
"""Faults of a drawing that make the remnant's size doubtful."""


@dataclass(frozen=True, slots=True)
class Shelf:
    """What of a rack's remnants a job can use.

    Attributes
    ----------
    stock : tuple of Stock
        Remnants of the materials and thicknesses that the job's parts have.
    warnings : tuple of str
        Drawings that cannot be used, and what to do.
    notes : tuple of str
        One line for those that are of no use to this job.
    """

    stock: tuple[Stock, ...] = ()
    warnings: tuple[str, ...] = ()
    notes: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class _Remnant:
    """A drawing of the rack and what it says."""

    label: str | None
    stock: Stock


def with_remnants(read_job: ReadJob, progress: Progress | None = None, *, gone: bool = False) -> tuple[ReadJob, Shelf]:
    """Return the job with the remnants of its rack that it can use among its stock, and what is to be said of them.

    Parameters
    ----------
    gone
        Those that are used up are taken, too: for a layout that has been booked.

    Notes
    -----
    A remnant is called by its label; where two have the same one, or the job has stock of that name, by its file.
    """
    job = read_job.job
    if job.rack is None:
        return read_job, Shelf()
    drawings = (*job.rack.drawings, *job.rack.gone) if gone else job.rack.drawings
    shelf = remnants_of(job, replace(job.rack, drawings=drawings), progress or Silent())
    return replace(read_job, job=replace(job, stock=(*job.stock, *shelf.stock))), shelf


def remnants_of(job: Job, rack: Rack, progress: Progress) -> Shelf:
    """Read the drawings of a rack; see `with_remnants`."""
    wanted: list[_Remnant] = []
    warnings: list[str] = []
    others = 0
    for number, path in enumerate(rack.drawings, start=1):
        progress.update("remnants read", done=number, total=len(rack.drawings))
        try:
            drawing = read(path)
            one = _remnant(path, drawing, rack, job)
            if not _wanted(one.stock, job):
                others += 1
                continue
            outline, holes = outline_of(drawing)
        except FlatprepError as err:
            warnings.append(f"{err.message}; left out: {err.remedy}" if err.remedy else f"{err.message}; left out")
            continue
        wanted.append(
            replace(one, stock=replace(one.stock, outline=_points(outline), holes=tuple(map(_points, holes))))
        )
        warnings += [f"{path}: {fault.detail}" for fault in drawing.faults if fault.kind in _UNSURE]
    notes = (f"{rack.folder}: {_of_other_kinds(others)}",) if others else ()
    return Shelf(tuple(_named(wanted, job)), tuple(warnings), notes)


def _points(ring: Floats) -> tuple[Point, ...]:
    return tuple((float(x), float(y)) for x, y in ring)


def _of_other_kinds(many: int) -> str:
    return f"{many} remnant{'s' if many > 1 else ''} of materials or thicknesses that no part of this job has"


def _remnant(path: Path, drawing: Drawing, rack: Rack, job: Job) -> _Remnant:
    """Return what a drawing says of its remnant.

    Raises
    ------
    FlatprepError
        When it does not say what it is of, or says it in words that are not known.
    """
    said = read_label(str(path), drawing.texts)
    if said.material is None or said.thickness is None:
        missing = " or ".join(key for key in ("material", "thickness") if getattr(said, key) is None)
        raise DrawingError(
            f"{path}: does not say its {missing}",
            'write the texts "material: mild-steel" and "thickness: 3 mm" into the drawing, or list it in '
            f'{rack.folder / LIST} as a [[stock]] with outline = "{rack.inside(path)}"',
        )
    material = _material(path, said.material, job)
    stock = Stock(
        name="",
        material=material,
        thickness_mm=_thickness_mm(path, said.thickness, material),
        length_mm=None,
        width_mm=None,
        price_per_sheet=_price(path, said, rack),
        grain=_grain(path, said),
        where=str(path),
        rack_file=rack.inside(path),
    )
    return _Remnant(one_line(said.label) if said.label else None, stock)


def _material(path: Path, name: str, job: Job) -> Material:
    """Return the material that a remnant names, with the job's own figures where a part is of it."""
    own = job.parts[0].own
    try:
        found = load_material(name, own)
    except FlatprepError as err:
        raise DrawingError(f"{path}: material: {err.message}", err.remedy) from err
    return next((p.material for p in job.parts if p.material and p.material.id == found.id), found)


def _thickness_mm(path: Path, text: str, material: Material) -> float:
    try:
        return parse_thickness_mm(text, "mm", material)
    except FlatprepError as err:
        raise DrawingError(f"{path}: {err.message}", err.remedy) from err


def _grain(path: Path, said: RemnantLabel) -> str | None:
    if said.grain is not None and said.grain not in GRAINS:
        raise DrawingError(f'{path}: grain: "{said.grain}"', 'write "grain: length" (along x) or "grain: width"')
    return said.grain


def _price(path: Path, said: RemnantLabel, rack: Rack) -> Decimal | None:
    """Return the price that a remnant's drawing states, else the rack's for any remnant."""
    if said.price is None:
        return rack.remnant_price
    try:
        price = Decimal(said.price)
    except InvalidOperation:
        price = Decimal(-1)
    if not price.is_finite() or not 0 <= price <= MOST_MONEY:
        raise DrawingError(f'{path}: price: "{said.price}" is no price', 'write a number alone, such as "price: 12.50"')
    return price


def _wanted(stock: Stock, job: Job) -> bool:
    return any(
        part.material is not None
        and part.material.id == stock.material.id
        and part.thickness_mm is not None
        and abs(part.thickness_mm - stock.thickness_mm) <= SAME_THICKNESS_MM
        for part in job.parts
    )


def _named(remnants: Sequence[_Remnant], job: Job) -> Iterator[Stock]:
    """Give remnants their names, no two alike, none that the job's stock has."""
    taken = {s.name for s in job.stock}
    times = Counter(one.label for one in remnants)
    for one in remnants:
        file = one.stock.rack_file.removesuffix(Path(one.stock.rack_file).suffix)
        own = [one.label] if one.label and times[one.label] == 1 else []
        more = (f"{file} ({k})" for k in count(2))
        name = next(n for n in chain(own, [file], more) if n not in taken)
        taken.add(name)
        yield replace(one.stock, name=name)
