"""Picture of a sheet, true to scale: ``sheet-NN.svg`` to print beside the machine."""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from functools import lru_cache

import numpy as np
import shapely
import svgwrite
from shapely.geometry import MultiPolygon, Polygon

from flatprep.drawing.order import cutting_order
from flatprep.drawing.words import Etched, identity_lines
from flatprep.geom.bulge import Floats
from flatprep.model.drawing import Curve, Part
from flatprep.model.layout import Placement, SheetLayout
from flatprep.model.tab import Tab, tab_stroke
from flatprep.report.figures import bare_length, counted, length, percent, size
from flatprep.report.label_spot import WIDE, Lying, Spot, spot_anywhere, spot_on_piece
from flatprep.report.svg_path import joined, part_path, ring_data

OKABE_ITO = ("#E69F00", "#56B4E9", "#009E73", "#F0E442", "#0072B2", "#D55E00", "#CC79A7")
"""Colours that colour-blind readers tell apart (Okabe and Ito 2008); every part is named as well."""
Rectangle = tuple[float, float, float, float]
INK, PALE = "#333333", "#FFFFFF"
LINE = 1.3
"""Distance of lines of text, in units of the picture's em."""
READABLE, LEAST_NAME = 0.5, 0.3
"""Height of a name that is read well, and the least one, in the picture's em."""


@dataclass(frozen=True, slots=True)
class Extras:
    """What else a picture may tell.

    Attributes
    ----------
    units : str
        Of the figures written.
    offcut : (x0, y0, x1, y1) or None
        Largest usable rectangle that is left, sheet coordinates, mm: hatched.
    tabs : mapping of str to Tab
        Holding tabs by part: strokes across the outline.
    identity : mapping of str to str
        By part, which revision and content of its drawing is cut: in a list under the sheet.
    etched : mapping
        Lines etched on a part, by its name and whether it lies mirrored.
    margins_mm, keep_out
        Of the sheet's stock, as in `flatprep.job.values.Stock`.
    """

    units: str = "mm"
    offcut: Rectangle | None = None
    tabs: Mapping[str, Sequence[Tab]] = field(default_factory=dict)
    identity: Mapping[str, str] = field(default_factory=dict)
    etched: Etched = field(default_factory=dict)
    margins_mm: Rectangle | None = None
    keep_out: Sequence[tuple[float, ...]] = ()


PLAIN = Extras()


def sheet_svg(
    sheet: SheetLayout,
    number: int,
    parts: Mapping[str, Part],
    *,
    margin_mm: float,
    job: str = "",
    extras: Extras = PLAIN,
) -> str:
    """SVG document of a sheet with its parts, names, order of cutting, used length, sheet data and a scale bar.

    Parameters
    ----------
    sheet
    number
        From 1.
    parts
        True shapes by the names that the placements use.
    margin_mm
        Drawn as a dashed line where the border is a rectangle.
    job
        Name of the job, for the heading.
    extras
        Unit of the figures written, and the offcut.
    """
    units, offcut = extras.units, extras.offcut
    x0, y0 = sheet.outline.min(axis=0)
    x1, y1 = sheet.outline.max(axis=0)
    em = float(max(x1 - x0, y1 - y0)) / 70.0
    lines = list(identity_lines(sheet, extras.identity))
    left, top, width = x0 - 3 * em, -y1 - 4 * em, x1 - x0 + 6 * em
    height = y1 - y0 + (10 + LINE * (len(lines) + bool(lines))) * em
    page = svgwrite.Drawing(size=(f"{width:.3f}mm", f"{height:.3f}mm"), debug=False)
    page.viewbox(round(float(left), 3), round(float(top), 3), round(float(width), 3), round(float(height), 3))
    page.set_desc(title=f"{job} sheet {number}".strip())
    ground = {"fill": PALE, "class_": "ground"}  # dark ink is lost on a dark page
    page.add(
        page.rect(
            (round(float(left), 3), round(float(top), 3)), (round(float(width), 3), round(float(height), 3)), **ground
        )
    )
    _stock(page, sheet, _room(sheet, margin_mm, extras.margins_mm), em)
    _keep_out(page, extras.keep_out, em)
    colour = {name: OKABE_ITO[k % len(OKABE_ITO)] for k, name in enumerate(sorted(_names(sheet)))}
    if offcut is not None:
        _offcut(page, offcut, em, units)
    for placement in sheet.placements:
        strokes = [tab_stroke(tab).xyb for tab in extras.tabs.get(placement.part, ())]
        etched = [line.xyb for line in extras.etched.get((placement.part, placement.mirrored), ())]
        _piece(page, parts[placement.part], placement, Look(colour[placement.part], em, strokes, etched))
    for turn, index in enumerate(cutting_order(sheet, parts), start=1):
        placement = sheet.placements[index]
        _name(page, parts[placement.part], placement, turn, em)
    _used_length(page, sheet, em, units)
    _heading(page, sheet, number, job, em, units)
    _scale_bar(page, (float(x0), float(-y0 + 5.2 * em)), float(x1 - x0), em, units)
    for n, line in enumerate(lines):
        _text(page, line, (float(x0), float(-y0) + (7.5 + LINE * n) * em), 0.8 * em)
    return str(page.tostring())


def _names(sheet: SheetLayout) -> set[str]:
    return {p.part for p in sheet.placements}


def _room(sheet: SheetLayout, margin_mm: float, margins_mm: Rectangle | None) -> Polygon | MultiPolygon:
    """Return what the margins leave of a sheet; empty where there are none."""
    whole = Polygon(sheet.outline, list(sheet.holes))
    if margins_mm is not None:
        (x0, y0, x1, y1), (left, right, bottom, top) = whole.bounds, margins_mm
        return shapely.box(x0 + left, y0 + bottom, x1 - right, y1 - top)
    return whole.buffer(-margin_mm, join_style="mitre") if margin_mm > 0.0 else Polygon()


def _stock(page: svgwrite.Drawing, sheet: SheetLayout, room: Polygon | MultiPolygon, em: float) -> None:
    border = "".join(ring_data(r) for r in (sheet.outline, *sheet.holes))
    page.add(page.path(d=border, fill="#EEEEEE", fill_rule="evenodd", stroke=INK, stroke_width=em / 8, class_="sheet"))
    for piece in getattr(room, "geoms", [room]):
        if not piece.is_empty:
            dash = f"{em / 2:.3f} {em / 2:.3f}"
            line = ring_data(np.asarray(piece.exterior.coords)[:-1])
            page.add(page.path(d=line, fill="none", stroke="#888888", stroke_width=em / 16, stroke_dasharray=dash))


def _keep_out(page: svgwrite.Drawing, keep_out: Sequence[tuple[float, ...]], em: float) -> None:
    """Draw clamps and screws, crossed out."""
    look = {"fill": "#BBBBBB", "stroke": INK, "stroke_width": round(em / 16, 3), "class_": "keep-out"}
    for one in keep_out:
        if len(one) == 3:
            x, y, r = one
            page.add(page.circle((x, -y), r, **look))
            x0, y0, x1, y1 = x - 0.7 * r, y - 0.7 * r, x + 0.7 * r, y + 0.7 * r
        else:
            x0, y0, x1, y1 = one
            page.add(page.rect((x0, -y1), (x1 - x0, y1 - y0), **look))
        cross = f"M{x0:.3f} {-y0:.3f}L{x1:.3f} {-y1:.3f}M{x0:.3f} {-y1:.3f}L{x1:.3f} {-y0:.3f}"
        page.add(page.path(d=cross, fill="none", stroke=INK, stroke_width=round(em / 16, 3)))


@dataclass(frozen=True, slots=True)
class Look:
    """How a piece is drawn: its colour, the picture's unit of length, strokes across it, lines etched on it."""

    colour: str
    em: float
    strokes: Sequence[Floats]
    etched: Sequence[Floats] = ()


def _piece(page: svgwrite.Drawing, part: Part, placement: Placement, look: Look) -> None:
    """One part at its place: outline, marks, tabs. Coordinates are the drawing's own, moved by one matrix."""
    em = look.em
    (a, c), (b, d) = placement.motion.matrix()
    group = page.g(class_="placed", transform=_matrix(a, -b, -c, d, placement.dx, -placement.dy))
    group.set_desc(title=f"{placement.part} {placement.copy}")
    thin = {"stroke": INK, "stroke_width": round(em / 14, 3)}
    group.add(page.path(d=part_path(part), fill=look.colour, fill_opacity=0.55, fill_rule="evenodd", **thin))
    if part.marks:
        group.add(
            page.path(d=joined([_shut(m) for m in part.marks]), fill="none", stroke_dasharray=f"{em / 4:.3f}", **thin)
        )
    if look.etched:
        fine = round(em / 30, 3)
        group.add(page.path(d=joined(look.etched), fill="none", stroke=INK, stroke_width=fine, class_="etched"))
    if look.strokes:
        group.add(page.path(d=joined(look.strokes), stroke=INK, stroke_width=round(em / 5, 3), class_="tabs"))
    page.add(group)


def _name(page: svgwrite.Drawing, part: Part, placement: Placement, turn: int, em: float) -> None:
    """Turn of cutting and name on a piece, level or upright, where it is larger; across its holes where it must."""
    words = f"{turn}: {placement.part} {placement.copy}"
    lying = Lying(part, placement.turn_deg, placement.mirrored)
    along = _spot(lying, len(words), em)
    up = _spot(lying._replace(upright=True), len(words), em) if along.size < em else along
    spot = along if along.size >= up.size else Spot(up.y, up.x, up.size)
    x, y = placement.dx + spot.x, placement.dy + spot.y
    onto = page if along.size >= up.size else page.g(transform=f"rotate(-90 {x:.3f} {-y:.3f})")
    _text(onto, words, (x, -y + spot.size / 3), spot.size, anchor="middle")
    if onto is not page:
        page.add(onto)


@lru_cache(maxsize=4096)
def _spot(lying: Lying, letters: int, em: float) -> Spot:
    """Return a spot on the material where letters can be read there, else across holes."""
    spot = spot_on_piece(lying, letters, em)
    if spot is None or spot.size < READABLE * em:
        spot = spot_anywhere(Polygon(lying.region.exterior), letters, em)
    return replace(spot, size=max(LEAST_NAME * em, spot.size))


def _offcut(page: svgwrite.Drawing, offcut: Rectangle, em: float, units: str) -> None:
    """Hatched box with its size: what may be kept for another job."""
    x0, y0, x1, y1 = offcut
    place, extent = (round(x0, 3), round(-y1, 3)), (round(x1 - x0, 3), round(y1 - y0, 3))
    thin = {"stroke": INK, "stroke_width": round(em / 16, 3)}
    page.add(page.rect(place, extent, fill="none", stroke_dasharray=f"{em:.3f} {em / 3:.3f}", class_="offcut", **thin))
    lines = "".join(_hatch(offcut, 2.0 * em))
    page.add(page.path(d=lines, fill="none", stroke="#888888", stroke_width=round(em / 24, 3)))
    words = f"offcut {size(x1 - x0, y1 - y0, units)}"
    _text(page, words, ((x0 + x1) / 2, -(y0 + y1) / 2), min(em, 1.4 * (x1 - x0) / len(words)), anchor="middle")


def _hatch(box: Rectangle, step: float) -> Iterator[str]:
    """Lines falling at 45 degrees, clipped to a box."""
    x0, y0, x1, y1 = box
    for k in range(1, int((x1 - x0 + y1 - y0) / step) + 1):
        off = k * step  # x + y grows by it from the lower left corner
        ax, bx = x0 + max(off - (y1 - y0), 0.0), x0 + min(off, x1 - x0)
        ay, by = y0 + min(off, y1 - y0), y0 + max(off - (x1 - x0), 0.0)
        yield f"M{ax:.3f} {-ay:.3f}L{bx:.3f} {-by:.3f}"


def _matrix(*figures: float) -> str:
    return f"matrix({' '.join(f'{float(v):.9g}' for v in figures)})"


def _shut(curve: Curve) -> Floats:
    return np.vstack([curve.xyb, curve.xyb[:1]]) if curve.closed else curve.xyb


def _used_length(page: svgwrite.Drawing, sheet: SheetLayout, em: float, units: str) -> None:
    """Dimension under the sheet: how much of it the parts take."""
    left, low = (float(v) for v in sheet.outline.min(axis=0))
    y, right = -low + 1.2 * em, left + sheet.used_length_mm
    line = f"M{left:.3f} {y:.3f}H{right:.3f}M{left:.3f} {y - em / 2:.3f}v{em:.3f}M{right:.3f} {y - em / 2:.3f}v{em:.3f}"
    page.add(page.path(d=line, fill="none", stroke=INK, stroke_width=em / 12))
    words = f"used length {length(sheet.used_length_mm, units)}, {percent(used_share(sheet))} of it parts"
    middle = max((left + right) / 2, left + WIDE * em * len(words) / 2)
    _text(page, words, (middle, y + 1.5 * em), em, anchor="middle")


def used_share(sheet: SheetLayout) -> float:
    """Net part area over the area of the sheet as far along as it is used."""
    whole = Polygon(sheet.outline, list(sheet.holes))
    x0, y0, _, y1 = whole.bounds
    used = whole.intersection(shapely.box(x0, y0, x0 + sheet.used_length_mm, y1)).area
    return float(sheet.utilisation * whole.area / used) if used > 0.0 else 0.0


def _heading(page: svgwrite.Drawing, sheet: SheetLayout, number: int, job: str, em: float, units: str) -> None:
    """Say over the sheet what it is, in letters that let it stand on one line."""
    wide, high = (float(v) for v in np.ptp(sheet.outline, axis=0))
    thick, pieces = length(sheet.thickness_mm, units), counted(len(sheet.placements), "part")
    words = [job, f"sheet {number}", sheet.stock, sheet.material, thick, size(wide, high, units)]
    words += [pieces, f"{percent(sheet.utilisation)} used", "numbered as cut"]
    line = " · ".join(w for w in words if w)
    at = (float(sheet.outline[:, 0].min()), float(-sheet.outline[:, 1].max() - 1.5 * em))
    _text(page, line, at, min(1.2 * em, (wide + 2 * em) / (WIDE * len(line))))


def _scale_bar(page: svgwrite.Drawing, at: tuple[float, float], room: float, em: float, units: str) -> None:
    """Bar of a round length, a tenth to a quarter of the sheet."""
    unit = 25.4 if units in ("in", "ft") else 1.0
    steps = [unit * m * 10**e for e in range(-1, 5) for m in (1, 2, 5)]
    bar = max((s for s in steps if s <= room / 4), default=room / 4)
    x, y = at
    for k in range(2):
        shade = INK if k == 0 else PALE
        half = page.rect((x + k * bar / 2, y), (bar / 2, em / 2), fill=shade, stroke=INK, stroke_width=em / 16)
        page.add(half)
    _text(page, f"{bare_length(bar, units)} {units}", (x + bar + em / 2, y + em / 2), em)


def _text(onto: svgwrite.Drawing, words: str, at: tuple[float, float], height: float, *, anchor: str = "start") -> None:
    place = (round(at[0], 3), round(at[1], 3))
    font = {"font_size": round(height, 3), "font_family": "sans-serif", "text_anchor": anchor, "fill": INK}
    onto.add(svgwrite.text.Text(words, insert=place, debug=False, **font))
