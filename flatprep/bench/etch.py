"""A part's label as lines to be etched: in its material, clear of edges, holes, bends and bench work."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np
import shapely
from shapely.geometry import LineString, MultiPolygon, Point, Polygon
from shapely.geometry.base import BaseGeometry

from flatprep.bench.part import BenchPart
from flatprep.drawing.strokes import spelled, strokes, width_over_height
from flatprep.geom.bulge import Floats, Similarity, points_along
from flatprep.geom.polygons import polygon, valid_polygon
from flatprep.measure.bends import bend_lines
from flatprep.measure.box_room import box_room
from flatprep.model.drawing import Curve, Part
from flatprep.model.work import Step
from flatprep.practice.bends import MOST_DEG, tangent_mm

CHORD_MM = 0.02
SLACK_MM = 1e-6
OVER = Similarity(mirrored=True)
"""Turned over: what is read on a piece that is laid mirrored."""


@dataclass(frozen=True, slots=True)
class EtchAsk:
    """How labels are etched, mm.

    Attributes
    ----------
    least_mm, most_mm : float
        Height of the letters.
    clear_mm : float
        Distance that they keep from everything.
    """

    least_mm: float = 3.0
    most_mm: float = 10.0
    clear_mm: float = 2.0


@dataclass(frozen=True, slots=True)
class Etching:
    """A label on a part as drawn and on one turned over, or why there is none.

    Attributes
    ----------
    drawn, over : tuple of Curve
        Lines in the drawing's coordinates; `over` is read once the piece is mirrored.
    why : str
        Why it is left out; empty where it is not.
    """

    drawn: tuple[Curve, ...] = ()
    over: tuple[Curve, ...] = ()
    why: str = ""


def etching(bench: BenchPart, part: Part, steps: Sequence[Step], text: str, ask: EtchAsk) -> Etching:
    """Return the label of a part.

    Parameters
    ----------
    bench, steps
        What is done to the part after it is cut.
    part
        Its shape as it is cut.
    text
        The label.
    """
    words = spelled(text)
    if words is None:
        return Etching(why="its label has signs that the alphabet lacks (it has A to Z, 0 to 9 and - . _ / + #)")
    if bench.good_face == "A":
        return Etching(why="its good face lies up when it is cut")
    free = _free(bench, part, steps, ask.clear_mm)
    drawn, over = (_lines(shape, words, ask) for shape in (free, _turned_over(free)))
    if not drawn:
        return Etching(why=f"no room for letters of {ask.least_mm:g} mm clear of edges, holes, bends and bench work")
    return Etching(tuple(map(_curve, drawn)), tuple(_curve(OVER.points(line)) for line in over))


def etch_faults(bench: BenchPart, part: Part, steps: Sequence[Step], lines: Sequence[Curve], clear_mm: float) -> str:
    """Return what is wrong with a label, apart from how it was placed; empty where nothing is."""
    drawn = shapely.MultiLineString([line.xyb[:, :2] for line in lines])
    whole = valid_polygon(polygon(part.outer.xyb, [h.xyb for h in part.holes], chord_mm=CHORD_MM / 4.0))
    if not whole.contains(drawn):
        return "it leaves the material"
    near = [("an edge", whole.boundary), *(("a bend", b) for b in _bends(bench, part)), *_taken(part, steps)]
    for what, shape in near:
        gap = float(shape.distance(drawn))
        if gap < clear_mm - CHORD_MM:
            return f"it is {gap:.2f} mm from {what}"
    return ""


def _free(bench: BenchPart, part: Part, steps: Sequence[Step], clear_mm: float) -> Polygon | MultiPolygon:
    """Return where the lines of a label may lie."""
    material = valid_polygon(polygon(part.outer.xyb, [h.xyb for h in part.holes], chord_mm=CHORD_MM))
    away = [*_bends(bench, part), *(shape for _, shape in _taken(part, steps))]
    return material.buffer(-clear_mm - CHORD_MM).difference(shapely.union_all([s.buffer(clear_mm) for s in away]))


def _bends(bench: BenchPart, part: Part) -> Iterator[BaseGeometry]:
    """Yield the strips that are formed in bending."""
    thickness = bench.thickness_mm or 0.0
    for line in bend_lines(part, bench.bends):
        radius = line.radius_mm or thickness
        half = tangent_mm(radius, thickness, min(line.angle_deg, MOST_DEG), bench.own) if thickness else 0.0
        yield LineString([line.start, line.end]).buffer(half)


def _taken(part: Part, steps: Sequence[Step]) -> Iterator[tuple[str, BaseGeometry]]:
    """Yield what a tool takes off or covers at the bench, and what is marked already."""
    for step in steps:
        for at in step.at:
            yield f"where {step.kind} {step.size}".rstrip(), Point(at).buffer((step.tool_dia_mm or 0.0) / 2.0)
    for mark in part.marks:
        yield "a mark", LineString(points_along(mark.xyb, closed=mark.closed, chord_mm=CHORD_MM))


def _lines(free: Polygon | MultiPolygon, words: str, ask: EtchAsk) -> tuple[Floats, ...]:
    """Return the lines of the label in a region; none where it has no room."""
    room = box_room(free, width_over_height(words), (ask.least_mm, ask.most_mm), _turns(free))
    if room is None:
        return ()
    height = room.height_mm
    half = np.array([width_over_height(words) * height / 2.0, height / 2.0])
    place = Similarity(turn_deg=room.turn_deg, dx=room.middle[0], dy=room.middle[1])
    return tuple(place.points(line - half) for line in strokes(words, height))


def _turns(free: Polygon | MultiPolygon) -> tuple[float, ...]:
    """Return the turns worth trying: along x, along y, along the region's least box and across it."""
    if free.is_empty:
        return ()
    corners = np.asarray(shapely.oriented_envelope(free).exterior.coords)
    along = float(np.degrees(np.arctan2(*(corners[1] - corners[0])[::-1]))) % 90.0
    return (0.0, 90.0) if min(along, 90.0 - along) < 0.5 else (0.0, 90.0, along, along - 90.0)


def _turned_over(shape: Polygon | MultiPolygon) -> Polygon | MultiPolygon:
    return shapely.transform(shape, OVER.points)


def _curve(line: Floats) -> Curve:
    return Curve(np.column_stack([line, np.zeros(len(line))]), closed=False)
