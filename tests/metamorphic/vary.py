"""One drawing written in other ways: what is in it stays the same part."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, field
from math import cos, hypot, pi, sin
from pathlib import Path
from random import Random
from typing import Any

import ezdxf
from ezdxf import recover
from ezdxf.addons.importer import Importer
from ezdxf.math import Matrix44

MM_PER_UNIT = {"mm": 1.0, "cm": 10.0, "in": 25.4}
UNIT_CODE = {"mm": 4, "cm": 5, "in": 1}
Dxf = Any


@dataclass(frozen=True)
class Variant:
    """How a drawing is to be written again.

    `turn_deg` anticlockwise, after mirroring in x; `move` in mm, after turning.
    """

    turn_deg: float = 0.0
    mirrored: bool = False
    move: tuple[float, float] = (0.0, 0.0)
    unit: str = "mm"
    shuffle: bool = False
    reverse: bool = False
    explode: bool = False
    circles: str = "as-drawn"
    """``as-drawn``, ``arcs``, ``bulges`` or ``ellipses``."""
    nesting: int = 0
    """So many blocks inside each other, each turned and moved, hold everything."""
    seed: int = 0
    words: tuple[str, ...] = field(default=(), compare=False)


def random_variant(rng: Random) -> Variant:
    """A variant with every knob turned at random."""
    return Variant(
        turn_deg=rng.choice([0.0, 90.0, 180.0, 270.0, rng.uniform(0, 360), rng.uniform(0, 360)]),
        mirrored=rng.random() < 0.5,
        move=rng.choice([(0.0, 0.0), (rng.uniform(-3000, 3000), rng.uniform(-3000, 3000))]),
        unit=rng.choice(["mm", "mm", "cm", "in"]),
        shuffle=rng.random() < 0.7,
        reverse=rng.random() < 0.7,
        explode=rng.random() < 0.5,
        circles=rng.choice(["as-drawn", "arcs", "bulges", "ellipses"]),
        nesting=rng.choice([0, 0, 1, 2, 3]),
        seed=rng.randrange(10**6),
    )


def load(path: Path) -> Dxf:
    """Open a drawing as the reader does: strictly, else with repair."""
    try:
        return ezdxf.readfile(path)
    except Exception:
        return recover.readfile(path)[0]


def varied(path: Path, unit: str, how: Variant, out: Path) -> Path:
    """Write the drawing `path`, drawn in `unit`, another way to `out`."""
    source = load(path)
    doc = ezdxf.new("R2013")
    importer = Importer(source, doc)
    importer.import_modelspace()
    importer.finalize()
    for layer in source.layers:
        if layer.dxf.name in doc.layers:
            ours = doc.layers.get(layer.dxf.name)
            ours.dxf.color, ours.dxf.flags = layer.dxf.color, layer.dxf.flags
    rng = Random(how.seed)
    space = doc.modelspace()
    scale = MM_PER_UNIT.get(unit, 1.0) / MM_PER_UNIT[how.unit]
    back = _matrix(how, scale, 1.0 / MM_PER_UNIT[how.unit])
    if how.explode:
        _explode(space)
    _redraw_circles(space, how.circles, rng)
    for entity in list(space):
        entity.transform(back)
    if how.reverse:
        for entity in space:
            if rng.random() < 0.5:
                _reverse(entity)
    if how.shuffle:
        _shuffle(space, rng)
    for level in range(how.nesting):
        _wrap(doc, space, level, rng)
    doc.header["$INSUNITS"] = UNIT_CODE[how.unit]
    doc.saveas(out)
    return out


def _matrix(how: Variant, scale: float, mm: float) -> Matrix44:
    flip = Matrix44.scale(-1, 1, 1) if how.mirrored else Matrix44()
    turn = Matrix44.z_rotate(how.turn_deg * pi / 180)
    move = Matrix44.translate(how.move[0] * mm, how.move[1] * mm, 0)
    return Matrix44.chain(Matrix44.scale(scale, scale, scale), flip, turn, move)


def _explode(space: Dxf) -> None:
    for line in list(space.query("LWPOLYLINE POLYLINE")):
        if line.dxftype() == "LWPOLYLINE" or (line.is_2d_polyline and not line.dxf.flags & 6):
            line.explode()


def _redraw_circles(space: Dxf, how: str, rng: Random) -> None:
    if how == "as-drawn":
        return
    for circle in list(space.query("CIRCLE")):
        c, r, at = circle.ocs().to_wcs(circle.dxf.center), circle.dxf.radius, _attributes(circle)
        if tuple(round(v, 6) for v in circle.dxf.extrusion) != (0, 0, 1):
            continue
        if how == "arcs":
            a = rng.uniform(0, 360)
            space.add_arc(c, r, a, a + 120, dxfattribs=at)
            space.add_arc(c, r, a + 120, a + 360, dxfattribs=at)
        elif how == "bulges":
            a = rng.uniform(0, 2 * pi)
            p, q = ((c.x + s * r * cos(a), c.y + s * r * sin(a), 1.0) for s in (1, -1))
            line = space.add_lwpolyline([p, q], format="xyb", close=True, dxfattribs=at)
            line.dxf.elevation = c.z
        else:
            space.add_ellipse(c, (r, 0), 1.0, dxfattribs=at)
        space.delete_entity(circle)


def _attributes(entity: Dxf) -> dict[str, object]:
    return {k: entity.dxf.get(k) for k in ("layer", "linetype", "color") if entity.dxf.hasattr(k)}


def _reverse(entity: Dxf) -> None:
    kind = entity.dxftype()
    if kind == "LINE":
        entity.dxf.start, entity.dxf.end = entity.dxf.end, entity.dxf.start
    elif kind == "LWPOLYLINE" and len(entity) > 1:
        points = entity.get_points("xyb")
        bulges = [-b for _, _, b in points]
        # the bulge belongs to the segment that leaves a vertex
        turned = [(x, y, bulges[k - 1]) for k, (x, y, _) in enumerate(points)][::-1]
        entity.set_points(turned, format="xyb")
    elif kind == "SPLINE" and not entity.closed and len(entity.control_points):
        top = entity.knots[-1] + entity.knots[0]
        entity.knots = [top - k for k in reversed(entity.knots)]
        entity.control_points = list(reversed(entity.control_points))
        entity.weights = list(reversed(entity.weights))


def _shuffle(space: Dxf, rng: Random) -> None:
    entities = list(space)
    for entity in entities:
        space.unlink_entity(entity)
    rng.shuffle(entities)
    for entity in entities:
        space.add_entity(entity)


def _wrap(doc: Dxf, space: Dxf, level: int, rng: Random) -> None:
    """Put everything into a block that is inserted turned, moved and enlarged, so that it stays where it was."""
    turn, x, y, k = rng.uniform(0, 360), rng.uniform(-500, 500), rng.uniform(-500, 500), rng.choice([1.0, 0.5, 2.0])
    there = Matrix44.chain(Matrix44.scale(k, k, k), Matrix44.z_rotate(turn * pi / 180), Matrix44.translate(x, y, 0))
    there.inverse()
    block = doc.blocks.new(f"WRAP_{level}")
    for entity in list(space):
        space.unlink_entity(entity)
        entity.transform(there)
        block.add_entity(entity)
    scale = {"xscale": k, "yscale": k, "zscale": k, "rotation": turn}
    space.add_blockref(block.name, (x, y), dxfattribs=scale)


def mapped(at: Sequence[float], how: Variant) -> tuple[float, float]:
    """Where a place of the drawing (mm) lies in the variant (mm)."""
    x, y = (-at[0], at[1]) if how.mirrored else (at[0], at[1])
    c, s = cos(how.turn_deg * pi / 180), sin(how.turn_deg * pi / 180)
    return c * x - s * y + how.move[0], s * x + c * y + how.move[1]


def near(a: Sequence[float], b: Sequence[float], reach_mm: float) -> bool:
    """Whether two places are the same within a reach."""
    return hypot(a[0] - b[0], a[1] - b[1]) <= reach_mm


Check = Callable[[Path, Variant], list[str]]
