"""Picture of two revisions on each other: what came, what went, and the holes that changed, each numbered."""

from collections.abc import Iterator, Sequence
from html import escape

from flatprep.compare.values import Comparison, HoleChange, HolePair, PartChange, Region
from flatprep.report.compare_text import pair_words
from flatprep.report.figures import length
from flatprep.report.part_figure import scale_bar
from flatprep.report.svg_path import part_path, ring_data
from flatprep.report.svg_tag import tag, text

CAME, WENT, INK = "#0072B2", "#D55E00", "#333333"
"""Blue and vermilion of a palette for colour-blind readers (Okabe and Ito 2008); hatched, so never colour alone."""
_WIDTH_PX = 1000


def compare_svg(comparison: Comparison) -> str:
    """SVG document: each pair of parts in a frame of its own, below each other, true to scale among themselves."""
    shown = [c for c in comparison.changes if not c.same] or list(comparison.changes)
    unit = max((_extent(c)[2] for c in shown), default=100.0) / 100.0
    frames, top, wide = [], 0.0, 100.0 * unit
    for change in shown:
        content, height, width = _frame(change, unit, comparison.new_units)
        frames.append(tag("g", content, transform=f"translate(0 {top:.3f})"))
        top, wide = top + height, max(wide, width)
    body = tag("style", _style(unit)) + _hatches(unit) + "".join(frames) + _legend(top, unit, comparison.new_units)
    high = top + 14 * unit
    head = f'width="{_WIDTH_PX}" height="{_WIDTH_PX * high / wide:.0f}" viewBox="0 0 {wide:.3f} {high:.3f}"'
    title = tag("title", escape(f"{comparison.old_file} and {comparison.new_file}"))
    return f'<svg xmlns="http://www.w3.org/2000/svg" role="img" {head}>{title}{body}</svg>\n'


def _extent(change: PartChange) -> tuple[float, float, float, float]:
    """Left, low, width and height of both parts."""
    a, b = change.old.outer.bounds, change.laid.outer.bounds
    x0, y0, x1, y1 = min(a[0], b[0]), min(a[1], b[1]), max(a[2], b[2]), max(a[3], b[3])
    return x0, y0, x1 - x0, y1 - y0


def _frame(change: PartChange, unit: float, units: str) -> tuple[str, float, float]:
    """Content of one frame, with its height and width; its origin is the upper left corner."""
    x0, y0, width, height = _extent(change)
    pad = 6.0 * unit
    notes = [_numbered(p, k, unit, units) for k, p in enumerate(_changed(change.holes), start=1)]
    body = [
        tag("path", class_="both", fill_rule="evenodd", d=part_path(change.laid)),
        *_regions(change),
        tag("path", class_="old", d=part_path(change.old)),
        tag("path", class_="new", d=part_path(change.laid)),
        *(shape for shape, _ in notes),
    ]
    words = [tag("title", escape(change.old.name)), text(change.old.name, pad, pad, 3 * unit, font_weight="bold")]
    drawn = tag("g", "".join(body), transform=f"translate({pad - x0:.3f} {y0 + height + 1.5 * pad:.3f})")
    below = height + 2.2 * pad
    lines = [line for _, line in notes] + [_edge_words(r, units) for r in change.edges]
    listed = [text(line, pad, below + 3.4 * unit * (k + 1), 2.4 * unit) for k, line in enumerate(lines)]
    return "".join([*words, drawn, *listed]), below + 3.4 * unit * (len(lines) + 1), width + 2 * pad


def _changed(pairs: Sequence[HolePair]) -> list[HolePair]:
    return [p for p in pairs if p.change is not HoleChange.SAME]


def _regions(change: PartChange) -> Iterator[str]:
    """Material that came and went along the outline, and by holes that came, went or changed."""
    for region in change.edges:
        yield tag("path", class_="came" if region.added else "went", d="".join(map(ring_data, region.rings)))


def _numbered(pair: HolePair, number: int, unit: float, units: str) -> tuple[str, str]:
    """Mark of a changed hole with its number, and the line that explains it."""
    x, y = pair.at
    reach = (pair.new or pair.old).length_mm / 2.0 + 1.2 * unit  # type: ignore[union-attr]
    mark = tag("circle", class_="mark", cx=x, cy=-y, r=reach) + text(str(number), x + reach, -y - reach, 2.6 * unit)
    if pair.change is HoleChange.MOVED and pair.old is not None:
        ox, oy = pair.old.at
        mark += tag("path", class_="mark", d=f"M{ox:.3f} {-oy:.3f}L{x:.3f} {-y:.3f}")
    return mark, f"{number}  {pair_words(pair, units)}"


def _edge_words(region: Region, units: str) -> str:
    sign = "+" if region.added else "−"
    return f"{sign}  outline {length(region.depth_mm, units)} over {length(region.length_mm, units)}"


def _legend(top: float, unit: float, units: str) -> str:
    entries = (("old", "old edge"), ("new", "new edge"), ("came", "material came"), ("went", "material went"))
    out = [scale_bar(6 * unit, top + 9 * unit, unit, units)]
    for k, (css, words) in enumerate(entries):
        x = 6 * unit + 24 * unit * k
        out.append(tag("rect", class_=css, x=x, y=top + unit, width=5 * unit, height=3 * unit))
        out.append(text(words, x + 6 * unit, top + 3.4 * unit, 2.4 * unit))
    return "".join(out)


def _hatches(unit: float) -> str:
    step = f"{1.6 * unit:.3f}"
    one = '<pattern id="{0}" width="{1}" height="{1}" patternUnits="userSpaceOnUse" patternTransform="rotate({2})">'
    line = '<path d="M0 0V{0}" stroke="{1}" stroke-width="{2:.3f}"/></pattern>'
    return tag(
        "defs",
        one.format("h-came", step, 45)
        + line.format(step, CAME, 0.7 * unit)
        + one.format("h-went", step, -45)
        + line.format(step, WENT, 0.7 * unit),
    )


def _style(unit: float) -> str:
    thin, dash = f"{0.3 * unit:.3f}", f"{1.2 * unit:.3f}"
    return (
        f"text{{font-family:sans-serif;fill:{INK}}}.both{{fill:#E9E9E9}}"
        f".old{{fill:none;stroke:{WENT};stroke-width:{thin};stroke-dasharray:{dash}}}"
        f".new{{fill:none;stroke:{CAME};stroke-width:{thin}}}"
        f".came{{fill:url(#h-came)}}.went{{fill:url(#h-went)}}"
        f".mark,.scale-bar path{{fill:none;stroke:{INK};stroke-width:{thin}}}"
    )
