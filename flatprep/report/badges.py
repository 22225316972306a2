"""Numbered marks on a part's picture: which places get one, what it says, and where it is put."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from math import cos, hypot, radians, sin

from flatprep.model.finding import Finding
from flatprep.model.work import Step, StepKind

Point = tuple[float, float]

MOST_BADGES = 60
"""Above this many places a step gets a badge at its first place only."""

_UNMARKED = frozenset({StepKind.DEBURR, StepKind.FLATNESS})
"""Done all over the part: a mark would only hide the others."""

_DIRECTIONS_DEG = (60, 120, 300, 240, 20, 160, 340, 200, 90, 270)
_REACHES = (1.9, 2.9, 4.2, 6.0)


@dataclass(frozen=True, slots=True)
class Badge:
    """One numbered mark.

    Attributes
    ----------
    keys : tuple of str
        The rows it belongs to: ``f1`` a finding, ``s3`` a step.
    kind : str
        ``error``, ``warning``, ``note`` or ``step``.
    at : tuple of float
        Place in the drawing, mm.
    title : str
        What it says when pointed at.
    """

    keys: tuple[str, ...]
    kind: str
    at: Point
    title: str

    @property
    def text(self) -> str:
        """The numbers on it."""
        return " ".join(key[1:] for key in self.keys)


def finding_badges(findings: Sequence[Finding]) -> tuple[Badge, ...]:
    """One badge for each finding that has a place; numbers as in the table."""
    return tuple(
        Badge((f"f{i}",), f.severity.value, f.at, f"{f.severity.value}: {f.message}")
        for i, f in enumerate(findings, start=1)
        if f.at is not None
    )


def step_badges(steps: Sequence[Step]) -> tuple[Badge, ...]:
    """One badge a place, with the numbers of all steps done there."""
    steps = [step for step in steps if step.kind not in _UNMARKED]
    sparing = sum(len(step.at) for step in steps) > MOST_BADGES
    places: dict[Point, list[Step]] = {}
    for step in steps:
        for x, y in step.at[:1] if sparing else step.at:
            places.setdefault((round(x, 2), round(y, 2)), []).append(step)
    return tuple(
        Badge(
            tuple(f"s{s.order}" for s in here), "step", at, "; ".join(f"{s.kind.value} {s.size}".strip() for s in here)
        )
        for at, here in places.items()
    )


def spread(badges: Sequence[Badge], radius: float, box: tuple[float, float, float, float]) -> tuple[Point, ...]:
    """Centre of each badge: near its place, off every place and off each other, inside the box where that is possible.

    Parameters
    ----------
    badges
        In order of importance.
    radius
        Of a badge, mm.
    box
        x0, y0, x1, y1 in mm.
    """
    taken: list[Point] = []
    for badge in badges:
        free = (
            c for c in _candidates(badge.at, radius) if _inside(c, radius, box) and _clear(c, radius, taken, badges)
        )
        taken.append(next(free, next(_candidates(badge.at, radius))))
    return tuple(taken)


def _candidates(at: Point, radius: float) -> Iterator[Point]:
    for reach in _REACHES:
        for angle in _DIRECTIONS_DEG:
            yield at[0] + reach * radius * cos(radians(angle)), at[1] + reach * radius * sin(radians(angle))


def _inside(c: Point, radius: float, box: tuple[float, float, float, float]) -> bool:
    return box[0] + radius <= c[0] <= box[2] - radius and box[1] + radius <= c[1] <= box[3] - radius


def _clear(c: Point, radius: float, taken: Sequence[Point], badges: Sequence[Badge]) -> bool:
    far = all(hypot(c[0] - x, c[1] - y) >= 2.2 * radius for x, y in taken)
    return far and all(hypot(c[0] - b.at[0], c[1] - b.at[1]) >= 1.4 * radius for b in badges)
