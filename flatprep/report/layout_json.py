"""The document ``layout.json``: everything that is needed to check or redo a nest, in plain numbers."""

import os
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path

from flatprep.geom.bulge import Floats
from flatprep.geom.polygons import inner_point
from flatprep.model.drawing import Part
from flatprep.model.layout import Layout, Placement, SheetLayout

SCHEMA = "flatprep-layout/1"


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
class RackSource:
    """The rack that sheets of a layout come from.

    Attributes
    ----------
    folder : Path
    files : mapping of str to str
        Where stock stands in the rack, by its name; without that of the job itself.
    """

    folder: Path
    files: Mapping[str, str]


def sheet_name(number: int) -> str:
    """Name of a sheet's files without suffix, numbered from 1: ``sheet-01``."""
    return f"sheet-{number:02d}"


def layout_document(
    layout: Layout, sources: Sequence[PartSource], folder: Path, rack: RackSource | None = None
) -> dict[str, object]:
    """Document of a layout that is written into `folder`; paths in it are relative to that folder."""
    return {
        "schema": SCHEMA,
        **({"rack": relative(rack.folder, folder)} if rack else {}),
        "spacing_mm": layout.spacing_mm,
        "margin_mm": layout.margin_mm,
        "parts": [_part(source, folder) for source in sources],
        "sheets": [_sheet(sheet, n, rack) for n, sheet in enumerate(layout.sheets, start=1)],
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


def _sheet(sheet: SheetLayout, number: int, rack: RackSource | None) -> dict[str, object]:
    taken_from = rack.files.get(sheet.stock) if rack else None
    return {
        "file": f"{sheet_name(number)}.dxf",
        "stock": sheet.stock,
        **({"rack_file": taken_from} if taken_from else {}),
        "material": sheet.material,
        "thickness_mm": sheet.thickness_mm,
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
    }


def _points(ring: Floats) -> list[list[float]]:
    return [[float(x) + 0.0, float(y) + 0.0] for x, y in ring]
