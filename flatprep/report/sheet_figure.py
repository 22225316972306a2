"""Picture of a sheet for the page: parts are drawn once and placed by reference, so that long jobs stay small."""

from collections.abc import Mapping
from dataclasses import dataclass
from html import escape

from flatprep.geom.bulge import Similarity
from flatprep.model.drawing import Part
from flatprep.model.layout import Placement, SheetLayout
from flatprep.report.bundle import Offcut
from flatprep.report.figures import bare_length, number
from flatprep.report.label_spot import Lying, spot_on_piece
from flatprep.report.part_figure import Box, scale_bar
from flatprep.report.svg_path import joined, part_path, ring_data
from flatprep.report.svg_tag import picture, tag, text


@dataclass(frozen=True, slots=True)
class Shape:
    """A part that is drawn once: its id in the page, its number, itself."""

    id: str
    number: int
    part: Part


def shape_defs(shapes: Mapping[str, Shape]) -> str:
    """Every part once with its engraving, as ``<g id>``, to be placed by `sheet_figure`."""
    groups = (tag("g", _shape(shape.part), id=shape.id) for shape in shapes.values())
    return tag("svg", tag("defs", "".join(groups)), class_="shapes", aria_hidden="true", width="0", height="0")


def _shape(part: Part) -> str:
    marks = joined((curve.xyb for curve in part.marks), decimals=2)
    drawn = tag("path", fill_rule="evenodd", d=part_path(part, decimals=2))
    return drawn + (tag("path", class_="engraved", d=marks) if marks else "")


def sheet_figure(
    sheet: SheetLayout, shapes: Mapping[str, Shape], *, offcut: Offcut | None = None, units: str = "mm", label: str = ""
) -> str:
    """SVG element of a sheet with its parts; needs `shape_defs` in the same page.

    Parameters
    ----------
    shapes
        By part name; a placement of any other part is left out.
    offcut
        Drawn dashed, with its size.
    units
        Of the scale bar and the offcut's size.
    label
        What a screen reader says.
    """
    x0, y0, x1, y1 = sheet_box(sheet)
    unit = max(x1 - x0, y1 - y0) / 96
    border = ring_data(sheet.outline) + "".join(ring_data(hole) for hole in sheet.holes)
    body = [
        tag("path", class_="sheet", fill_rule="evenodd", d=border),
        *([_offcut(offcut, unit, units)] if offcut else []),
        *(_placed(p, shapes[p.part], unit) for p in sheet.placements if p.part in shapes),
        scale_bar(x0, -y0 + 3 * unit, 0.7 * unit, units),
    ]
    view = (x0 - 2 * unit, -y1 - 2 * unit, x1 - x0 + 4 * unit, y1 - y0 + 8 * unit)
    return picture("".join(body), view, css="sheet-figure", label=label)


def sheet_box(sheet: SheetLayout) -> Box:
    """Least box of a sheet's border, mm."""
    (x0, y0), (x1, y1) = sheet.outline.min(axis=0), sheet.outline.max(axis=0)
    return float(x0), float(y0), float(x1), float(y1)


def svg_matrix(motion: Similarity) -> str:
    """Return the motion for pictures whose y runs down: both its sides are turned over."""
    (a, b), (c, d) = motion.matrix()
    return f"matrix({' '.join(number(v, 6) for v in (a, -c, -b, d, motion.dx, -motion.dy))})"


def _placed(placement: Placement, shape: Shape, unit: float) -> str:
    words = f"{placement.part}, piece {placement.copy}" + (", turned over" if placement.mirrored else "")
    pieces = (
        tag("title", escape(words)),
        tag("use", href=f"#{shape.id}", transform=svg_matrix(placement.motion)),
        _label(placement, shape, unit),
    )
    return tag("g", "".join(pieces), class_="placed", data_part=placement.part)


def _label(placement: Placement, shape: Shape, unit: float) -> str:
    """Return the part's name, or its number, on the piece's material, or nothing: what fits in readable size."""
    lying = Lying(shape.part, placement.turn_deg, placement.mirrored)
    for words in (placement.part, str(shape.number)):
        spot = spot_on_piece(lying, len(words), 1.5 * unit)
        if spot and spot.size >= 0.6 * unit:
            return text(words, placement.dx + spot.x, spot.size / 3 - spot.y - placement.dy, spot.size)
    return ""


def _offcut(offcut: Offcut, unit: float, units: str) -> str:
    """Dashed, hatched rectangle with its size in the middle."""
    w, h = offcut.x1 - offcut.x0, offcut.y1 - offcut.y0
    words = f"{bare_length(w, units)} × {bare_length(h, units)} {units} left"
    size = min(1.6 * unit, w / (0.6 * len(words)), h / 2)
    pieces = (
        tag("rect", x=offcut.x0, y=-offcut.y1, width=w, height=h),
        tag("path", class_="hatch", d=hatch(offcut, 2.5 * unit)),
        text(words, (offcut.x0 + offcut.x1) / 2, size / 3 - (offcut.y0 + offcut.y1) / 2, size),
    )
    return tag("g", "".join(pieces), class_="offcut")


def hatch(offcut: Offcut, step: float) -> str:
    """Path of lines at 45 degrees across a rectangle, `step` apart along its sides."""
    first = offcut.x0 - offcut.y1
    count = int((offcut.x1 - offcut.y0 - first) / step)
    lines = []
    for k in range(1, count + 1):
        shift = first + k * step  # x - y of the line
        x0, x1 = max(offcut.x0, offcut.y0 + shift), min(offcut.x1, offcut.y1 + shift)
        ends = ((x0, shift - x0), (x1, shift - x1))  # y turned over
        lines.append("M" + "L".join(f"{number(x, 2)} {number(y, 2)}" for x, y in ends))
    return "".join(lines)
