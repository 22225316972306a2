"""The other hand of a handed pair: the part and its steps as the bench sees the turned-over pieces."""

from dataclasses import replace

from flatprep.bench.sides import is_opposite_note
from flatprep.geom import bulge
from flatprep.geom.bulge import Similarity
from flatprep.model.drawing import Contour, Curve, Part
from flatprep.model.work import Step

_TURNED_OVER = Similarity(mirrored=True)


def opposite_part(part: Part) -> Part:
    """Return a part mirrored at the drawing's y axis, x -> -x: material still lies to the left of each contour."""
    return replace(
        part, outer=_contour(part.outer), holes=tuple(_contour(hole) for hole in part.holes),
        marks=tuple(_curve(mark) for mark in part.marks), bends=tuple(_curve(line) for line in part.bends),
    )  # fmt: skip


def opposite_steps(steps: tuple[Step, ...]) -> tuple[Step, ...]:
    """Return the steps at their mirrored places; side A is again the face that is seen."""
    return tuple(
        replace(step, at=tuple((-x, y) for x, y in step.at), note=_without_opposite(step.note)) for step in steps
    )


def _without_opposite(note: str) -> str:
    return "; ".join(sentence for sentence in note.split("; ") if not is_opposite_note(sentence))


def _contour(contour: Contour) -> Contour:
    xyb = bulge.reverse(_TURNED_OVER.polyline(contour.xyb), closed=True)
    return Contour(xyb, contour.handles[::-1], contour.layers)


def _curve(curve: Curve) -> Curve:
    return replace(curve, xyb=_TURNED_OVER.polyline(curve.xyb))
