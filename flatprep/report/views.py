"""What the templates show of a bundle, row by row: numbered, sorted and named, but not yet formatted."""

import hashlib
from collections import Counter
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from markupsafe import Markup

from flatprep.model.finding import Severity
from flatprep.model.layout import SheetLayout
from flatprep.model.work import Step, StepKind
from flatprep.report.badges import Point, finding_badges, step_badges
from flatprep.report.bundle import Bundle, Offcut, PartCard
from flatprep.report.charts import share_bar
from flatprep.report.figures import counted, length, percent, place, size
from flatprep.report.part_figure import frame, part_figure
from flatprep.report.sheet_figure import Shape, sheet_box, sheet_figure

_WORK = {
    StepKind.DEBURR: "Deburr",
    StepKind.FLATNESS: "Check flatness",
    StepKind.CENTRE_MARK: "Mark the centre",
    StepKind.DRILL: "Drill",
    StepKind.REAM: "Ream",
    StepKind.BORE: "Bore",
    StepKind.COUNTERSINK: "Countersink",
    StepKind.COUNTERBORE: "Counterbore",
    StepKind.TAP: "Tap",
    StepKind.THREAD_INSERT: "Fit a thread insert",
    StepKind.BEND: "Bend",
    StepKind.PRESS: "Press in",
    StepKind.INSPECT: "Inspect",
}
_MOST_PLACES = 12
"""More are only counted: their marks are in the picture."""


@dataclass(frozen=True, slots=True)
class StepRow:
    """A bench step in words."""

    step: Step
    tick: str
    title: str
    tool: str
    places: str


@dataclass(frozen=True, slots=True)
class PartView:
    """A part as the page shows it."""

    id: str
    card: PartCard
    picture: Markup
    datum: bool
    steps: tuple[StepRow, ...]
    material: str
    pieces: str
    total: int
    size: str
    stuff: str
    tally: str
    questions: tuple[str, ...]
    flip: str
    mass_bar: Markup
    cost_bar: Markup

    @property
    def words(self) -> str:
        """What the search looks through."""
        card = self.card
        return " ".join((card.name, self.stuff, card.material, card.process, card.drawing, card.note)).lower()


@dataclass(frozen=True, slots=True)
class SheetLine:
    """A kind of part on a sheet: its number in the picture, and which state of its drawing it is."""

    number: int
    name: str
    pieces: int
    revision: str
    digest: str


@dataclass(frozen=True, slots=True)
class SheetView:
    """A sheet as the page shows it."""

    number: int
    stock: str
    material: str
    thickness_mm: float
    size: str
    used_length_mm: float
    utilisation: float
    offcut: str
    contents: tuple[SheetLine, ...]
    picture: Markup


def part_views(bundle: Bundle) -> tuple[PartView, ...]:
    """One view a card, in the bundle's order."""
    masses = [_total(card, card.estimate.mass_kg if card.estimate else None) for card in bundle.cards]
    costs = [float(card.estimate.line_cost or 0) if card.estimate else 0.0 for card in bundle.cards]
    return tuple(part_view(bundle, card, i, _share(masses, i), _share(costs, i)) for i, card in enumerate(bundle.cards))


def part_view(bundle: Bundle, card: PartCard, index: int = 0, mass: float = 0.0, cost: float = 0.0) -> PartView:
    """View of one card; `mass` and `cost` are its shares of the job's."""
    part = card.part
    asked = next((p for p in bundle.checklist.parts if p.name == card.name), None) if bundle.checklist else None
    badges = (*finding_badges(card.findings), *step_badges(card.steps))
    label = f"{card.name}: outline with numbered marks"
    return PartView(
        id=f"part-{index + 1}",
        card=card,
        picture=Markup(part_figure(part, badges, units=bundle.units, label=label)) if part else Markup(""),
        datum=part is not None and _holds_origin(frame(part)[1]),
        steps=step_rows(card, bundle.units),
        material=card.material_name or card.material,
        pieces=_pieces(card),
        total=card.quantity + card.quantity_opposite,
        size=size(*part.size_mm, bundle.units) if part else "",
        stuff=_stuff(card, bundle.units),
        tally=_tally(card),
        questions=asked.questions if asked else (),
        flip=asked.flip if asked else "",
        mass_bar=Markup(share_bar(mass, f"{percent(mass)} of the mass")) if mass else Markup(""),
        cost_bar=Markup(share_bar(cost, f"{percent(cost)} of the cost")) if cost else Markup(""),
    )


def step_rows(card: PartCard, units: str) -> tuple[StepRow, ...]:
    """Rows of a card's steps, in order."""
    first: dict[tuple[Point, ...], int] = {}
    rows = []
    for step in card.steps:
        earlier = first.setdefault(step.at, step.order)
        title = step_title(step)
        tool = "" if step.tool.lower() == title.lower() else step.tool
        rows.append(StepRow(step, _tick(card, step), title, tool, places(step, earlier, units)))
    return tuple(rows)


def step_title(step: Step) -> str:
    """``Countersink M5 ISO 10642``, and at how many places."""
    return f"{_WORK[step.kind]} {step.size}".strip()


def places(step: Step, earlier: int, units: str) -> str:
    """Where a step is done: its places, or the earlier step that has the same ones."""
    if len(step.at) > 1 and earlier != step.order:
        return f"Same places as step {earlier}."
    listed = ", ".join(place(at, units) for at in step.at[:_MOST_PLACES])
    more = len(step.at) - _MOST_PLACES
    return f"At {listed}{f' and {more} more' if more > 0 else ''}." if listed else ""


def _tick(card: PartCard, step: Step) -> str:
    """Key under which the browser keeps the tick: another drawing or another step has another."""
    identity = (card.name, card.revision, card.digest, step.order, step.kind, step.size, step.tool_dia_mm, step.at)
    return hashlib.sha256(repr(identity).encode()).hexdigest()[:12]


def shapes_of(views: Sequence[PartView]) -> dict[str, Shape]:
    """Return the shapes that sheets are drawn from, by the part's name."""
    return {
        view.card.name: Shape(f"shape-{view.id}", number, view.card.part)
        for number, view in enumerate(views, start=1)
        if view.card.part is not None
    }


def sheet_views(bundle: Bundle, shapes: Mapping[str, Shape]) -> tuple[SheetView, ...]:
    """One view a sheet of the layout."""
    if bundle.layout is None:
        return ()
    offcuts = {offcut.sheet: offcut for offcut in bundle.offcuts}
    return tuple(
        sheet_view(bundle, sheet, number, shapes, offcuts.get(number))
        for number, sheet in enumerate(bundle.layout.sheets, start=1)
    )


def sheet_view(
    bundle: Bundle, sheet: SheetLayout, number: int, shapes: Mapping[str, Shape], offcut: Offcut | None
) -> SheetView:
    """View of one sheet."""
    units = bundle.units
    x0, y0, x1, y1 = sheet_box(sheet)
    label = f"Sheet {number}, {sheet.stock}, with {counted(len(sheet.placements), 'piece')}"
    return SheetView(
        number=number,
        stock=sheet.stock,
        material=sheet.material,
        thickness_mm=sheet.thickness_mm,
        size=size(x1 - x0, y1 - y0, units),
        used_length_mm=sheet.used_length_mm,
        utilisation=sheet.utilisation,
        offcut=size(offcut.x1 - offcut.x0, offcut.y1 - offcut.y0, units) if offcut else "",
        contents=_contents(bundle, sheet),
        picture=Markup(sheet_figure(sheet, shapes, offcut=offcut, units=units, label=label)),
    )


def _contents(bundle: Bundle, sheet: SheetLayout) -> tuple[SheetLine, ...]:
    counts = Counter(placement.part for placement in sheet.placements)
    return tuple(
        SheetLine(number, card.name, counts[card.name], card.revision, card.digest)
        for number, card in enumerate(bundle.cards, start=1)
        if card.name in counts
    )


def _holds_origin(box: tuple[float, float, float, float]) -> bool:
    return box[0] <= 0 <= box[2] and box[1] <= 0 <= box[3]


def _total(card: PartCard, each: float | None) -> float:
    return (each or 0.0) * (card.quantity + card.quantity_opposite)


def _share(values: Sequence[float], i: int) -> float:
    total = sum(values)
    return values[i] / total if total > 0 else 0.0


def _pieces(card: PartCard) -> str:
    if card.quantity_opposite:
        return f"{card.quantity} as drawn, {card.quantity_opposite} turned over"
    return str(card.quantity)


def _stuff(card: PartCard, units: str) -> str:
    thickness = length(card.thickness_mm, units) if card.thickness_mm is not None else ""
    return ", ".join(word for word in (card.material_name or card.material, thickness) if word)


def _tally(card: PartCard) -> str:
    names = {Severity.ERROR: "error", Severity.WARNING: "warning", Severity.NOTE: "note"}
    counts = [(card.count(severity), name) for severity, name in names.items()]
    return ", ".join(counted(n, name) for n, name in counts if n) or "none"
