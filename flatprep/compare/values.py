"""What is found when two revisions of a drawing are held against each other."""

from dataclasses import dataclass
from enum import StrEnum

from flatprep.geom.bulge import Floats, Similarity
from flatprep.measure.holes import Hole
from flatprep.model.drawing import Curve, Part

Place = tuple[float, float]


class HoleChange(StrEnum):
    """What became of a hole."""

    SAME = "same"
    MOVED = "moved"
    RESIZED = "resized"
    RESHAPED = "reshaped"
    APPEARED = "appeared"
    GONE = "gone"


@dataclass(frozen=True, slots=True, eq=False)
class HolePair:
    """A hole before and after; `new` lies in the old drawing's coordinates."""

    change: HoleChange
    old: Hole | None
    new: Hole | None

    @property
    def at(self) -> Place:
        """Where to look: the new place, or the old one of a hole that is gone."""
        hole = self.new or self.old
        assert hole is not None
        return hole.at

    @property
    def step(self) -> Place | None:
        """How far it moved in x and y, mm; None where there is only one of the two."""
        if self.old is None or self.new is None:
            return None
        return self.new.at[0] - self.old.at[0], self.new.at[1] - self.old.at[1]


@dataclass(frozen=True, slots=True, eq=False)
class Region:
    """A piece of material by which the two differ.

    Attributes
    ----------
    added : bool
        The new part has it and the old one has not.
    at : tuple of float
        A point in it, mm.
    depth_mm : float
        Largest distance between the two edges there.
    length_mm : float
        Length of the new part's edge along it.
    area_mm2 : float
    rings : tuple of ndarray, shape (n, 2)
        Its outline and holes, in chords.
    """

    added: bool
    at: Place
    depth_mm: float
    length_mm: float
    area_mm2: float
    rings: tuple[Floats, ...]


@dataclass(frozen=True, slots=True, eq=False)
class Lines:
    """Bend or mark lines that came or went, in the old drawing's coordinates."""

    appeared: tuple[Curve, ...] = ()
    gone: tuple[Curve, ...] = ()


class Task(StrEnum):
    """What is done to a piece that is already cut."""

    DRILL = "drill"
    OPEN_UP = "open up"
    CUT_HOLE = "cut"
    RECUT = "re-cut"


@dataclass(frozen=True, slots=True)
class Step:
    """One thing to do to a piece that is already cut.

    Attributes
    ----------
    from_mm, to_mm : float or None
        Diameters, or for an edge the largest depth that comes off (`to_mm`).
    length_mm : float or None
        Of an edge.
    """

    task: Task
    at: Place
    to_mm: float | None = None
    from_mm: float | None = None
    length_mm: float | None = None


@dataclass(frozen=True, slots=True, eq=False)
class Rework:
    """Whether a cut piece of the old revision holds one of the new.

    Attributes
    ----------
    motion : Similarity
        How the new part is laid on the old one for it: new coordinates to old ones.
    missing : tuple of Region
        Material that the new part needs and the old piece has not; empty: it can be reworked.
    steps : tuple of Step
        What to do; empty where it cannot be done, or nothing is to be done.
    """

    motion: Similarity
    missing: tuple[Region, ...]
    steps: tuple[Step, ...]

    @property
    def possible(self) -> bool:
        """Whether the new part lies inside the old one."""
        return not self.missing


@dataclass(frozen=True, slots=True, eq=False)
class PartChange:
    """One part before and after.

    Attributes
    ----------
    motion : Similarity
        New drawing's coordinates to the old one's; everything below is in the old one's.
    laid : Part
        The new part, moved so.
    """

    old: Part
    new: Part
    motion: Similarity
    laid: Part
    holes: tuple[HolePair, ...]
    edges: tuple[Region, ...]
    bends: Lines
    marks: Lines
    rework: Rework

    @property
    def same_place(self) -> bool:
        """Whether both lie in the same drawing coordinates."""
        m = self.motion
        return not m.mirrored and m.turn_deg == 0.0 and m.dx == 0.0 and m.dy == 0.0

    @property
    def same(self) -> bool:
        """Whether nothing changed but, perhaps, the place in the drawing."""
        lines = (*self.bends.appeared, *self.bends.gone, *self.marks.appeared, *self.marks.gone)
        return not self.edges and not lines and all(p.change is HoleChange.SAME for p in self.holes)


@dataclass(frozen=True, slots=True, eq=False)
class Comparison:
    """Two drawings held against each other."""

    old_file: str
    new_file: str
    old_units: str
    new_units: str
    changes: tuple[PartChange, ...]
    appeared: tuple[Part, ...] = ()
    gone: tuple[Part, ...] = ()

    @property
    def same(self) -> bool:
        """Whether nothing changed."""
        return not self.appeared and not self.gone and all(c.same for c in self.changes)
