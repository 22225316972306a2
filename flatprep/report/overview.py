"""The head of the report: the verdict in words and the job's figures."""

from collections.abc import Iterator
from dataclasses import dataclass

from markupsafe import Markup

from flatprep.model.estimate import Estimate
from flatprep.model.finding import Severity
from flatprep.model.layout import Layout
from flatprep.report.bundle import Bundle
from flatprep.report.charts import share_bar
from flatprep.report.figures import counted, mass, money, percent
from flatprep.report.part_figure import badge_shape
from flatprep.report.svg_tag import picture, tag


@dataclass(frozen=True, slots=True)
class Verdict:
    """Whether the job may go to the cutter: `level` is ``stop``, ``look`` or ``go``."""

    level: str
    headline: str
    detail: str

    @property
    def sign(self) -> Markup:
        """Triangle, diamond or tick, as on the marks."""
        shape = {
            "stop": badge_shape("error", "", 10, 10, 7.5),
            "look": badge_shape("warning", "", 10, 10, 7.5),
            "go": tag("circle", class_="badge", cx=10, cy=10, r=8.5)
            + tag("path", class_="leader", d="M5.5 10.5l3 3 6-7"),
        }[self.level]
        css = {"stop": "mark error", "look": "mark warning", "go": "mark go"}[self.level]
        return Markup(picture(tag("g", shape, class_=css), (0, 0, 20, 20), css="sign", label=self.level))


@dataclass(frozen=True, slots=True)
class Figure:
    """One figure of the overview; `bar` is a picture, marked up, or empty."""

    name: str
    value: str
    detail: str = ""
    bar: str = ""


def verdict(bundle: Bundle) -> Verdict:
    """Judge the job by its findings, unreadable drawings and unplaced parts."""
    joints = bundle.checklist.joints if bundle.checklist else ()
    stops = [
        (bundle.count(Severity.ERROR), "error", "errors"),
        (len(bundle.unreadable), "drawing unreadable", "drawings unreadable"),
        (
            sum(u.count for u in bundle.layout.unplaced) if bundle.layout else 0,
            "piece without a place",
            "pieces without a place",
        ),
        (sum(not joint.closes for joint in joints), "joint that does not close", "joints that do not close"),
    ]
    warnings = bundle.count(Severity.WARNING)
    said = [counted(n, one, many) for n, one, many in stops if n]
    if said:
        also = f"; also {counted(warnings, 'warning')}" if warnings else ""
        return Verdict("stop", "Not ready to cut", ", ".join(said) + also + ".")
    if warnings:
        return Verdict("look", "Look first, then cut", f"{counted(warnings, 'warning')} to decide on, no error.")
    return Verdict(
        "go", "Nothing found against cutting", "No error and no warning. Check the first piece against its drawing."
    )


def figures(bundle: Bundle) -> tuple[Figure, ...]:
    """Parts, findings, sheets, mass and cost, as far as they are known."""
    return tuple(_figures(bundle))


def _figures(bundle: Bundle) -> Iterator[Figure]:
    pieces = sum(card.quantity + card.quantity_opposite for card in bundle.cards)
    yield Figure("Parts", str(len(bundle.cards)), f"{counted(pieces, 'piece')} in all sets")
    errors, warnings, notes = (bundle.count(s) for s in (Severity.ERROR, Severity.WARNING, Severity.NOTE))
    words = (counted(errors, "error"), counted(warnings, "warning"), counted(notes, "note"))
    yield Figure("Findings", str(errors + warnings + notes), ", ".join(words))
    steps = sum(len(card.steps) for card in bundle.cards)
    yield Figure("Bench steps", str(steps), f"on {counted(sum(bool(c.steps) for c in bundle.cards), 'part')}")
    if bundle.layout is None:
        yield Figure("Sheets", "none", "the job names no stock")
    else:
        yield _sheets(bundle.layout, bundle.estimate)
    if bundle.estimate is not None:
        yield _mass(bundle.estimate)
        yield _cost(bundle.estimate)


def _sheets(layout: Layout, estimate: Estimate | None) -> Figure:
    used = estimate.utilisation if estimate else None
    return Figure("Sheets", str(len(layout.sheets)), f"{percent(used)} of it is parts" if used is not None else "")


def _mass(estimate: Estimate) -> Figure:
    name = "Mass, one set"
    if estimate.mass_kg is None:
        return Figure(name, "not known")
    if estimate.mass_limit_kg is None:
        return Figure(name, mass(estimate.mass_kg), "no limit set")
    share = estimate.mass_kg / estimate.mass_limit_kg
    left = estimate.mass_limit_kg - estimate.mass_kg
    words = f"limit {mass(estimate.mass_limit_kg)}, " + (f"{mass(left)} left" if left >= 0 else f"{mass(-left)} over")
    return Figure(name, mass(estimate.mass_kg), words, Markup(share_bar(share, f"{percent(share)} of the limit")))


def _cost(estimate: Estimate) -> Figure:
    if estimate.material_cost is None:
        return Figure("Material cost", "not known", "a price is missing")
    return Figure("Material cost", money(estimate.material_cost, estimate.currency), "all sets, whole stock used")
