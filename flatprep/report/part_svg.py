"""Picture of a part as a file of its own: numbered marks at the places of its findings, and what each says below.

Colours are Okabe and Ito's (2008), which colour-blind people tell apart, and each kind has its own shape and word.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from html import escape

from flatprep.geom.bulge import Floats
from flatprep.model.drawing import Part
from flatprep.model.finding import Finding
from flatprep.model.linted import Linted
from flatprep.report.badges import Badge, Point, finding_badges, spread
from flatprep.report.figures import counted, length, measure, number, place
from flatprep.report.part_figure import badge_shape, frame, scale_bar
from flatprep.report.svg_path import joined, part_path, ring_data
from flatprep.report.svg_tag import picture, tag, text
from flatprep.report.words import lengths_in

FILLS = {"error": "#D55E00", "warning": "#E69F00", "note": "#56B4E9"}
INK = {"error": "#FFFFFF", "warning": "#000000", "note": "#000000"}
MATERIAL, LINE, BEND, HATCH = "#E6E6E6", "#000000", "#0072B2", "#CC79A7"
MOST_LINES = 40
"""More findings than this are counted, not listed."""
LETTERS_A_LINE = 92


@dataclass(frozen=True, slots=True)
class Unreached:
    """What a round tool does not enter: its diameter, the area, mm², and the rings of each region, mm."""

    tool_mm: float
    area_mm2: float
    regions: tuple[tuple[Floats, ...], ...]


def part_pictures(
    one: Linted, unreached: Mapping[str, Unreached] | None = None, units: str | None = None
) -> tuple[tuple[str, str], ...]:
    """Return (part's name, SVG document) for each part of a drawing; findings of the whole drawing stand in each.

    `unreached` is by the part's name; lengths are shown in `units`, else in the drawing's own.
    """
    lost = unreached or {}
    return tuple(
        (p.name, part_svg(p, [f for f in one.findings if f.part in (p.name, None)], units=units or one.drawing.units,
                          unreached=lost.get(p.name), digest=one.drawing.short_digest))
        for p in one.drawing.parts
    )  # fmt: skip


def part_svg(
    part: Part, findings: Sequence[Finding], *, units: str = "mm", unreached: Unreached | None = None, digest: str = ""
) -> str:
    """SVG document of a part, true to scale.

    Parameters
    ----------
    part
        In drawing coordinates, mm.
    findings
        Numbered in this order; those without a place, or whose place is off the picture, are only listed.
    units
        Of the figures.
    unreached
        Drawn hatched, with a line that says what it is.
    digest
        Of the drawing's content, shown beside the part's name.
    """
    unit, box = frame(part)
    x0, y0, x1, y1 = box
    seen = [b for b in finding_badges(findings) if x0 <= b.at[0] <= x1 and y0 <= b.at[1] <= y1]
    named = ("name", f"{part.name}, drawing {digest}" if digest else part.name)
    lines = [named, *_lines_of(findings, units), *_hatched_line(unreached, units)]
    step = 3.2 * unit
    high = y1 - y0 + (len(lines) + 3) * step
    body = [
        tag("title", escape(part.name)),
        tag("rect", x=x0, y=-y1, width=x1 - x0, height=high, fill="#FFFFFF"),
        tag("path", fill=MATERIAL, stroke=LINE, stroke_width=0.25 * unit, fill_rule="evenodd", d=part_path(part)),
        *_hatched(unreached, unit),
        *_drawn_on(part, unit),
        *(_mark(b, c, unit) for b, c in zip(seen, spread(seen, 2.6 * unit, box), strict=True)),
        _scale(x0 + 3 * unit, -y0 + 3 * unit, unit, units),
        *_list(lines, x0 + 3 * unit, -y0 + 3 * step, step),
    ]
    view = (x0, -y1, x1 - x0, high)
    drawn = picture("".join(body), view, css="part", label=f"{part.name}: {len(findings)} findings")
    scaled = drawn.replace("<svg ", f'<svg width="{number(x1 - x0, 3)}mm" height="{number(high, 3)}mm" ', 1)
    return f'<?xml version="1.0" encoding="UTF-8"?>\n{scaled}\n'


def _hatched(unreached: Unreached | None, unit: float) -> list[str]:
    if unreached is None or not unreached.regions:
        return []
    stroke = tag("path", stroke=HATCH, stroke_width=0.25 * unit, d=f"M0 0V{number(unit, 3)}")
    pattern = tag(
        "pattern", stroke, id="unreached", width=0.5 * unit, height=unit, patternUnits="userSpaceOnUse",
        patternTransform="rotate(45)",
    )  # fmt: skip
    d = "".join(ring_data(ring, decimals=3) for rings in unreached.regions for ring in rings)
    region = tag("path", class_="unreached", fill="url(#unreached)", fill_rule="evenodd", stroke=HATCH,
                 stroke_width=0.1 * unit, d=d)  # fmt: skip
    return [tag("defs", pattern), region]


def _hatched_line(unreached: Unreached | None, units: str) -> list[tuple[str, str]]:
    if unreached is None or not unreached.regions:
        return []
    places = counted(len(unreached.regions), "place")
    size = f"{unreached.area_mm2:.3g} mm²" if units not in ("in", "ft") else f"{unreached.area_mm2 / 645.16:.3g} in²"
    words = f"hatched: what a tool of {length(unreached.tool_mm, units)} does not enter, {size} in {places}"
    return [("note", words)]


def _scale(x: float, y: float, unit: float, units: str) -> str:
    bar = scale_bar(x, y, unit, units).replace("<text ", f'<text stroke="none" fill="{LINE}" font-family="sans-serif" ')
    return tag("g", bar, fill="none", stroke=LINE, stroke_width=0.2 * unit)


def _drawn_on(part: Part, unit: float) -> list[str]:
    out = []
    if part.marks:
        out.append(tag("path", fill="none", stroke=LINE, stroke_width=0.15 * unit, d=joined(c.xyb for c in part.marks)))
    if part.bends:
        dash = f"{number(2 * unit, 3)} {number(unit, 3)}"
        d = joined(c.xyb for c in part.bends)
        out.append(tag("path", fill="none", stroke=BEND, stroke_width=0.25 * unit, stroke_dasharray=dash, d=d))
    return out


def _mark(badge: Badge, centre: Point, unit: float) -> str:
    """Spot at the place, line, and the numbered sign of the kind."""
    (x, y), (cx, cy) = badge.at, centre
    leader = f"M{number(x, 3)} {number(-y, 3)}L{number(cx, 3)} {number(-cy, 3)}"
    pieces = (
        tag("title", escape(badge.title)),
        tag("path", fill="none", stroke=LINE, stroke_width=0.2 * unit, d=leader),
        tag("circle", cx=x, cy=-y, r=0.5 * unit, fill=LINE),
        tag("g", badge_shape(badge.kind, badge.text, cx, -cy, 2.6 * unit), fill=FILLS[badge.kind], stroke=LINE,
            stroke_width=0.2 * unit),
        text(badge.text, cx, -cy + 0.95 * unit, 2.7 * unit, fill=INK[badge.kind], text_anchor="middle",
             font_family="sans-serif"),
    )  # fmt: skip
    return tag("g", "".join(pieces), class_=f"mark {badge.kind}", data_mark=" ".join(badge.keys))


def _lines_of(findings: Sequence[Finding], units: str) -> list[tuple[str, str]]:
    """Say each finding in a line, as (kind, words)."""
    out = []
    for n, f in enumerate(findings[:MOST_LINES], start=1):
        size = "" if f.measured is None else f"{measure(f.measured, f.unit, units)}"
        limit = "" if f.limit is None else f", limit {measure(f.limit, f.unit, units)}"
        where = "" if f.at is None else f" at {place(f.at, units)}"
        words = f"{n}  {f.severity} {f.rule}{where}" + (
            f": {size}{limit}" if size else f": {lengths_in(f.message, units)}"
        )
        out.append((str(f.severity), words if len(words) <= LETTERS_A_LINE else words[: LETTERS_A_LINE - 1] + "…"))
    if len(findings) > MOST_LINES:
        out.append(("note", f"and {len(findings) - MOST_LINES} more"))
    return out


def _list(lines: Sequence[tuple[str, str]], x: float, y: float, step: float) -> list[str]:
    return [
        text(words, x, y + n * step, 0.6 * step, fill=LINE, font_family="sans-serif")
        for n, (_, words) in enumerate(lines)
    ]
