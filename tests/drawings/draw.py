"""Draw the DXF files of this folder: each carries, on layer EXPECT, the rule that must speak and where.

Run as ``python -m tests.drawings.draw``; the files are kept, so that what a test reads does not change with ezdxf.
Plates of 3 mm for the laser of `tests.rules.setting` (holes and webs 3 mm, slots 1.5 mm, parts 30 mm).
"""

from math import cos, pi, sin, tan
from pathlib import Path

from ezdxf.addons.r12writer import R12FastStreamWriter, r12writer

HERE = Path(__file__).parent
QUARTER = tan(pi / 8)


def box(d: R12FastStreamWriter, x: float, y: float, w: float, h: float) -> None:
    d.add_polyline_2d([(x, y), (x + w, y), (x + w, y + h), (x, y + h)], closed=True)


def slot(d: R12FastStreamWriter, x: float, y: float, length: float, width: float) -> None:
    r, s = width / 2, (length - width) / 2
    rows = [(x - s, y - r, 0), (x + s, y - r, 1), (x + s, y + r, 0), (x - s, y + r, 1)]
    d.add_polyline_2d(rows, format="xyb", closed=True)


def chords(d: R12FastStreamWriter, x: float, y: float, r: float, sides: int) -> None:
    d.add_polyline_2d(
        [(x + r * cos(2 * pi * k / sides), y + r * sin(2 * pi * k / sides)) for k in range(sides)], closed=True
    )


def expect(d: R12FastStreamWriter, rule: str, x: float, y: float) -> None:
    d.add_text(rule, (x, y), height=2, layer="EXPECT")


def clean_plate(d: R12FastStreamWriter) -> None:
    """Every look-alike that is none: sharp corners, a saw, a stub, a notch with room, holes at their limits."""
    saw = [p for k in range(20) for p in ((100 - 5 * k, 60), (97.5 - 5 * k, 70))]
    d.add_polyline_2d([(0, 0), (150, 0), (110, 60), *saw, (0, 60)], closed=True)
    d.add_circle((20, 20), 1.5)
    chords(d, 35, 20, 1.5, 96)
    chords(d, 50, 20, 1.5, 12)
    slot(d, 70, 20, 20, 1.5)
    box(d, 20, 35, 3, 3)
    d.add_circle((40, 40), 5)
    d.add_circle((53, 40), 5)


def two_faults(d: R12FastStreamWriter) -> None:
    """Two faults of different kinds in one part."""
    box(d, 0, 0, 100, 60)
    d.add_circle((30, 30), 1.2)
    d.add_circle((70, 8), 6.5)
    expect(d, "small-hole", 30, 30)
    expect(d, "thin-web", 70, 0.75)


def between_large_ones(d: R12FastStreamWriter) -> None:
    """A hole between two larger ones, nearer to each than they are to each other."""
    box(d, 0, 0, 100, 60)
    for x, r in ((30, 10), (46, 4), (62, 10)):
        d.add_circle((x, 30), r)
    expect(d, "thin-web", 41, 30)
    expect(d, "thin-web", 51, 30)


def tapered(d: R12FastStreamWriter) -> None:
    """A notch and a finger that narrow towards their ends."""
    d.add_polyline_2d(
        [(0, 0), (30, 0), (30.3, 20), (31.3, 20), (31.6, 0), (100, 0), (100, 60), (72, 60), (71.2, 75), (68.8, 75),
         (68, 60), (0, 60)],
        closed=True,
    )  # fmt: skip
    expect(d, "narrow-slot", 30.8, 20)
    expect(d, "thin-web", 70, 75)


def washer(d: R12FastStreamWriter) -> None:
    """A ring as wide all round, told once; its place is free, so it is drawn a hundredth off its centre."""
    d.add_circle((0, 0), 40)
    d.add_circle((0.05, 0), 38)
    expect(d, "thin-web", 39, 0)


def chorded_gap(d: R12FastStreamWriter) -> None:
    """A narrow gap between two holes of many chords, and a narrow obround of chords."""
    box(d, 0, 0, 120, 60)
    chords(d, 30, 30, 12, 72)
    chords(d, 55, 30, 11, 90)
    rows = [(90 + 8 * s + 0.6 * cos(a), 30 + 0.6 * sin(a)) for s, a0 in ((1, -pi / 2), (-1, pi / 2))
            for a in (a0 + pi * k / 24 for k in range(25))]  # fmt: skip
    d.add_polyline_2d(rows, closed=True)
    expect(d, "thin-web", 43, 30)
    expect(d, "narrow-slot", 90, 30)


def island(d: R12FastStreamWriter) -> None:
    """A disc that drops out of a hole, drawn as arcs."""
    box(d, 0, 0, 100, 60)
    d.add_circle((50, 30), 20)
    d.add_arc((52, 30), 8, 0, 180)
    d.add_arc((52, 30), 8, 180, 360)
    expect(d, "loose-island", 52, 30)


def open_and_double(d: R12FastStreamWriter) -> None:
    """An outline that stays open and a line drawn twice."""
    box(d, 0, 0, 100, 60)
    for a, b in (((20, 20), (40, 20)), ((40, 20), (40, 35)), ((40, 35), (20, 35)), ((20, 35), (20, 21))):
        d.add_line(a, b)
    corners = ((60, 20), (80, 20), (80, 40), (60, 40))
    for a, b in (*zip(corners, corners[1:] + corners[:1], strict=True), (corners[1], corners[0])):
        d.add_line(a, b)
    expect(d, "open-contour", 20, 20.5)
    expect(d, "duplicate-line", 70, 20)


ALL = (clean_plate, two_faults, between_large_ones, tapered, washer, chorded_gap, island, open_and_double)


def main() -> None:
    """Write every drawing."""
    for paint in ALL:
        with r12writer(HERE / f"{paint.__name__.replace('_', '-')}.dxf") as d:
            paint(d)


if __name__ == "__main__":
    main()
