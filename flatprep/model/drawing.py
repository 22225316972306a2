"""What a drawing holds once it is read: curves, contours, parts, and what was noticed on the way."""

from collections.abc import Sequence
from dataclasses import dataclass, field
from enum import StrEnum
from functools import cached_property

from flatprep.geom import bulge
from flatprep.geom.bulge import Floats
from flatprep.geom.moments import Moments, region_moments
from flatprep.geom.rings import Rings


class Role(StrEnum):
    """What a line of a drawing is for."""

    CUT = "cut"
    MARK = "mark"
    BEND = "bend"
    IGNORE = "ignore"


class UnitsFrom(StrEnum):
    """Who said which unit a drawing is in."""

    HEADER = "header"
    OPTION = "option"
    ASSUMED = "assumed"


@dataclass(frozen=True, slots=True, eq=False)
class Curve:
    """One entity of a drawing as a bulge polyline in mm.

    Attributes
    ----------
    xyb : ndarray, shape (n, 3)
        See `flatprep.geom.bulge`.
    closed : bool
    layer, linetype, handle, kind : str
        As in the file; `kind` is the DXF type, `handle` that of the entity (of the INSERT for a block's content).
    color : int
        ACI after BYLAYER and BYBLOCK are resolved.
    """

    xyb: Floats
    closed: bool
    layer: str = "0"
    handle: str = ""
    kind: str = "LINE"
    linetype: str = "CONTINUOUS"
    color: int = 7


_EITHER_WAY = ("area_mm2", "length_mm", "bounds", "circle")
"""What is the same whichever way a contour runs."""


@dataclass(frozen=True, eq=False)
class Contour:
    """A closed chain in mm.

    Attributes
    ----------
    xyb : ndarray, shape (n, 3)
        Closed; anticlockwise for an outer contour, clockwise for a hole: material lies to the left.
    handles : tuple of str
        Handle of the entity behind each segment, n of them.
    layers : tuple of str
        The layers the chain was drawn on, sorted.
    """

    xyb: Floats
    handles: tuple[str, ...] = ()
    layers: tuple[str, ...] = ("0",)

    @cached_property
    def area_mm2(self) -> float:
        """Enclosed area, positive."""
        return abs(bulge.signed_area(self.xyb))

    @cached_property
    def length_mm(self) -> float:
        """Length along the arcs."""
        return bulge.length(self.xyb, closed=True)

    @cached_property
    def bounds(self) -> tuple[float, float, float, float]:
        """Least box x0, y0, x1, y1 of the true curve."""
        return bulge.bounds(self.xyb, closed=True)

    @cached_property
    def circle(self) -> tuple[float, float, float] | None:
        """Centre x, y and radius where the contour is one circle drawn as arcs, else None."""
        return bulge.as_circle(self.xyb)

    @property
    def reversed(self) -> "Contour":
        """The contour run the other way, with what is known of it; it starts at the same vertex."""
        # the first segment becomes the last
        out = Contour(bulge.reverse(self.xyb, closed=True), self.handles[::-1], self.layers)
        vars(out).update({k: v for k, v in vars(self).items() if k in _EITHER_WAY})
        return out

    @property
    def distinct_handles(self) -> tuple[str, ...]:
        """The handles without repeats, in order."""
        return tuple(dict.fromkeys(h for h in self.handles if h))


def measure(contours: Sequence[Contour]) -> Floats:
    """Work out area, length and box of many contours at once, and return their signed areas, shape (n,), mm²."""
    rings = Rings.of([c.xyb for c in contours])
    areas = rings.signed_areas
    columns = zip(contours, areas.tolist(), rings.lengths.tolist(), rings.bounds.tolist(), strict=True)
    for contour, area, length, box in columns:
        # what is worked out once is kept where the properties keep it
        vars(contour).update(area_mm2=abs(area), length_mm=length, bounds=tuple(box))
    return areas


@dataclass(frozen=True, eq=False)
class Part:
    """A piece of material: one outer contour, its holes, and what is only marked on it.

    Attributes
    ----------
    name : str
        The drawing's stem, with ``#1``, ``#2`` ... where it holds several parts.
    outer : Contour
    holes : tuple of Contour
    marks, bends : tuple of Curve
        Engraving and marks, and bend lines, that lie on the part.
    depth : int
        0 for an outermost part, 2 for one lying in a window of another, ...
    """

    name: str
    outer: Contour
    holes: tuple[Contour, ...] = ()
    marks: tuple[Curve, ...] = ()
    bends: tuple[Curve, ...] = ()
    depth: int = 0

    @property
    def contours(self) -> tuple[Contour, ...]:
        """The outer contour, then the holes."""
        return (self.outer, *self.holes)

    @cached_property
    def moments(self) -> Moments:
        """Area moments of the material about the drawing's origin, on the exact arcs."""
        return region_moments(self.outer.xyb, [hole.xyb for hole in self.holes])

    @property
    def area_mm2(self) -> float:
        """Net area."""
        return self.outer.area_mm2 - sum(h.area_mm2 for h in self.holes)

    @property
    def cut_length_mm(self) -> float:
        """Length of all contours."""
        return sum(c.length_mm for c in self.contours)

    @property
    def pierces(self) -> int:
        """Contours cut."""
        return 1 + len(self.holes)

    @property
    def size_mm(self) -> tuple[float, float]:
        """Width and height of the box."""
        x0, y0, x1, y1 = self.outer.bounds
        return x1 - x0, y1 - y0

    @property
    def layers(self) -> tuple[str, ...]:
        """The layers its contours were drawn on, sorted."""
        return tuple(sorted({layer for c in self.contours for layer in c.layers}))


@dataclass(frozen=True, slots=True)
class Skipped:
    """An entity that was not used, and why: nothing is dropped in silence."""

    kind: str
    layer: str
    handle: str
    reason: str
    at: tuple[float, float] | None = None
    text: str = ""


@dataclass(frozen=True, slots=True)
class Fault:
    """Something the reader noticed that a rule will judge.

    Attributes
    ----------
    kind : str
        The rule that answers for it, such as ``open-contour``.
    at : tuple of float or None
        Drawing coordinates, mm.
    measured_mm : float or None
    handles : tuple of str
    detail : str
        A few words for the message.
    """

    kind: str
    at: tuple[float, float] | None = None
    measured_mm: float | None = None
    handles: tuple[str, ...] = ()
    detail: str = ""
    places: tuple[tuple[float, float], ...] = ()
    """Every place, mm, where the fault stands for several."""
    closed: bool = False
    """The reader bridged the gap that is measured; the outline counts as closed."""


@dataclass(frozen=True, slots=True)
class Simplified:
    """An insertion of a block, a spline or an ellipse, which is taken as lines and arcs; `name` is the block's."""

    kind: str
    at: tuple[float, float]
    handle: str = ""
    name: str = ""


@dataclass(frozen=True, slots=True)
class Text:
    """A text of the drawing that stands as text (not as outlines), for callouts and for `text-not-outlined`."""

    text: str
    at: tuple[float, float]
    layer: str
    handle: str
    height_mm: float = 0.0
    points_to: tuple[tuple[float, float], ...] = ()
    """Where leaders that belong to the text point, mm."""
    turn_deg: float = 0.0


@dataclass(frozen=True, eq=False)
class Drawing:
    """A drawing as read: everything in mm."""

    file: str
    units: str
    units_from: UnitsFrom
    parts: tuple[Part, ...]
    faults: tuple[Fault, ...] = ()
    skipped: tuple[Skipped, ...] = ()
    texts: tuple[Text, ...] = ()
    roles: tuple[tuple[str, Role, str], ...] = ()
    """(layer, role, why) for every layer that holds geometry."""
    linetypes: tuple[tuple[str, str, Role, str], ...] = ()
    """(layer, linetype, role, why) for lines that are not cut though others of their layer are."""
    recovered: bool = False
    loose: tuple[Curve, ...] = field(default=())
    """Cut lines that close no contour."""
    crossing: tuple[Contour, ...] = ()
    """Contours that cross themselves, as they were drawn; the parts hold what they enclose by the even-odd rule."""
    simplified: tuple[Simplified, ...] = ()
    digest: str = ""
    """SHA-256 of the file as it was read, in hexadecimal."""

    @property
    def short_digest(self) -> str:
        """The digits of the digest that people are shown: enough to tell one content from another."""
        return self.digest[:10]
