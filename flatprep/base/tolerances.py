"""Tolerances as one frozen value that is passed in: no module keeps an epsilon of its own."""

from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Tolerances:
    """How exact the work is, in mm.

    Attributes
    ----------
    join_mm
        Ends this near are one point, in silence (the process profile's ``join_gap``).
    chord_mm
        Largest distance of a chord polygon from its arcs, where one is made.
    curve_mm
        Largest distance of the arcs that stand for a spline or an ellipse.
    limit_mm
        A measure this much past a limit still keeps it: lines and arcs drawn as such.
    limit_chord_mm
        The same where a chord polygon or inch rounding stands for a circle.
    same_mm
        Two places nearer than this are the same place (double lines, coincident circles).
    """

    join_mm: float = 0.05
    chord_mm: float = 0.01
    curve_mm: float = 0.001
    limit_mm: float = 0.001
    limit_chord_mm: float = 0.01
    same_mm: float = 0.01


DEFAULT = Tolerances()
