"""Small pictures of figures: a share as a bar, the search's progress as lines."""

from collections.abc import Callable, Sequence

from flatprep.report.bundle import SearchPoint
from flatprep.report.figures import duration, length, number
from flatprep.report.svg_tag import picture, tag, text

_WIDTH, _HEIGHT = 640.0, 220.0
_LEFT, _RIGHT, _TOP, _BOTTOM = 110.0, 12.0, 14.0, 34.0


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


def search_plot(points: Sequence[SearchPoint], units: str = "mm") -> str:
    """SVG elements of sheets and of used length against time, each only where it changed; else empty."""
    counts = [float(point.sheets) for point in points]
    lengths = [point.length_mm for point in points]
    seconds = [point.seconds for point in points]
    series = (("Sheets", counts, lambda v: number(v, 0)), ("Used length", lengths, lambda v: length(v, units)))
    return "".join(_plot(name, seconds, values, shown) for name, values, shown in series if len(set(values)) > 1)


def _plot(name: str, seconds: Sequence[float], values: Sequence[float], shown: Callable[[float], str]) -> str:
    """Draw steps from one value to the next; `shown` writes a value with its unit."""
    low, high = min(values), max(values)
    room = (high - low) * 0.08
    low, high = low - room, high + room
    last = max(seconds[-1], 1e-9)

    def x_of(second: float) -> float:
        return _LEFT + (_WIDTH - _LEFT - _RIGHT) * second / last

    def y_of(value: float) -> float:
        return _TOP + (_HEIGHT - _TOP - _BOTTOM) * (high - value) / (high - low)

    path = f"M{number(x_of(seconds[0]), 2)} {number(y_of(values[0]), 2)}"
    for second, value in zip(seconds[1:], values[1:], strict=True):
        path += f"H{number(x_of(second), 2)}V{number(y_of(value), 2)}"
    axis = f"M{_LEFT} {_TOP}V{_HEIGHT - _BOTTOM}H{_WIDTH - _RIGHT}"
    ends = dict.fromkeys((values[0], values[-1]))
    body = [
        tag("path", class_="axis", d=axis),
        tag("path", class_="curve", d=path),
        *(text(shown(v), _LEFT - 8, y_of(v) + 5, 14, class_="end") for v in ends),
        text("0 s", _LEFT, _HEIGHT - 14, 14),
        text(duration(last), _WIDTH - _RIGHT, _HEIGHT - 14, 14, class_="end"),
        text(f"{name} of the best layout against time", (_WIDTH + _LEFT) / 2, _HEIGHT - 14, 14, class_="middle"),
    ]
    label = f"{name}: from {shown(values[0])} to {shown(values[-1])} in {duration(last)}"
    return picture("".join(body), (0, 0, _WIDTH, _HEIGHT), css="plot", label=label)
