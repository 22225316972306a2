"""What a job file says, checked and in millimetres."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from decimal import Decimal
from enum import StrEnum
from pathlib import Path

from flatprep.job.corners import ReliefKind, WhichCorners
from flatprep.job.terms import CostTerms
from flatprep.model.drawing import Role
from flatprep.profile.material import Material
from flatprep.profile.process import Process

Point = tuple[float, float]


class Pilots(StrEnum):
    """What is cut where bench work will open a hole up."""

    AS_DRAWN = "as-drawn"
    CUT = "cut"
    MARK = "mark"


class Tabs(StrEnum):
    """Which parts holding tabs are asked for."""

    NONE = "none"
    SMALL = "small"
    """Those too small to lie free."""
    ALL = "all"


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
    depth_mm : float or None
        None: right through.
    """

    kind: str
    size: str
    hole_mm: float | None = None
    at: tuple[Point, ...] = ()
    count: int | None = None
    side: str | None = None
    where: str = ""
    """File and key, for messages: ``job.toml: part 2 (leaf), work 1``."""
    depth_mm: float | None = None
    note: str = ""


@dataclass(frozen=True, slots=True)
class BendAsk:
    """A bend asked for: by its line, or by the layer its lines are drawn on."""

    angle_deg: float
    radius_mm: float | None
    line: tuple[Point, Point] | None = None
    layer: str | None = None
    where: str = ""
    direction: str | None = None
    """``up`` or ``down``, seen on side A."""


@dataclass(frozen=True, slots=True)
class Accept:
    """A finding that someone looked at and lets stand: by rule and, where given, place (drawing, mm)."""

    rule: str
    reason: str
    at: Point | None = None


@dataclass(frozen=True, slots=True)
class JointLayer:
    """One thing that a joint's fastener passes through, or ends in.

    Attributes
    ----------
    part : str or None
        A part of the job; None for a spacer.
    spacer : str
        What it is where it is no part of the job: ``washer``, ``bushing`` ...
    thickness_mm : float or None
        None: the part's.
    hole_mm, at
        The hole by its diameter as drawn, or by its place in the part's drawing (mm).
    threaded : bool
        The fastener is screwed into this one.
    """

    part: str | None
    spacer: str = ""
    thickness_mm: float | None = None
    hole_mm: float | None = None
    at: Point | None = None
    threaded: bool = False
    where: str = ""


@dataclass(frozen=True, slots=True)
class JointAsk:
    """A fastener and what it holds together, from its head on.

    `fastener` and `nut` are as written: ``M6 ISO 4762``, ``shoulder 1/4``, ``6 dowel``.
    """

    name: str
    fastener: str
    through: tuple[JointLayer, ...]
    length_mm: float | None = None
    nut: str = ""
    count: int = 1
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
    filler: bool = False
    finish: str = ""
    good_face: str | None = None
    accepts: tuple[Accept, ...] = ()
    corners: WhichCorners | None = None
    """Inside corners that matter; None: every one for lint, the square ones for relief."""
    relief: ReliefKind | None = None
    """How the job has them opened."""
    slot_clearance_mm: float | None = None
    """Slots for the sheet are cut so much wider than it measures; None: as drawn."""
    tabs: Tabs | None = None
    etch_label: bool | None = None
    """Whether its label is etched on it; None: as the job has it."""
    """None: as the job says."""
    own: tuple[Path, ...] = ()
    """Folders of the user's own profiles."""
    where: str = ""
    """File and key, for messages: ``job.toml: part 2 (leaf)``."""


@dataclass(frozen=True, slots=True)
class Stock:
    """Sheets or a remnant; `length_mm` None with `outline` None means open length, `count` None any number.

    `outline` is a drawing, or points with `holes`, mm.

    `margins_mm` is left, right, bottom and top where they differ from the job's margin; in `keep_out` (clamps, screws)
    are boxes (x0, y0, x1, y1) and circles (x, y, radius), mm.
    """

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
    measured_thickness_mm: float | None = None
    where: str = ""
    """File and key, for messages: ``job.toml: stock 1 (al3)``."""
    margins_mm: tuple[float, float, float, float] | None = None
    keep_out: tuple[tuple[float, ...], ...] = ()
    holes: tuple[tuple[Point, ...], ...] = ()
    rack_file: str = ""
    """Where it stands in the rack: ``stock.toml``, or a remnant's drawing; empty for stock of the job itself."""


@dataclass(frozen=True, slots=True)
class Rack:
    """A rack.

    Attributes
    ----------
    folder : Path
    drawings : tuple of Path
        Of the remnants, but for those that a table of ``stock.toml`` names as its outline.
    remnant_price : Decimal or None
        Of a remnant whose drawing states none.
    sheets : tuple of Stock
        From ``stock.toml``.
    gone : tuple of Path
        Drawings of remnants that are used up.
    bookings : int
        Sheets that have been booked out of it.
    """

    folder: Path
    drawings: tuple[Path, ...] = ()
    remnant_price: Decimal | None = None
    sheets: tuple[Stock, ...] = ()
    gone: tuple[Path, ...] = ()
    bookings: int = 0

    def inside(self, path: Path) -> str:
        """Path of a drawing as the rack calls it, with forward slashes."""
        return path.relative_to(self.folder).as_posix()


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
    windows: bool | None = None
    """Whether parts may lie in windows of others; None: as the process has it."""
    layers: Mapping[str, Role] = field(default_factory=dict)
    accepts: tuple[Accept, ...] = ()
    """What holds for every part; each part has these among its own."""
    cost: CostTerms = field(default_factory=CostTerms)
    joints: tuple[JointAsk, ...] = ()
    first_article: bool = False
    """Whether one piece of each kind lies on the first sheet where it may, and is cut first."""
    etch_labels: bool = False
    etch_height_mm: tuple[float, float] = (3.0, 10.0)
    """Least and largest height of etched letters."""
    rack: Rack | None = None
    """Where more stock lies; its sheets are among `stock`, its remnants join them once their drawings are read."""
