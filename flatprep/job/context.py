"""What every table of a job is read with: unit, folder, options, and the profiles already loaded."""

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from decimal import Decimal
from pathlib import Path

from flatprep.base.errors import FlatprepError
from flatprep.base.units import MM_PER_UNIT
from flatprep.job.corners import Corners, WhichCorners
from flatprep.job.reach import Reach
from flatprep.job.values import Accept, Point
from flatprep.model.drawing import Role
from flatprep.profile.gauges import parse_thickness_mm
from flatprep.profile.material import Material
from flatprep.profile.material_load import density, load_material
from flatprep.profile.process import Process
from flatprep.profile.process_load import load_process
from flatprep.profile.toml_check import Table

MOST_MONEY = 1e12
"""No amount is larger: decimal sums then keep their cents."""


@dataclass(frozen=True, slots=True)
class JobOptions:
    """The command line's words, all optional.

    Attributes
    ----------
    profile_folders : tuple of Path
        Own profiles, looked up before those shipped.
    process : str or None
        Instead of the job's; a part that names its own keeps it.
    material, thickness : str or None
        For parts that name none.
    units : str or None
        The unit of every drawing, whatever its header or the job says.
    layers : mapping of str to Role
        Before the job's own.
    anywhere : bool
        Lets the job read files that lie neither under its folder nor beside it.
    rack : Path or None
        Instead of the job's.
    etch, first_article : bool
        As the job's, whatever it says.
    """

    profile_folders: tuple[Path, ...] = ()
    process: str | None = None
    material: str | None = None
    thickness: str | None = None
    units: str | None = None
    layers: Mapping[str, Role] = field(default_factory=dict)
    anywhere: bool = False
    rack: Path | None = None
    etch: bool = False
    first_article: bool = False


@dataclass(frozen=True, slots=True)
class Context:
    """Reads the values that several tables share; every error names file, key and value."""

    unit: str
    reach: Reach
    options: JobOptions
    overrides: Mapping[str, Table] = field(default_factory=dict)
    """Tables ``[material.ID]`` by the id of the material."""
    _materials: dict[str, Material] = field(default_factory=dict)

    def material(self, table: Table, key: str) -> Material | None:
        """Return the material that a key names, else the option's, else None."""
        if not table.has(key):
            return self._load(self.options.material) if self.options.material else None
        name = table.text(key)
        try:
            return self._load(name)
        except FlatprepError as err:
            raise _named(table, key, name, err) from None

    def _load(self, name: str) -> Material:
        if name not in self._materials:
            found = load_material(name, self.options.profile_folders)
            self._materials[name] = self._priced(found)
        return self._materials[name]

    def _priced(self, material: Material) -> Material:
        given = self.overrides.get(material.id)
        if given is None:
            return material
        own = density(given)
        price = money(given, "price_per_kg")
        return replace(
            material,
            density_kg_m3=material.density_kg_m3 if own is None else own,
            price_per_kg=material.price_per_kg if price is None else price,
        )

    def process(self, table: Table, key: str) -> Process:
        """Return the process that a key names: an id, or a file seen from the job's folder."""
        name = table.text(key)
        try:
            if name.endswith(".toml"):
                return load_process(str(self.reach.file(table, key, name)))
            return load_process(name, self.options.profile_folders)
        except table.error:
            raise
        except FlatprepError as err:
            raise _named(table, key, name, err) from None

    def thickness_mm(self, table: Table, key: str, material: Material | None) -> float | None:
        """Return the thickness of a key, else the option's, else None."""
        value = table.get(key)
        if value is None:
            asked = self.options.thickness
            return parse_thickness_mm(asked, "mm", material) if asked else None
        if isinstance(value, bool) or not isinstance(value, int | float | str):
            raise table.fail(key, 'a thickness, such as 3, "1/8in" or "16ga"')
        try:
            return parse_thickness_mm(value, self.unit, material)
        except FlatprepError as err:
            raise _named(table, key, value, err) from None

    def length_mm(
        self, table: Table, key: str, default: float | None = None, *, least: float | None = None,
        above: float | None = None,
    ) -> float:  # fmt: skip
        """Return a length; bare numbers are in the job's unit."""
        return table.length_mm(key, default, unit=self.unit, least=least, above=above)

    def points_mm(self, table: Table, key: str) -> tuple[Point, ...]:
        """Return a list of points; bare numbers are in the job's unit."""
        value = table.get(key)
        if not isinstance(value, list) or not all(isinstance(row, list) and len(row) == 2 for row in value):
            raise table.fail(key, "a list of points, such as [[0, 20], [80, 20]]")
        return tuple((self._mm(table, key, x), self._mm(table, key, y)) for x, y in value)

    def point_mm(self, table: Table, key: str) -> Point:
        """Return one point; bare numbers are in the job's unit."""
        value = table.get(key)
        if not isinstance(value, list) or len(value) != 2:
            raise table.fail(key, "a point, such as [10, 20]")
        return self._mm(table, key, value[0]), self._mm(table, key, value[1])

    def sides_mm(self, table: Table, key: str) -> tuple[float, float]:
        """Return the two sides of something, both above 0."""
        a, b = self.point_mm(table, key)
        if min(a, b) <= 0.0:
            raise table.fail(key, "two lengths above 0, such as [300, 300]")
        return a, b

    def _mm(self, table: Table, key: str, value: object) -> float:
        return table.checked_length_mm(key, value, unit=self.unit)

    def drawing_units(self, table: Table) -> str | None:
        """Return the unit that a part's drawing is to be taken in, or None."""
        stated = table.choice("drawing_units", tuple(MM_PER_UNIT)) if table.has("drawing_units") else None
        return self.options.units or stated


def money(table: Table, key: str) -> Decimal | None:
    """Return an amount of money exactly as it is written, or None where the key is not there."""
    number = table.optional_number(key, least=0.0)
    if number is not None and number > MOST_MONEY:
        raise table.fail(key, f"a number from 0 to {MOST_MONEY:g}")
    return None if number is None else Decimal(str(table.get(key)))


def roles(table: Table, key: str) -> dict[str, Role]:
    """Return the roles of layers: ``{ OUTLINE = "cut" }``."""
    inner = table.table(key)
    if inner is None:
        return {}
    return {layer: Role(inner.choice(layer, tuple(Role))) for layer in inner.data}


def accepts(table: Table, context: Context) -> tuple[Accept, ...]:
    """Return the findings that may stand: ``[[accept]]`` with rule, reason and, optionally, a place."""
    out = []
    for one in table.tables("accept"):
        one.only(("rule", "reason", "at"))
        out.append(Accept(one.text("rule"), one.text("reason"), context.point_mm(one, "at") if one.has("at") else None))
    return tuple(out)


def corners(table: Table, context: Context) -> WhichCorners | None:
    """Return which inside corners matter: one of `Corners`, or places."""
    value = table.get("corners")
    if value is None:
        return None
    if isinstance(value, str):
        return Corners(table.choice("corners", tuple(Corners)))
    return context.points_mm(table, "corners")


def _named(table: Table, key: str, value: object, err: FlatprepError) -> FlatprepError:
    shown = f'"{value}"' if isinstance(value, str) else value
    said = err.message.replace(f" {shown}", "")
    return table.error(f"{table.place}: {key} = {shown}: {said}", err.remedy)
