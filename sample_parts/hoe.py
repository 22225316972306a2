"""The flat parts of a wheel hoe as plain values: closed paths, circles, bend lines and engraving, in mm.

An invented machine: a push hoe with one wheel, two side plates, a depth quadrant, blades, skids and a seed tray.
"""

from dataclasses import dataclass
from math import acos, asin, atan2, cos, hypot, pi, radians, sin, sqrt, tan

Point = tuple[float, float]
Vertex = tuple[float, float, float]  # x, y, bulge = tan(sweep / 4) of the segment that leaves the vertex
Path = tuple[Vertex, ...]


@dataclass(frozen=True)
class Circle:
    x: float
    y: float
    diameter: float


@dataclass(frozen=True)
class Plate:
    """One part: outer contour, holes, bend lines, and open strokes that are engraved."""

    outer: Path | Circle
    holes: tuple[Path | Circle, ...] = ()
    bends: tuple[tuple[Point, Point], ...] = ()
    strokes: tuple[tuple[Point, ...], ...] = ()
    units: str = "mm"


def polar(radius: float, angle_deg: float) -> Point:
    return radius * cos(radians(angle_deg)), radius * sin(radians(angle_deg))


def holes(diameter: float, *centres: Point) -> tuple[Circle, ...]:
    return tuple(Circle(x, y, diameter) for x, y in centres)


def bolt_circle(diameter: float, pitch_radius: float, count: int, first_deg: float = 0.0) -> tuple[Circle, ...]:
    return holes(diameter, *(polar(pitch_radius, first_deg + 360 / count * k) for k in range(count)))


def rounded(*corners: tuple[float, float, float]) -> Path:
    """Polygon, anticlockwise, from corners (x, y, fillet radius)."""
    out: list[Vertex] = []
    for i, (x, y, r) in enumerate(corners):
        (px, py, _), (nx, ny, _) = corners[i - 1], corners[(i + 1) % len(corners)]
        a, b = atan2(y - py, x - px), atan2(ny - y, nx - x)
        turn = (b - a + pi) % (2 * pi) - pi
        back = r * tan(abs(turn) / 2)
        out.append((x - back * cos(a), y - back * sin(a), tan(turn / 4) if r else 0.0))
        if r:
            out.append((x + back * cos(b), y + back * sin(b), 0.0))
    return tuple(out)


def box(x0: float, y0: float, x1: float, y1: float, r: float = 0.0) -> Path:
    return rounded((x0, y0, r), (x1, y0, r), (x1, y1, r), (x0, y1, r))


def around(*circles: tuple[float, float, float]) -> Path:
    """Taut belt around circles (x, y, radius), given anticlockwise."""
    directions = []
    for i, (x, y, r) in enumerate(circles):
        nx, ny, nr = circles[(i + 1) % len(circles)]
        span = hypot(nx - x, ny - y)
        directions.append(atan2(ny - y, nx - x) - acos((r - nr) / span))
    out: list[Vertex] = []
    for i, (x, y, r) in enumerate(circles):
        start, end = directions[i - 1], directions[i]
        sweep = (end - start) % (2 * pi)
        out.append((x + r * cos(start), y + r * sin(start), tan(sweep / 4)))
        out.append((x + r * cos(end), y + r * sin(end), 0.0))
    return tuple(out)


def slot(x: float, y: float, length: float, width: float, angle_deg: float = 0.0) -> Path:
    """Slot with round ends about a centre; `length` over all."""
    dx, dy = polar((length - width) / 2, angle_deg)
    return around((x - dx, y - dy, width / 2), (x + dx, y + dy, width / 2))


def arc_slot(radius: float, half_angle_deg: float, width: float) -> Path:
    """Slot along an arc about the origin, round ends."""
    wide = tan(radians(2 * half_angle_deg) / 4)
    outer, inner = radius + width / 2, radius - width / 2
    return (
        (*polar(outer, -half_angle_deg), wide),
        (*polar(outer, half_angle_deg), 1.0),
        (*polar(inner, half_angle_deg), -wide),
        (*polar(inner, -half_angle_deg), 1.0),
    )


def turned(path: Path, angle_deg: float) -> Path:
    c, s = polar(1.0, angle_deg)
    return tuple((c * x - s * y, s * x + c * y, b) for x, y, b in path)


def side_plate() -> Plate:
    """Carries axle, handle and tool bar; origin at the axle. Countersunk on one face: a handed pair."""
    window = around((95, 16, 14), (325, -8, 16), (325, 86, 16))
    return Plate(
        around((0, 0, 34), (430, -20, 38), (400, 120, 38)),
        (
            Circle(0, 0, 13.5),
            window,
            *holes(9.0, (378, 112), (418, 128)),
            *holes(11.0, (410, -20), (450, -20)),
            *holes(5.5, (419.5, 29), (410.5, 71)),
        ),
    )


def wheel_disc() -> Plate:
    x, y = polar(120, 25)
    window = around((70, 0, 12), (x, -y, 13), (x, y, 13))
    windows = tuple(turned(window, 72 * k) for k in range(5))
    return Plate(
        Circle(0, 0, 320),
        (Circle(0, 0, 42), *windows, *bolt_circle(6.6, 30, 4, 45), *bolt_circle(5.5, 149, 10, 18)),
    )


def washer() -> Plate:
    return Plate(Circle(0, 0, 40), holes(13.5, (0, 0)))


def hub_flange() -> Plate:
    """Holds a 608 bearing; bored after cutting."""
    return Plate(Circle(0, 0, 80), (Circle(0, 0, 21), *bolt_circle(6.6, 30, 4, 45)))


def depth_quadrant() -> Plate:
    """Sector about the pivot with an arc slot and five reamed index holes."""
    half, boss, reach = 36.0, 24.0, 140.0
    corner = half + asin(boss / reach) * 180 / pi
    outer = (
        (*polar(reach, -corner), tan(radians(2 * corner) / 4)),
        (*polar(reach, corner), 0.0),
        (*polar(boss, half + 90), tan(radians(180 - 2 * half) / 4)),
        (*polar(boss, -half - 90), 0.0),
    )
    # the tapped pair meets the countersunk pair of the side plate: 9 by 42 mm apart there
    half_pair = sqrt(9.0**2 + 42.0**2) / 2
    return Plate(
        outer,
        (
            Circle(0, 0, 9.0),
            arc_slot(85, 30, 9.0),
            *holes(7.5, *(polar(115, a) for a in (-24, -12, 0, 12, 24))),
            *holes(4.2, (38, -half_pair), (38, half_pair)),
        ),
    )


def clamp_plate() -> Plate:
    return Plate(
        box(-50, -30, 50, 30, 10), (*holes(9.0, (-35, -17), (35, -17), (35, 17), (-35, 17)), slot(0, 0, 36, 11))
    )


def tool_bar_plate() -> Plate:
    """Takes inch implements: drawn in inches, 3/8 in bolts."""
    bolts = holes(0.406, (1.0, 0.75), (7.0, 0.75), (7.0, 2.25), (1.0, 2.25))
    return Plate(box(0, 0, 8, 3, 0.375), (*bolts, slot(4, 1.5, 3.0, 0.406)), units="in")


def sweep_blade() -> Plate:
    right = ((24, -70, 4), (24, -14, 12), (112, -44, 3), (122, -14, 3))
    left = tuple((-x, y, r) for x, y, r in reversed(right))
    return Plate(rounded(*right, (0, 92, 6), *left), holes(9.0, (0, -52), (0, -12)))


def side_knife() -> Plate:
    return Plate(
        rounded((0, 0, 5), (36, 0, 5), (36, 96, 14), (112, 128, 3), (108, 152, 3), (0, 132, 14)),
        (slot(18, 26, 22, 9.0, 90), Circle(18, 66, 9.0)),
    )


def link_lower() -> Plate:
    """Bores for 12 mm bushings drawn 0.5 mm under; two tapped holes."""
    return Plate(around((0, 0, 16), (180, 0, 16)), (*holes(11.5, (0, 0), (180, 0)), *holes(4.2, (60, 0), (120, 0))))


def link_upper() -> Plate:
    return Plate(
        around((0, 0, 15), (150, 0, 15), (80, 24, 14)), (*holes(11.5, (0, 0), (150, 0)), *holes(4.2, (75, 12)))
    )


def tray_bracket() -> Plate:
    """Folds to a U: base 100 mm, flanges 45 mm before the bend allowance."""
    return Plate(
        box(0, 0, 190, 40, 4),
        (*holes(6.6, (18, 10), (18, 30), (172, 10), (172, 30)), slot(75, 20, 16, 6.6), slot(115, 20, 16, 6.6)),
        bends=(((45, 0), (45, 40)), ((145, 0), (145, 40))),
    )


def skid() -> Plate:
    outer = rounded((20, 0, 24), (330, 0, 34), (330, 72, 34), (70, 72, 30), (-10, 40, 8))
    return Plate(outer, (*holes(9.0, (90, 36), (290, 36)), box(130, 22, 250, 50, 8)))


def tabs(along: tuple[float, ...], width: float, reach: float) -> list[tuple[float, float]]:
    """Points (along, out) of an edge with tabs centred at `along`."""
    out = []
    for middle in along:
        a, b = middle - width / 2, middle + width / 2
        out += [(a, 0.0), (a, reach), (b, reach), (b, 0.0)]
    return out


def tabbed_box(length: float, width: float, edges: dict[str, list[tuple[float, float]]]) -> Path:
    """Rectangle from (0, 0) with tabs pointing out of its edges S, E, N, W."""
    south = [(a, -o) for a, o in edges.get("S", [])]
    east = [(length + o, a) for a, o in edges.get("E", [])]
    north = [(length - a, width + o) for a, o in edges.get("N", [])]
    west = [(-o, width - a) for a, o in edges.get("W", [])]
    points = [(0.0, 0.0), *south, (length, 0.0), *east, (length, width), *north, (0.0, width), *west]
    return tuple((x, y, 0.0) for x, y in points)


def tray_floor() -> Plate:
    """Tabs into sides and ends; slots for three dividers of 4 mm."""
    edges = {"S": tabs((82, 246), 40, 6), "N": tabs((82, 246), 40, 6), "E": tabs((94,), 40, 6), "W": tabs((94,), 40, 6)}
    slots = tuple(box(x - 2.1, y - 20.1, x + 2.1, y + 20.1) for x in (82, 164, 246) for y in (47, 141))
    return Plate(tabbed_box(328, 188, edges), slots)


def tray_side() -> Plate:
    """Long wall: slots for the floor's tabs and for the ends' tabs; two bolt holes to the brackets."""
    floor = tuple(box(x - 20.1, 11.9, x + 20.1, 18.1) for x in (102, 266))
    ends = tuple(box(x - 3.1, 39.9, x + 3.1, 70.1) for x in (17, 351))
    return Plate(box(0, 0, 368, 90, 8), (*floor, *ends, *holes(6.6, (164, 45), (204, 45))))


def tray_end() -> Plate:
    """Short wall between the sides: tabs left and right, a slot for the floor's tab."""
    edges = {"E": tabs((55,), 30, 6), "W": tabs((35,), 30, 6)}
    return Plate(tabbed_box(188, 90, edges), (box(73.9, 11.9, 114.1, 18.1), slot(94, 62, 70, 24)))


def tray_divider() -> Plate:
    return Plate(tabbed_box(186, 60, {"S": tabs((46, 140), 40, 6)}), (slot(93, 40, 60, 16),))


# single-stroke letters on a 4 x 6 grid
LETTERS: dict[str, tuple[tuple[Point, ...], ...]] = {
    "W": (((0, 6), (1, 0), (2, 4), (3, 0), (4, 6)),),
    "H": (((0, 0), (0, 6)), ((4, 0), (4, 6)), ((0, 3), (4, 3))),
    "E": (((4, 0), (0, 0), (0, 6), (4, 6)), ((0, 3), (3, 3))),
    "L": (((0, 6), (0, 0), (4, 0)),),
    "O": (((1, 0), (3, 0), (4, 1), (4, 5), (3, 6), (1, 6), (0, 5), (0, 1), (1, 0)),),
    " ": (),
}


def written(text: str, x: float, y: float, height: float) -> tuple[tuple[Point, ...], ...]:
    k = height / 6
    return tuple(
        tuple((x + k * (6 * i + px), y + k * py) for px, py in stroke)
        for i, letter in enumerate(text)
        for stroke in LETTERS[letter]
    )


def name_plate() -> Plate:
    border = ((-52, -7.5), (52, -7.5), (52, 7.5), (-52, 7.5), (-52, -7.5))
    return Plate(
        box(-70, -20, 70, 20, 6),
        holes(3.4, (-62, -12), (62, -12), (62, 12), (-62, 12)),
        strokes=(border, *written("WHEEL HOE", -43.2, -4.8, 9.6)),
    )


PLATES = {
    build.__name__: build()
    for build in (
        side_plate, wheel_disc, washer, hub_flange, depth_quadrant, clamp_plate, tool_bar_plate, sweep_blade,
        side_knife, link_lower, link_upper, tray_bracket, skid, tray_floor, tray_side, tray_end, tray_divider,
        name_plate,
    )
}  # fmt: skip

REMNANT = Plate(
    rounded((0, 0, 0), (860, 0, 0), (860, 260, 0), (610, 260, 40), (560, 430, 0), (180, 470, 0), (0, 330, 0)),
    (Circle(720, 130, 90),),
)
