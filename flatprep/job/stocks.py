"""The ``[[stock]]`` tables of a job file."""

from pathlib import Path

import numpy as np

from flatprep.base.keys import keys_of
from flatprep.base.names import one_line
from flatprep.geom.bulge import Floats
from flatprep.geom.polygons import is_simple
from flatprep.job import reference
from flatprep.job.context import Context, money
from flatprep.job.values import Point, Stock
from flatprep.profile.toml_check import Table

KEYS = keys_of(reference.STOCK)
"""Every key of a ``[[stock]]``."""


def read_stock(table: Table, context: Context, *, fewest: int = 1) -> Stock:
    """Check one ``[[stock]]``; `fewest` is the least count that makes sense."""
    table = _titled(table).only(KEYS)
    name = one_line(table.text("name"))
    material = context.material(table, "material")
    if material is None:
        raise table.need("material", '"mild-steel" or another id')
    thickness = context.thickness_mm(table, "thickness", material)
    if thickness is None:
        raise table.need("thickness", '3 or "16ga"')
    length, width, outline = _shape(table, context)
    is_open = length is None and outline is None
    _check_prices(table, is_open=is_open)
    return Stock(
        name=name,
        material=material,
        thickness_mm=thickness,
        length_mm=length,
        width_mm=width,
        outline=outline,
        count=_count(table, fewest),
        price_per_sheet=money(table, "price_per_sheet"),
        price_per_metre=money(table, "price_per_metre"),
        grain=table.choice("grain", ("length", "width")) if table.has("grain") else None,
        measured_thickness_mm=context.length_mm(table, "measured_thickness", above=0.0)
        if table.has("measured_thickness")
        else None,
        where=table.place,
        margins_mm=_margins(table, context) if table.has("margins") else None,
        keep_out=_keep_out(table, context) if table.has("keep_out") else (),
    )


def _titled(table: Table) -> Table:
    called = table.data.get("name")
    title = f"{table.where} ({called})" if isinstance(called, str) and called else table.where
    return Table(table.data, table.file, title, table.error)


Box = tuple[float, float, float, float]
Outline = Path | tuple[Point, ...] | None


def _shape(table: Table, context: Context) -> tuple[float | None, float | None, Outline]:
    """Return length (None where open), width and outline: either both sides or an outline is given."""
    if table.has("outline"):
        for side in ("length", "width"):
            if table.has(side):
                raise table.fail(side, "left out where an outline is given")
        return None, None, _outline(table, context)
    width = context.length_mm(table, "width", above=0.0)
    if table.get("length") == "open":
        return None, width, None
    if isinstance(table.get("length"), str) and not any(c.isdigit() for c in table.text("length")):
        raise table.fail("length", 'a length above 0, or "open": as long as needed')
    return context.length_mm(table, "length", above=0.0), width, None


def _outline(table: Table, context: Context) -> Outline:
    value = table.get("outline")
    if isinstance(value, str):
        return context.reach.file(table, "outline", value)
    if not isinstance(value, list):
        raise table.fail("outline", "a drawing's file, or a list of points such as [[0, 0], [900, 0], [700, 400]]")
    points = context.points_mm(table, "outline")
    points = points[:-1] if len(points) > 1 and points[0] == points[-1] else points
    ring = np.array([(x, y, 0.0) for x, y in points], dtype=np.float64)
    if len(points) < 3 or _on_a_line(ring):
        raise table.fail("outline", "three points or more that enclose an area")
    if not is_simple(ring, chord_mm=0.01):
        raise table.fail("outline", "an outline that does not cross or touch itself")
    return points


def _on_a_line(ring: Floats) -> bool:
    """Tell whether points enclose nothing, whatever their order."""
    off = ring[:, :2] - ring[0, :2]
    far = off[int(np.argmax(np.hypot(*off.T)))]
    return bool(np.abs(off[:, 0] * far[1] - off[:, 1] * far[0]).max() < 1e-6)


def _margins(table: Table, context: Context) -> Box:
    if table.has("outline"):
        raise table.fail("margins", "left out where an outline is given: it has no left, right, bottom and top")
    left, right, bottom, top = _four(
        table, "margins", table.get("margins"), context, "four lengths: left, right, bottom, top"
    )
    if min(left, right, bottom, top) < 0.0:
        raise table.fail("margins", "four lengths of 0 or more: left, right, bottom, top")
    return left, right, bottom, top


def _keep_out(table: Table, context: Context) -> tuple[tuple[float, ...], ...]:
    shape = "a list of boxes [x0, y0, x1, y1] and circles [x, y, radius], such as [[0, 600, 60, 660], [500, 300, 15]]"
    value = table.get("keep_out")
    if not isinstance(value, list) or not all(isinstance(one, list) and len(one) in (3, 4) for one in value):
        raise table.fail("keep_out", shape)
    found = tuple(tuple(_mm(table, "keep_out", v, context) for v in one) for one in value)
    boxes, circles = ([one for one in found if len(one) == size] for size in (4, 3))
    if any(x0 >= x1 or y0 >= y1 for x0, y0, x1, y1 in boxes):
        raise table.fail("keep_out", f"{shape}, with x0 below x1 and y0 below y1")
    if any(radius <= 0.0 for _, _, radius in circles):
        raise table.fail("keep_out", f"{shape}, with a radius above 0")
    return found


def _mm(table: Table, key: str, value: object, context: Context) -> float:
    return table.checked_length_mm(key, value, unit=context.unit)


def _four(table: Table, key: str, value: object, context: Context, shape: str) -> Box:
    if not isinstance(value, list) or len(value) != 4:
        raise table.fail(key, shape)
    a, b, c, d = (_mm(table, key, item, context) for item in value)
    return a, b, c, d


def _count(table: Table, fewest: int) -> int | None:
    if table.get("count") == "any":
        return None
    if isinstance(table.get("count"), str):
        raise table.fail("count", 'a whole number of sheets, or "any"')
    return table.integer("count", 1, least=fewest)


def _check_prices(table: Table, *, is_open: bool) -> None:
    wrong, right = ("price_per_sheet", "price_per_metre") if is_open else ("price_per_metre", "price_per_sheet")
    if table.has(wrong):
        kind = "open length" if is_open else "a sheet of given size"
        raise table.fail(wrong, f"left out: stock of {kind} has a {right}")
