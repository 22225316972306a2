"""Shapes at each allowed turn, packed into flat arrays that the kernels read."""

from collections.abc import Iterable, Sequence
from typing import NamedTuple

import numpy as np
import numpy.typing as npt

from flatprep.geom.bulge import Floats
from flatprep.nest.poles import inner_circles
from flatprep.nest.shapes import Shape

Ints = npt.NDArray[np.int64]

# Outlines are drawn in by this much (mm), so that touching pieces are apart and every test is in general position.
# Two pieces that the search takes for free may therefore overlap by twice this, far below the 1e-6 mm of the verifier.
HAIR_MM = 2e-7
# The tip of a sharp corner is drawn in by at most this many hairs.
LONGEST_MITRE = 4.0
# Edges in a row that share a box, to be passed over together.
BLOCK = 8


class Rings(NamedTuple):
    """The edges of all variants: what the exact tests read.

    Attributes
    ----------
    edge : ndarray, shape (edges, 4), float64
        x0, y0, x1, y1 in mm, material on the left, drawn in by `HAIR_MM`; the edges of variant v are rows
        at[v, 0] to at[v, 1].
    at : ndarray, shape (v, 2), int64
    box : ndarray, shape (v, 4), float64
        Least x, least y, greatest x, greatest y of the true outline, mm.
    block : ndarray, shape (blocks, 4), float64
        Boxes of each `BLOCK` edges in a row, the last ones of a variant maybe fewer; those of variant v are rows
        block_at[v, 0] to block_at[v, 1].
    block_at : ndarray, shape (v, 2), int64
    """

    edge: Floats
    at: Ints
    box: Floats
    block: Floats
    block_at: Ints


class Outlines(NamedTuple):
    """Variants: a shape at one turn, mirrored or not, about its own origin. v counts variants, s shapes.

    Attributes
    ----------
    rings : Rings
    pole : ndarray, shape (poles, 3), float64
        Centre x, y and radius (mm) of circles inside the material, largest first; rows
        pole_at[v, 0] to pole_at[v, 1].
    turn : ndarray, shape (v, 3), float64
        Cosine and sine of the turn, and the turn in degrees as it was given.
    shape, mirrored : ndarray, shape (v,), int64
    base : ndarray, shape (v,), int64
        The packed variant of which this one is a turned copy; itself where it is packed.
    first : ndarray, shape (s + 1,), int64
        Packed variants of shape s are first[s] to first[s + 1].
    size : ndarray, shape (s, 4), float64
        Fourth root of the hull's area (mm^0.5), diameter (mm), geometric mean and smaller one of the box's sides (mm).
    """

    rings: Rings
    pole: Floats
    pole_at: Ints
    turn: Floats
    shape: Ints
    mirrored: Ints
    base: Ints
    first: Ints
    size: Floats


def rings_of(shape: Shape) -> list[Floats]:
    """Rings with the material on their left: the outline anticlockwise, windows clockwise."""
    turned = [(shape.outer, 1.0), *((h, -1.0) for h in shape.holes)]
    return [np.ascontiguousarray(r if signed_area(r) * side > 0.0 else r[::-1]) for r, side in turned]


def signed_area(ring: Floats) -> float:
    """Area of a ring in mm², positive when it runs anticlockwise (the shoelace formula about its first point)."""
    x, y = (ring - ring[0]).T
    return float(0.5 * np.sum(x * np.roll(y, -1) - np.roll(x, -1) * y))


def drawn_in(ring: Floats, by_mm: float = HAIR_MM) -> Floats:
    """Ring moved to its left by a hair, corners mitred."""
    along = np.roll(ring, -1, axis=0) - ring
    along /= np.linalg.norm(along, axis=1, keepdims=True)
    left = np.column_stack([-along[:, 1], along[:, 0]])
    both = left + np.roll(left, 1, axis=0)
    norm = np.maximum(np.linalg.norm(both, axis=1, keepdims=True), 1e-9)
    moved: Floats = ring + by_mm * both / norm * np.minimum(2.0 / norm, LONGEST_MITRE)
    return moved


def turned(points: Floats, turn_deg: float, *, mirrored: bool) -> Floats:
    """Points mirrored (x -> -x) if asked, then turned anticlockwise about (0, 0); quarter turns are exact."""
    c, s = cos_sin(turn_deg)
    x = -points[:, 0] if mirrored else points[:, 0]
    return np.column_stack([c * x - s * points[:, 1], s * x + c * points[:, 1]])


def cos_sin(turn_deg: float) -> tuple[float, float]:
    """Cosine and sine, exact at quarter turns."""
    quarters, rest = divmod(turn_deg % 360.0, 90.0)
    if rest == 0.0:
        return ((1.0, 0.0), (0.0, 1.0), (-1.0, 0.0), (0.0, -1.0))[int(quarters) % 4]
    return float(np.cos(np.radians(turn_deg))), float(np.sin(np.radians(turn_deg)))


def edges_of(rings: Iterable[Floats]) -> Floats:
    """Edges x0, y0, x1, y1 of closed rings, shape (n, 4)."""
    return np.vstack([np.hstack([ring, np.roll(ring, -1, axis=0)]) for ring in rings])


def hull_area(points: Floats) -> float:
    """Area of the convex hull, mm² (Andrew's monotone chain)."""
    order = points[np.lexsort((points[:, 1], points[:, 0]))]
    chain: list[Floats] = []
    for run in (order, order[::-1]):
        start = len(chain)
        for p in run:
            while len(chain) >= start + 2 and _turns_right(chain[-2], chain[-1], p):
                chain.pop()
            chain.append(p)
        chain.pop()
    return abs(signed_area(np.array(chain))) if len(chain) >= 3 else 0.0


def _turns_right(a: Floats, b: Floats, c: Floats) -> bool:
    return bool((b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]) <= 0.0)


def size_of(shape: Shape) -> tuple[float, float, float, float]:
    """Return the row of `Outlines.size` for a shape."""
    sides = np.ptp(shape.outer, axis=0)
    across = np.linalg.norm(shape.outer[:, None] - shape.outer[None], axis=2).max() if len(shape.outer) < 400 else None
    diameter = float(across if across is not None else np.hypot(*sides))
    return hull_area(shape.outer) ** 0.25, diameter, float(np.sqrt(sides[0] * sides[1])), float(sides.min())


def pack(shapes: Sequence[Shape], turns: Sequence[Sequence[float]]) -> Outlines:
    """Pack each shape at each of its turns, once for every mirror state it may have.

    Parameters
    ----------
    shapes
        The shapes.
    turns
        For each of them, the turns to pack (degrees). A shape's variants come in this order, mirror states together.
    """
    edges, poles, boxes, turn, kind, flipped, first = [], [], [], [], [], [], [0]
    for s, (shape, angles) in enumerate(zip(shapes, turns, strict=True)):
        rings = rings_of(shape)
        inner = [drawn_in(r) for r in rings]
        circles = inner_circles(edges_of(inner))
        for angle in angles:
            for mirrored in shape.mirror:
                outline = turned(shape.outer, angle, mirrored=mirrored)
                moved = [turned(r, angle, mirrored=mirrored) for r in inner]
                edges.append(edges_of([r[::-1] for r in moved] if mirrored else moved))
                poles.append(np.column_stack([turned(circles[:, :2], angle, mirrored=mirrored), circles[:, 2]]))
                boxes.append(np.concatenate([outline.min(axis=0), outline.max(axis=0)]))
                turn.append((*cos_sin(angle), angle))
                kind.append(s)
                flipped.append(int(mirrored))
        first.append(len(kind))
    return Outlines(
        rings=rings_in_blocks(edges, np.array(boxes)),
        pole=np.ascontiguousarray(np.vstack(poles)),
        pole_at=_starts(poles),
        turn=np.array(turn),
        shape=np.array(kind, dtype=np.int64),
        mirrored=np.array(flipped, dtype=np.int64),
        base=np.arange(len(kind), dtype=np.int64),
        first=np.array(first, dtype=np.int64),
        size=np.array([size_of(s) for s in shapes]),
    )


def rings_in_blocks(edges: Sequence[Floats], boxes: Floats) -> Rings:
    """Pack the edges of variants, and the boxes of their blocks."""
    blocks = [np.array([_block_box(e[k : k + BLOCK]) for k in range(0, len(e), BLOCK)]) for e in edges]
    return Rings(np.ascontiguousarray(np.vstack(edges)), _starts(edges), boxes, np.vstack(blocks), _starts(blocks))


def _block_box(edges: Floats) -> Floats:
    points = edges.reshape(-1, 2)
    return np.concatenate([points.min(axis=0), points.max(axis=0)])


def _starts(groups: Sequence[Floats]) -> Ints:
    ends = np.cumsum([len(g) for g in groups])
    return np.column_stack([ends - [len(g) for g in groups], ends]).astype(np.int64)
