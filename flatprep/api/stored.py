"""A layout read back from its layout.json, and the parts that it names."""

import hashlib
import json
import os
from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np
from shapely.geometry import Point

from flatprep.base.errors import DrawingError, UsageError
from flatprep.drawing.read import ReadOptions, read
from flatprep.geom.polygons import polygon, valid_polygon
from flatprep.model.drawing import Drawing, Part, Role
from flatprep.model.layout import Layout, Placement, SheetLayout, Unplaced
from flatprep.report.layout_json import Box, StockSource

SCHEMA = "flatprep-layout/1"
_CHORD_MM = 0.01
_DIGITS = 12
"""So many digits of a layout's digest are kept."""


@dataclass(frozen=True, slots=True)
class StoredPart:
    """A part as the document names it; `drawing` is seen from the working folder."""

    name: str
    drawing: Path
    units: str
    quantity: int
    layers: tuple[str, ...]
    at: tuple[float, float]


@dataclass(frozen=True, slots=True)
class Stored:
    """A whole layout.json.

    Attributes
    ----------
    sheets : tuple of StockSource
        What else is known of the stock of each sheet.
    rack : Path or None
        Where the document says that stock comes from.
    digest : str
        The same for the same pieces on the same stock, wherever they lie on it.
    """

    path: Path
    layout: Layout
    parts: tuple[StoredPart, ...]
    sheets: tuple[StockSource, ...]
    job: str
    rack: Path | None
    digest: str


def stored_layout(path: Path) -> Layout:
    """Read the layout alone.

    Raises
    ------
    UsageError
        When the file is missing, no JSON, or not of this schema.
    """
    data = _data(path)
    with _told(path):
        return _layout(data)


def stored(path: Path) -> Stored:
    """Read a layout.json.

    Raises
    ------
    UsageError
        When it is missing, no JSON, or not of this schema.
    """
    data = _data(path)
    with _told(path):
        return Stored(
            path=path,
            layout=_layout(data),
            parts=tuple(_part(p, path.parent) for p in data["parts"]),
            sheets=tuple(_source(s) for s in data["sheets"]),
            job=str(data.get("job", "")),
            rack=Path(os.path.normpath(path.parent / str(data["rack"]))) if "rack" in data else None,
            digest=_digest(data),
        )


@contextmanager
def _told(path: Path) -> Iterator[None]:
    try:
        yield
    except (AttributeError, KeyError, TypeError, ValueError, IndexError) as err:
        what = type(err).__name__.removesuffix("Error").lower()
        raise UsageError(f"{path}: {what} error at {err}", "nest anew") from err


def _data(path: Path) -> Any:
    try:
        data: Any = json.loads(path.read_text())
    except OSError as err:
        raise UsageError(f"{path}: {err.strerror or err}", "give the layout.json that nest has written") from err
    except ValueError as err:
        raise UsageError(f"{path}: no JSON ({err})", "give the layout.json that nest has written") from err
    if not isinstance(data, dict) or data.get("schema") != SCHEMA:
        raise UsageError(f"{path}: not a layout of schema {SCHEMA}", "give the layout.json that nest has written")
    return data


def _layout(data: Any) -> Layout:
    return Layout(
        float(data["spacing_mm"]),
        float(data["margin_mm"]),
        tuple(_sheet(s) for s in data["sheets"]),
        tuple(Unplaced(str(u["part"]), int(u["count"]), str(u["why"])) for u in data["unplaced"]),
    )


def _sheet(data: Any) -> SheetLayout:
    return SheetLayout(
        stock=str(data["stock"]),
        material=str(data["material"]),
        thickness_mm=float(data["thickness_mm"]),
        outline=np.array(data["outline"], dtype=np.float64).reshape(-1, 2),
        holes=tuple(np.array(h, dtype=np.float64).reshape(-1, 2) for h in data["holes"]),
        used_length_mm=float(data["used_length_mm"]),
        utilisation=float(data["utilisation"]),
        placements=tuple(
            Placement(
                str(p["part"]),
                int(p["copy"]),
                float(p["turn_deg"]),
                bool(p["mirrored"]),
                float(p["dx"]),
                float(p["dy"]),
                bool(p.get("first_article", False)),
            )
            for p in data["placements"]
        ),
    )


def _part(data: Any, folder: Path) -> StoredPart:
    x, y = data["at"]
    return StoredPart(
        name=str(data["name"]),
        drawing=folder / str(data["drawing"]),
        units=str(data["units"]),
        quantity=int(data["quantity"]),
        layers=tuple(str(layer) for layer in data["layers"]),
        at=(float(x), float(y)),
    )


def _source(data: Any) -> StockSource:
    margins = data.get("margins_mm")
    return StockSource(
        rack_file=str(data.get("rack_file", "")),
        grain=data.get("grain"),
        margins_mm=_four(margins) if margins else None,
        keep_out=tuple(tuple(float(v) for v in one) for one in data.get("keep_out", ())),
    )


def _four(values: Any) -> Box:
    a, b, c, d = (float(v) for v in values)
    return a, b, c, d


def _digest(data: Any) -> str:
    """Digest of what a layout takes and makes; places are left out, for a piece may be moved by hand."""
    said = [data.get("job"), data.get("rack_bookings"), [[p["name"], p["quantity"]] for p in data["parts"]]]
    said += [
        [s["stock"], s.get("rack_file"), sorted([p["part"], p["copy"]] for p in s["placements"])]
        for s in data["sheets"]
    ]
    return hashlib.sha256(json.dumps(said).encode()).hexdigest()[:_DIGITS]


def stored_parts(found: Stored) -> Mapping[str, Part]:
    """Read the drawings of a layout's parts anew.

    Raises
    ------
    DrawingError
        When one cannot be read, or holds no part where the layout has one.
    """
    return {part.name: _read_part(part) for part in found.parts}


def _read_part(part: StoredPart) -> Part:
    for one in _only_layers(part).parts:
        shape = valid_polygon(polygon(one.outer.xyb, [h.xyb for h in one.holes], chord_mm=_CHORD_MM))
        if shape.contains(Point(part.at)):
            return one
    x, y = part.at
    raise DrawingError(
        f"{part.drawing}: no part at ({x:.2f}, {y:.2f}), where the layout has {part.name!r}",
        "the drawing was changed after the layout was made: put back the one that was cut",
    )


def _only_layers(part: StoredPart) -> Drawing:
    """Read a drawing with those layers cut that the layout names, and no others."""
    roles = dict.fromkeys(part.layers, Role.CUT)
    drawing = read(part.drawing, ReadOptions(part.units, roles), name=part.name)
    others = [layer for layer, role, _ in drawing.roles if role is Role.CUT and layer not in roles]
    if others:
        roles |= dict.fromkeys(others, Role.IGNORE)
        drawing = read(part.drawing, ReadOptions(part.units, roles), name=part.name)
    return drawing
