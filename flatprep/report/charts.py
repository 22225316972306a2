"""Small pictures of figures: a share as a bar, the search's progress as a line."""

from collections.abc import Sequence

from flatprep.report.bundle import SearchPoint
from flatprep.report.figures import duration, number
from flatprep.report.svg_tag import picture, tag, text

_WIDTH, _HEIGHT = 640.0, 220.0
_LEFT, _RIGHT, _TOP, _BOTTOM = 70.0, 12.0, 14.0, 34.0


def share_bar(share: float, label: str, *, limit: float | None = None) -> str:
    """Bar of a share (0 to 1, more is drawn full); `limit` sets a stroke across it."""
    body = [
        tag("rect", class_="bar-back", x=0, y=0, width=100, height=8),
        tag("rect", class_="bar-value", x=0, y=0, width=100 * min(max(share, 0.0), 1.0), height=8),
    ]
    if limit is not None:
        body.append(tag("path", class_="bar-limit", d=f"M{number(100 * limit, 2)} 0v8"))
    svg = picture("".join(body), (0, 0, 100, 8), css="bar", label=label)
    return svg.replace("<svg ", '<svg preserveAspectRatio="none" ', 1)


def search_plot(points: Sequence[SearchPoint]) -> str:
    """SVG of the best result so far against time; empty with fewer than two points."""
    if len(points) < 2:
        return ""
    name, values = _plotted(points)
    low, high = min(values), max(values)
    room = (high - low) * 0.08 or max(abs(high) * 0.05, 0.5)
    low, high = low - room, high + room
    last = max(points[-1].seconds, 1e-9)

    def x_of(seconds: float) -> float:
        return _LEFT + (_WIDTH - _LEFT - _RIGHT) * seconds / last

    def y_of(value: float) -> float:
        return _TOP + (_HEIGHT - _TOP - _BOTTOM) * (high - value) / (high - low)

    path = f"M{number(x_of(points[0].seconds), 2)} {number(y_of(values[0]), 2)}"
    for point, value in zip(points[1:], values[1:], strict=True):
        path += f"H{number(x_of(point.seconds), 2)}V{number(y_of(value), 2)}"
    axis = f"M{_LEFT} {_TOP}V{_HEIGHT - _BOTTOM}H{_WIDTH - _RIGHT}"
    body = [
        tag("path", class_="axis", d=axis),
        tag("path", class_="curve", d=path),
        *(text(number(v, 1), _LEFT - 8, y_of(v) + 5, 14, class_="end") for v in dict.fromkeys((values[0], values[-1]))),
        text("0 s", _LEFT, _HEIGHT - 14, 14),
        text(duration(last), _WIDTH - _RIGHT, _HEIGHT - 14, 14, class_="end"),
        text(f"{name} of the best layout against time", (_WIDTH + _LEFT) / 2, _HEIGHT - 14, 14, class_="middle"),
    ]
    label = f"{name}: from {number(values[0], 1)} to {number(values[-1], 1)} in {duration(last)}"
    return picture("".join(body), (0, 0, _WIDTH, _HEIGHT), css="plot", label=label)


def _plotted(points: Sequence[SearchPoint]) -> tuple[str, list[float]]:
    """Sheets where their number fell, else utilisation where it is known, else the used length."""
    if len({p.sheets for p in points}) > 1:
        return "Sheets", [float(p.sheets) for p in points]
    shares = [p.utilisation for p in points if p.utilisation is not None]
    if len(shares) == len(points):
        return "Utilisation, %,", [100 * share for share in shares]
    return "Used length, mm,", [p.length_mm for p in points]
