"""Picture of a part for the page: its shape, bend lines and engraving, numbered marks, and a scale bar."""

from collections.abc import Sequence
from html import escape
from math import floor, log10

from flatprep.base.units import MM_PER_UNIT
from flatprep.model.drawing import Part
from flatprep.report.badges import Badge, Point, spread
from flatprep.report.figures import bare_length, number
from flatprep.report.svg_path import joined, part_path
from flatprep.report.svg_tag import picture, tag, text

Box = tuple[float, float, float, float]


def part_figure(part: Part, badges: Sequence[Badge] = (), *, units: str = "mm", label: str = "") -> str:
    """SVG element of a part, true to scale in itself; colours come from the page's classes.

    Parameters
    ----------
    part
        In drawing coordinates, mm.
    badges
        Marks; each becomes a ``<g data-mark>`` that the page lights together with its table row.
    units
        Of the scale bar.
    label
        What a screen reader says.
    """
    unit, box = frame(part)
    x0, y0, x1, y1 = box
    centres = spread(badges, 2.6 * unit, box)
    body = [
        tag("path", class_="material", fill_rule="evenodd", d=part_path(part)),
        *_lines(part),
        *_datum(box, unit),
        *(_mark(badge, centre, unit) for badge, centre in zip(badges, centres, strict=True)),
        scale_bar(x0 + 3 * unit, -y0 + 3 * unit, unit, units),
    ]
    view = (x0, -y1, x1 - x0, y1 - y0 + 8 * unit)
    return picture("".join(body), view, css="part-figure", label=label or part.name, role="group")


def frame(part: Part) -> tuple[float, Box]:
    """Return the picture's unit of size (a hundredth of its width, mm) and the box around part and margin."""
    x0, y0, x1, y1 = part.outer.bounds
    unit = max((x1 - x0) / 84, (y1 - y0) / 60, 1e-6)
    pad = 8 * unit
    wide = max(0.0, 100 * unit - (x1 - x0) - 2 * pad) / 2  # narrow parts are centred in the same frame
    return unit, (x0 - pad - wide, y0 - pad, x1 + pad + wide, y1 + pad)


def scale_bar(x: float, y: float, unit: float, units: str) -> str:
    """Bar of a round length from x, y (y downwards) with its length beside it; `unit` is 1 % of the width, mm."""
    long = nice_length_mm(20 * unit, units)
    tick = number(unit / 2, 3)
    across, start = number(long, 3), f"{number(x, 3)} {number(y, 3)}"
    bar = tag("path", d=f"M{start}m0 -{tick}v{number(unit, 3)}m0 -{tick}h{across}m0 -{tick}v{number(unit, 3)}")
    words = text(f"{bare_length(long, units)} {units}", x + long + 1.5 * unit, y + 0.9 * unit, 2.6 * unit)
    return tag("g", bar + words, class_="scale-bar")


def nice_length_mm(about_mm: float, units: str) -> float:
    """Largest 1, 2 or 5 times a power of ten, in the unit shown, that is not longer than `about_mm`."""
    per = MM_PER_UNIT[units]
    decade = 10.0 ** floor(log10(about_mm / per))
    best = max(k * decade for k in (1, 2, 5) if k * decade <= about_mm / per * (1 + 1e-9))
    return best * per


def _lines(part: Part) -> list[str]:
    kinds = (("engraved", part.marks), ("bend", part.bends))
    return [tag("path", class_=css, d=joined(c.xyb for c in curves)) for css, curves in kinds if curves]


def _datum(box: Box, unit: float) -> list[str]:
    """Cross at the drawing's origin, from which the places are measured, where it lies in the picture."""
    if not (box[0] <= 0 <= box[2] and box[1] <= 0 <= box[3]):
        return []
    d = number(2 * unit, 3)
    return [tag("path", class_="datum", d=f"M-{d} 0H{d}M0 -{d}V{d}")]


def _mark(badge: Badge, centre: Point, unit: float) -> str:
    """Spot at the place, leader, and the badge with its number."""
    (x, y), (cx, cy) = badge.at, centre
    pieces = (
        tag("title", escape(badge.title)),
        tag("path", class_="leader", d=f"M{number(x, 3)} {number(-y, 3)}L{number(cx, 3)} {number(-cy, 3)}"),
        tag("circle", class_="spot", cx=x, cy=-y, r=0.5 * unit),
        badge_shape(badge.kind, badge.text, cx, -cy, 2.6 * unit),
        text(badge.text, cx, -cy + 0.95 * unit, 2.7 * unit),
    )
    words = f"mark {badge.text}: {badge.title}"
    keys = " ".join(badge.keys)
    return tag(
        "g", "".join(pieces), class_=f"mark {badge.kind}", data_mark=keys, tabindex="0", role="button", aria_label=words
    )


def badge_shape(kind: str, words: str, x: float, y: float, r: float) -> str:
    """Triangle for an error, diamond for a warning, square for a note, pill for a step: never colour alone."""
    if kind == "step":
        half = 0.85 * r + max(0.0, 0.3 * r * (len(words) - 2))
        return tag("rect", class_="badge", x=x - half, y=y - 0.85 * r, width=2 * half, height=1.7 * r, rx=0.85 * r)
    points = " ".join(f"{number(x + r * px, 3)},{number(y + r * py, 3)}" for px, py in _CORNERS[kind])
    return tag("polygon", class_="badge", points=points)


def sign(kind: str, words: str) -> str:
    """Return a mark by itself, as it stands in the tables beside the picture."""
    pieces = badge_shape(kind, words, 13, 13, 14 if kind == "step" else 10) + text(words, 13, 17, 12)
    return picture(tag("g", pieces, class_=f"mark {kind}"), (0, 0, 26, 26), css="sign", label=f"{kind} {words}")


_CORNERS = {
    "error": ((0.0, -1.25), (1.25, 0.9), (-1.25, 0.9)),
    "warning": ((0.0, -1.15), (1.15, 0.0), (0.0, 1.15), (-1.15, 0.0)),
    "note": ((-0.85, -0.85), (0.85, -0.85), (0.85, 0.85), (-0.85, 0.85)),
}
