"""The document ``layout.json``: everything that is needed to check or redo a nest, in plain numbers."""

import os
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from pathlib import Path

from flatprep.geom.bulge import Floats
from flatprep.geom.polygons import inner_point
from flatprep.model.drawing import Part
from flatprep.model.layout import Layout, Placement, SheetLayout

SCHEMA = "flatprep-layout/1"
Box = tuple[float, float, float, float]


@dataclass(frozen=True, slots=True)
class PartSource:
    """Where a part of a layout comes from.

    Attributes
    ----------
    part : Part
        As it is cut.
    drawing : Path
        Its file; a changed copy where one was written.
    units : str
        The unit of that file's coordinates.
    quantity : int
        All sets, both hands.
    """

    part: Part
    drawing: Path
    units: str
    quantity: int


@dataclass(frozen=True, slots=True)
class StockSource:
    """What a kind of stock is besides its size.

    Attributes
    ----------
    rack_file : str
        Where it stands in the rack; empty for the job's own.
    grain : str or None
    margins_mm, keep_out
        As in `flatprep.job.values.Stock`.
    """

    rack_file: str = ""
    grain: str | None = None
    margins_mm: Box | None = None
    keep_out: tuple[tuple[float, ...], ...] = ()


@dataclass(frozen=True, slots=True)
class LayoutSource:
    """What a layout was made for, and from.

    Attributes
    ----------
    job : str
        Name and revision.
    rack : Path or None
    bookings : int
        How much had been booked out of the rack before.
    stock : mapping of str to StockSource
        By name.
    """

    job: str = ""
    rack: Path | None = None
    bookings: int = 0
    stock: Mapping[str, StockSource] = field(default_factory=dict)


NOWHERE = LayoutSource()


def sheet_name(number: int) -> str:
    """Name of a sheet's files without suffix, numbered from 1: ``sheet-01``."""
    return f"sheet-{number:02d}"


def layout_document(
    layout: Layout, sources: Sequence[PartSource], folder: Path, origin: LayoutSource = NOWHERE
) -> dict[str, object]:
    """Document of a layout that is written into `folder`; paths in it are relative to that folder."""
    rack = {"rack": relative(origin.rack, folder), "rack_bookings": origin.bookings} if origin.rack else {}
    return {
        "schema": SCHEMA,
        **({"job": origin.job} if origin.job else {}),
        **rack,
        "spacing_mm": layout.spacing_mm,
        "margin_mm": layout.margin_mm,
        "parts": [_part(source, folder) for source in sources],
        "sheets": [
            _sheet(sheet, n, origin.stock.get(sheet.stock, StockSource())) for n, sheet in enumerate(layout.sheets, 1)
        ],
        "unplaced": [{"part": u.part, "count": u.count, "why": u.why} for u in layout.unplaced],
    }


def _part(source: PartSource, folder: Path) -> dict[str, object]:
    part = source.part
    return {
        "name": part.name,
        "drawing": relative(source.drawing, folder),
        "units": source.units,
        "quantity": source.quantity,
        "layers": list(part.layers),
        "at": list(inner_point(part.outer.xyb, [h.xyb for h in part.holes])),
    }


def relative(file: Path, folder: Path) -> str:
    """Path of a file seen from a folder, with forward slashes."""
    return Path(os.path.relpath(file, folder)).as_posix()


def _sheet(sheet: SheetLayout, number: int, stock: StockSource) -> dict[str, object]:
    said = {
        "rack_file": stock.rack_file,
        "grain": stock.grain,
        "margins_mm": stock.margins_mm and list(stock.margins_mm),
        "keep_out": [list(one) for one in stock.keep_out],
    }
    return {
        "file": f"{sheet_name(number)}.dxf",
        "stock": sheet.stock,
        "material": sheet.material,
        "thickness_mm": sheet.thickness_mm,
        **{key: value for key, value in said.items() if value},
        "outline": _points(sheet.outline),
        "holes": [_points(hole) for hole in sheet.holes],
        "used_length_mm": sheet.used_length_mm,
        "utilisation": sheet.utilisation,
        "placements": [_placement(p) for p in sheet.placements],
    }


def _placement(p: Placement) -> dict[str, object]:
    return {
        "part": p.part,
        "copy": p.copy,
        "turn_deg": p.turn_deg,
        "mirrored": p.mirrored,
        "dx": p.dx + 0.0,  # never -0.0
        "dy": p.dy + 0.0,
        **({"first_article": True} if p.first else {}),
    }


def _points(ring: Floats) -> list[list[float]]:
    return [[float(x) + 0.0, float(y) + 0.0] for x, y in ring]
