"""A part as the bench sees it: its shape, what it is made of and by, and what is asked of it."""

from dataclasses import dataclass
from functools import cached_property
from pathlib import Path

from flatprep.job.values import BendAsk, Job, JobPart, Pilots, Tabs, Work
from flatprep.measure.holes import Hole, recognise
from flatprep.model.drawing import Drawing, Part, Text
from flatprep.profile.material import METAL_FAMILIES, Material
from flatprep.profile.process import Process


@dataclass(frozen=True, eq=False)
class BenchPart:
    """A part and its bench work.

    Attributes
    ----------
    name : str
    part : Part
        As drawn.
    quantity, quantity_opposite : int
        Pieces as drawn and turned over, all sets.
    work, bends : tuple
        What the job asks for.
    texts : tuple of Text
        Texts of the drawing, for its callouts.
    pilots : Pilots
        What is cut where bench work opens a hole up.
    units : str
        The drawing's unit, which bare numbers in its texts are in.
    inch : bool
        The job is in inches: number, letter and fractional drills are named.
    own : tuple of Path
        Folders of the user's own profiles, whose hardware tables and rules go first.
    tabs : Tabs
        Whether the job asks for holding tabs.
    where : str
        Place in the job file, for messages; parts of one drawing share it.
    """

    name: str
    part: Part
    process: Process
    quantity: int = 1
    material: Material | None = None
    thickness_mm: float | None = None
    work: tuple[Work, ...] = ()
    bends: tuple[BendAsk, ...] = ()
    texts: tuple[Text, ...] = ()
    pilots: Pilots = Pilots.AS_DRAWN
    quantity_opposite: int = 0
    finish: str = ""
    good_face: str | None = None
    where: str = ""
    units: str = "mm"
    inch: bool = False
    own: tuple[Path, ...] = ()
    tabs: Tabs = Tabs.NONE

    @cached_property
    def holes(self) -> tuple[Hole, ...]:
        """The holes by their shapes."""
        return tuple(recognise(contour) for contour in self.part.holes)

    @property
    def family(self) -> str | None:
        """Family of the material, if it is known."""
        return self.material.family if self.material else None

    @property
    def is_metal(self) -> bool:
        """Whether its edges are to be expected like those of metal: also where the material is not known."""
        return self.family is None or self.family in METAL_FAMILIES

    @property
    def least_hole_mm(self) -> float:
        """Smallest hole that the process cuts in this thickness; 0 where that is not known."""
        limit = self.process.limit("hole", self.family, self.thickness_mm)
        return limit.error if limit else 0.0


def bench_part(ask: JobPart, part: Part, job: Job, drawing: Drawing | None = None) -> BenchPart:
    """Return the bench's view of a part of a job; quantities become those of all sets.

    Parameters
    ----------
    ask
        What the job says of the part.
    part
        Its shape as drawn.
    drawing
        Gives the texts, whose callouts are read as work.
    """
    return BenchPart(
        name=part.name, part=part, process=ask.process, quantity=ask.quantity * job.sets, material=ask.material,
        thickness_mm=ask.thickness_mm, work=ask.work, bends=ask.bends, texts=drawing.texts if drawing else (),
        pilots=job.pilots, quantity_opposite=ask.quantity_opposite * job.sets, finish=ask.finish,
        good_face=ask.good_face, where=ask.where, units=drawing.units if drawing else "mm",
        inch=job.units in ("in", "ft"), own=ask.own,
        tabs=ask.tabs or Tabs.NONE,
    )  # fmt: skip
