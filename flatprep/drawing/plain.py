"""Lines, arcs, circles, polylines and splines read straight from a file's tags, those of one make-up together.

ezdxf makes an object of every entity and of every tag in it, which takes longer than all that is asked of a plain line
afterwards. Entities with the same group codes in the same order are read here column by column. A code or a value out
of the ordinary leaves all entities of that make-up to ezdxf, which knows what it means.
"""

from bisect import bisect_right
from collections.abc import Callable, Sequence
from itertools import pairwise, repeat
from typing import NamedTuple

import numpy as np

from flatprep.drawing.columns import CLASS, GROUP, Codes, Columns, NotPlainError, in_order
from flatprep.drawing.entities import (
    Shape,
    SplineData,
    UnusableEntityError,
    arc_shape,
    circle_shape,
    old_polyline_shape,
    polyline_shape,
)

_HEAD = {5, GROUP, 330}
_LOOKS = {6, 8, 48, 60, 62, 67, 284, 347, 348, 370, 380, 390, 420, 430, 440}
_SOLID = {39, 210, 220, 230}
_WORDS = {0, 5, 6, 8, CLASS, GROUP, 330, 347, 348, 390, 430}
_BARE = {0, 8, 10, 20, 30, 11, 21, 31, 40, 50, 51}


class _Make(NamedTuple):
    """Codes of a kind of entity: those it must hold, those it may hold, and those that it may hold again and again."""

    needed: set[int]
    allowed: set[int]
    repeated: frozenset[int] = frozenset()
    classes: int | None = None
    """How many classes it must have, where ezdxf reads class by class."""


_MAKES = {
    "LINE": _Make({10, 20, 11, 21}, {30, 31} | _SOLID),
    "CIRCLE": _Make({10, 20, 40}, {30} | _SOLID),
    "ARC": _Make({10, 20, 40, 50, 51}, {30} | _SOLID),
    "LWPOLYLINE": _Make({10, 20}, {38, 43, 70, 90} | _SOLID, frozenset({10, 20, 30, 40, 41, 42, 91}), 2),
    "SPLINE": _Make(
        {10, 20, 40},
        {12, 22, 32, 13, 23, 33, 42, 43, 44, 70, 71, 72, 73, 74, 210, 220, 230},
        frozenset({10, 20, 30, 11, 21, 31, 40, 41}),
        2,
    ),
    "POLYLINE": _Make(set(), {10, 20, 30, 40, 41, 66, 70, 71, 72, 73, 74, 75} | _SOLID),
    "VERTEX": _Make({10, 20}, {30, 40, 41, 42, 50, 70, 91}),
    "SEQEND": _Make(set(), set()),
}
KINDS = frozenset(_MAKES) - {"VERTEX", "SEQEND"}
BY_CLASSES = frozenset(kind for kind, make in _MAKES.items() if make.classes)
"""Kinds that are read in another way in R12 and before."""


class Plain(NamedTuple):
    """An entity of model space; `place` is the number of its first record in the file."""

    place: int
    kind: str
    drawn: Shape | SplineData
    handle: str
    layer: str
    color: int
    linetype: str
    owner: str


def plain_entities(
    kind: str, codes: Codes, places: Sequence[int], starts: Sequence[int], values: Sequence[str]
) -> list[Plain]:
    """Read entities of one make-up.

    Parameters
    ----------
    kind
        One of `KINDS`.
    codes
        Group codes of each; vertices and the end of an old polyline follow it.
    places
        Numbers of their first records.
    starts, values
        See `Columns`.

    Returns
    -------
    list of Plain
        Empty where anything about them is not plain.
    """
    try:
        columns = Columns(codes, starts, values)
        drawn = _old_polylines(columns) if kind == "POLYLINE" else _DRAWN[kind](_checked(kind, columns))
        own = columns.part(0, (*codes[1:], 0).index(0) + 1)
        if any(own.numbers(67)) or any(own.numbers(60)):
            return []  # it lies in paper space, or is not shown
        looks = own.texts(8, "0"), map(int, own.numbers(62, 256.0)), own.texts(6, "BYLAYER")
        return list(map(Plain, places, repeat(kind), drawn, own.texts(5, ""), *looks, own.texts(330, "")))
    except (NotPlainError, UnusableEntityError, ValueError, OverflowError):
        return []


def is_bare(codes: Codes) -> bool:
    """Whether an entity says where it lies and on which layer, and nothing else."""
    return _BARE.issuperset(codes)


def is_whole(kind: str, codes: Codes) -> bool:
    """Whether an entity has all codes that its kind must have."""
    return kind not in _MAKES or _MAKES[kind].needed.issubset(codes)


def _checked(kind: str, columns: Columns) -> Columns:
    """Refuse codes that are unknown, missing, there twice or out of their place, and numbers that are none."""
    make, codes = _MAKES[kind], columns.codes
    known = _HEAD | _LOOKS | make.needed | make.allowed | make.repeated
    single = [c for c in codes if c not in make.repeated and c not in (CLASS, GROUP)]
    reordered = kind == "LINE" and is_bare(codes)
    if not (
        known.issuperset(set(codes) - {0, CLASS})
        and make.needed.issubset(codes)
        and len(set(single)) == len(single)
        and (reordered or in_order(codes))
    ):
        raise NotPlainError
    _check_classes(make, codes)
    for code in set(codes) - _WORDS:
        columns.every(code)
    if any(int(handle, 16) <= 0 for handle in columns.texts(5, "1")):
        raise NotPlainError
    return columns


def _check_classes(make: _Make, codes: Codes) -> None:
    classes = [k for k, code in enumerate(codes) if code == CLASS]
    first = classes[0] if classes else len(codes)
    if not _HEAD.isdisjoint(codes[first:]):
        raise NotPlainError
    if make.classes is not None:
        if len(classes) != make.classes:
            raise NotPlainError
        if not (_HEAD.issuperset(codes[1:first]) and _LOOKS.issuperset(codes[first + 1 : classes[-1]])):
            raise NotPlainError


def _lines(columns: Columns) -> list[Shape]:
    a, z = (np.array(list(columns.points(code))) for code in (10, 11))
    rows = np.zeros((len(columns), 2, 3))
    rows[:, 0, :2], rows[:, 1, :2] = a[:, :2], z[:, :2]
    heights = np.sort(np.stack([a[:, 2], z[:, 2]], axis=1)).tolist()
    return [Shape(row, closed=False, z_low=low, z_high=high) for row, (low, high) in zip(rows, heights, strict=True)]


def _circles(columns: Columns) -> list[Shape]:
    return list(map(circle_shape, columns.points(10), columns.numbers(40), columns.flips()))


def _arcs(columns: Columns) -> list[Shape]:
    angles = columns.numbers(50), columns.numbers(51)
    return list(map(arc_shape, columns.points(10), columns.numbers(40), *angles, columns.flips()))


def _polylines(columns: Columns) -> list[Shape]:
    xs = [k for k, code in enumerate(columns.codes) if code == 10]
    rows = np.zeros((len(columns), len(xs), 3))
    rows[:, :, 0], rows[:, :, 1] = np.transpose(columns.every(10)), np.transpose(columns.every(20))
    bulges = [k for k, code in enumerate(columns.codes) if code == 42]
    for k, values in zip(bulges, columns.every(42), strict=True):
        if k > xs[0]:  # it belongs to the vertex that it follows
            rows[:, bisect_right(xs, k) - 1, 2] = values
    flags = map(int, columns.numbers(70))
    return list(map(polyline_shape, rows, flags, columns.numbers(38), columns.flips()))


def _splines(columns: Columns) -> list[SplineData]:
    x, y = np.array(columns.every(10)), np.array(columns.every(20))
    z = np.array(columns.every(30)) if 30 in columns else np.zeros_like(x)
    if z.shape != x.shape:
        raise NotPlainError  # fit points may have z where control points have none
    weights = columns.every(41)
    degrees = map(int, columns.numbers(71, 3.0))
    control = np.stack([x, y, z], axis=2)
    each = zip(*columns.every(40), strict=True), zip(*weights, strict=True) if weights else repeat(())
    return list(map(SplineData, np.transpose(control, (1, 0, 2)), *each, degrees))


def _old_polylines(columns: Columns) -> list[Shape]:
    """Polylines whose vertices are entities of their own."""
    heads = [*(k for k, code in enumerate(columns.codes) if code == 0), len(columns.codes)]
    head, *vertices, end = (columns.part(a, z) for a, z in pairwise(heads))
    _checked("POLYLINE", head)
    _checked("SEQEND", end)
    rows = np.zeros((len(columns), len(vertices), 4))
    for k, vertex in enumerate(vertices):
        _checked("VERTEX", vertex)
        if any(int(flag) & 16 for flag in vertex.numbers(70)):
            raise NotPlainError  # a point of a spline's frame draws nothing
        rows[:, k, :3], rows[:, k, 3] = list(vertex.points(10)), vertex.numbers(42)
    flags = [int(flag) for flag in head.numbers(70)]
    if any(flag & (16 | 64) for flag in flags):
        raise NotPlainError  # a mesh
    heights = [z for _, _, z in head.points(10)] if 10 in head else repeat(None)
    planes = head.points(210) if 210 in head else repeat((0.0, 0.0, 1.0))
    return list(map(old_polyline_shape, rows, flags, heights, planes))


_DRAWN: dict[str, Callable[[Columns], Sequence[Shape | SplineData]]] = {
    "LINE": _lines,
    "CIRCLE": _circles,
    "ARC": _arcs,
    "LWPOLYLINE": _polylines,
    "SPLINE": _splines,
}
