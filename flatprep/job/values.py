"""What a job file says, checked and in millimetres."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal
from enum import StrEnum
from pathlib import Path

from flatprep.model.drawing import Role
from flatprep.profile.material import Material
from flatprep.profile.process import Process

Point = tuple[float, float]


class Pilots(StrEnum):
    """What is cut where bench work will open a hole up."""

    AS_DRAWN = "as-drawn"
    CUT = "cut"
    MARK = "mark"


@dataclass(frozen=True, slots=True)
class Work:
    """Bench work asked for: exactly one of `hole_mm` and `at` is given.

    Attributes
    ----------
    kind : str
        ``tap``, ``ream``, ``bore``, ``countersink``, ``counterbore``, ``clearance``, ``drill``, ``thread_insert``,
        ``press`` ...
    size : str
        As written: ``M5``, ``6 H7``, ``M5 ISO 10642``.
    """

    kind: str
    size: str
    hole_mm: float | None = None
    at: tuple[Point, ...] = ()
    count: int | None = None
    side: str | None = None
    where: str = ""
    """File and key, for messages: ``job.toml: part 2 (leaf), work 1``."""


@dataclass(frozen=True, slots=True)
class BendAsk:
    """A bend asked for: by its line, or by the layer its lines are drawn on."""

    angle_deg: float
    radius_mm: float | None
    line: tuple[Point, Point] | None = None
    layer: str | None = None
    where: str = ""


@dataclass(frozen=True, slots=True)
class JobPart:
    """A part of a job; quantities are per set.

    `turns_deg` None means free turning; `grain` is the drawing's direction, ``x`` or ``y``, that lies along the
    stock's grain.
    """

    drawing: Path
    name: str
    material: Material | None
    thickness_mm: float | None
    process: Process
    quantity: int = 1
    quantity_opposite: int = 0
    turns_deg: tuple[float, ...] | None = None
    may_flip: bool = False
    grain: str | None = None
    drawing_units: str | None = None
    work: tuple[Work, ...] = ()
    bends: tuple[BendAsk, ...] = ()
    layers: Mapping[str, Role] = field(default_factory=dict)
    revision: str = ""
    note: str = ""


@dataclass(frozen=True, slots=True)
class Stock:
    """Sheets or a remnant; `length_mm` None with `outline` None means open length, `count` None any number."""

    name: str
    material: Material
    thickness_mm: float
    length_mm: float | None
    width_mm: float | None
    outline: Path | tuple[Point, ...] | None = None
    count: int | None = 1
    price_per_sheet: Decimal | None = None
    price_per_metre: Decimal | None = None
    grain: str | None = None


@dataclass(frozen=True, slots=True)
class Job:
    """A checked job."""

    path: Path
    name: str
    revision: str
    process: Process
    spacing_mm: float
    margin_mm: float
    parts: tuple[JobPart, ...]
    stock: tuple[Stock, ...]
    sets: int = 1
    mass_limit_kg: float | None = None
    pilots: Pilots = Pilots.AS_DRAWN
    currency: str | None = None
    units: str = "mm"
