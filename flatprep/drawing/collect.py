"""Everything a document holds, sorted: curves in mm with their roles, texts, and what was left out."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from itertools import islice
from math import isfinite
from typing import Any

import numpy as np
from ezdxf.document import Drawing as DxfDocument

from flatprep.base.errors import DrawingError
from flatprep.base.names import printable
from flatprep.drawing.entities import Shape, UnusableEntityError, shapes_of
from flatprep.drawing.explode import INVISIBLE, Loose, block_fault, explode
from flatprep.drawing.limits import ReadLimits
from flatprep.drawing.load import Loaded
from flatprep.drawing.roles import Guess, role_of
from flatprep.model.drawing import Curve, Fault, Role, Simplified, Skipped, Text

Dxf = Any
_TEXTS = {"TEXT", "MTEXT", "ATTRIB", "ATTDEF"}
NOT_CUT = {
    "DIMENSION": "a dimension",
    "LEADER": "a leader",
    "MULTILEADER": "a leader",
    "MLEADER": "a leader",
    "HATCH": "a hatch",
    "POINT": "a point",
    "VIEWPORT": "a view",
    "IMAGE": "an image: not opened",
    "XLINE": "an endless line",
    "RAY": "an endless line",
    "ATTDEF": "a text template",
    "TOLERANCE": "a tolerance frame",
    "ACAD_TABLE": "a table",
    "WIPEOUT": "a mask",
    "OLE2FRAME": "an embedded document: not opened",
    "OLEFRAME": "an embedded document: not opened",
    "PDFUNDERLAY": "an underlay: not opened",
    "DWFUNDERLAY": "an underlay: not opened",
    "DGNUNDERLAY": "an underlay: not opened",
    INVISIBLE: "in the drawing, but not shown",
}
"""Kinds that draw no outline, and what they are."""
_DASH = 49
_AT_ONCE = 10_000
"""So many entities are taken apart before their curves are made, together."""
_OTHERS = frozenset(_TEXTS | {"INSERT"} | set(NOT_CUT))


@dataclass(slots=True)
class Collected:
    """What model space gave, in mm; filled while walking through it."""

    curves: list[tuple[Curve, Role]] = field(default_factory=list)
    texts: list[Text] = field(default_factory=list)
    skipped: list[Skipped] = field(default_factory=list)
    faults: list[Fault] = field(default_factory=list)
    roles: dict[str, Guess] = field(default_factory=dict)
    """Of layers: what is cut of one goes before what is not."""
    linetypes: dict[tuple[str, str], Guess] = field(default_factory=dict)
    """Layer and linetype -> what its lines are for, where they are not cut."""
    heights: set[float] = field(default_factory=set)
    """In drawing units."""
    vertical: int = 0
    simplified: list[Simplified] = field(default_factory=list)


@dataclass(frozen=True, slots=True)
class CollectOptions:
    """What the user said: mm of a drawing unit, roles of layers, and the caps."""

    mm_per_unit: float
    roles: Mapping[str, Role]
    curve_mm: float
    limits: ReadLimits


def collect(loaded: Loaded, options: CollectOptions) -> Collected:
    """Walk through model space.

    Raises
    ------
    DrawingError
        When a cap is passed, or a coordinate is out of all bounds.
    """
    out = Collected()
    document = loaded.document
    role = _Roles(document, options)
    vertices = 0
    walk = explode(loaded, options.limits)
    while some := list(islice(walk, _AT_ONCE)):
        vertices += _add(out, some, options, role)
        if vertices > options.limits.vertices:
            raise DrawingError(
                f"more than {options.limits.vertices} vertices", "export splines and curves as arcs, or coarser"
            )
    _drop_unbounded(out, options)
    _add_blocks(out, document, options.mm_per_unit)
    _add_paper_space(out, document)
    _tell_heights(out, options.mm_per_unit)
    return out


class _Roles:
    """Roles of layers and linetypes, each guessed once."""

    def __init__(self, document: DxfDocument, options: CollectOptions) -> None:
        self._off = {layer.dxf.name.lower() for layer in document.layers if layer.is_off() or layer.is_frozen()}
        self._said = options.roles
        self._patterns = {
            one.dxf.name.upper(): [tag.value for tag in one.pattern_tags.tags if tag.code == _DASH]
            for one in document.linetypes
        }
        self._known: dict[tuple[str, str], Guess] = {}

    def __call__(self, layer: str, linetype: str) -> Guess:
        key = layer, linetype
        if key not in self._known:
            off, pattern = layer.lower() in self._off, self._patterns.get(linetype, ())
            self._known[key] = role_of(*key, self._said, off=off, pattern=pattern)
        return self._known[key]


def _add(out: Collected, walked: Sequence[Loose], options: CollectOptions, role: _Roles) -> int:
    """Sort entities; returns how many vertices their curves have."""
    tol = options.curve_mm / options.mm_per_unit
    shapes = iter(shapes_of((loose.entity for loose in walked if loose.kind not in _OTHERS), tol))
    vertices = 0
    for loose in walked:
        if loose.kind not in _OTHERS:
            vertices += _add_curve(out, loose, next(shapes), options.mm_per_unit, role(loose.layer, loose.linetype))
        elif loose.kind in _TEXTS:
            _add_text(out, loose, options)
        elif loose.kind == "INSERT":
            out.skipped.append(_skip(loose, block_fault(loose.entity)))
        else:
            out.skipped.append(_skip(loose, NOT_CUT[loose.kind]))
    return vertices


def _add_curve(out: Collected, loose: Loose, shape: Shape | UnusableEntityError | None, k: float, guess: Guess) -> int:
    if not isinstance(shape, Shape):
        out.skipped.append(_skip(loose, "no line, arc or curve" if shape is None else f"unusable: {shape}"))
        return 0
    xyb = shape.xyb if k == 1.0 else shape.xyb * np.array([k, k, 1.0])
    if out.roles.setdefault(loose.layer, guess).role is not Role.CUT:
        out.roles[loose.layer] = guess
    if guess.role is not Role.CUT:
        out.linetypes.setdefault((loose.layer, loose.linetype), guess)
    if _stands_up(shape):
        out.vertical += 1
        return len(xyb)
    out.heights.add(shape.z_low)
    curve = Curve(xyb, shape.closed, loose.layer, loose.handle, loose.kind, loose.linetype, loose.color)
    out.curves.append((curve, guess.role))
    if loose.kind in ("SPLINE", "ELLIPSE"):
        out.simplified.append(Simplified(loose.kind, (float(xyb[0, 0]), float(xyb[0, 1])), loose.handle))
    return len(xyb)


def _drop_unbounded(out: Collected, options: CollectOptions) -> None:
    """Leave out curves with a coordinate that is no number or beyond all bounds; checked for all curves at once."""
    if not out.curves:
        return
    most = options.limits.coordinate_mm
    sizes = np.array([len(c.xyb) for c, _ in out.curves])
    rows = np.vstack([c.xyb for c, _ in out.curves])
    with np.errstate(invalid="ignore"):
        bad = ~((np.abs(rows[:, :2]) <= most).all(axis=1) & np.isfinite(rows[:, 2]))
    if not bad.any():
        return
    faulty = set(np.repeat(np.arange(len(sizes)), sizes)[bad].tolist())
    for index in sorted(faulty):
        curve = out.curves[index][0]
        reason = f"unusable: a coordinate is no number, or more than {most / 1e6:g} km from the origin"
        out.skipped.append(Skipped(curve.kind, curve.layer, curve.handle, reason))
    out.curves[:] = [pair for index, pair in enumerate(out.curves) if index not in faulty]


def _stands_up(shape: Shape) -> bool:
    """Tell whether a curve runs along z: an upright edge of a body drawn as wires."""
    rise = shape.z_high - shape.z_low
    return rise > 1e-6 and float(np.ptp(shape.xyb[:, :2], axis=0).max()) < 0.01 * rise


def _tell_heights(out: Collected, mm_per_unit: float) -> None:
    levels = sorted({round(z * mm_per_unit, 3) for z in out.heights})
    if out.vertical:
        detail = f"{out.vertical} upright edges: a body drawn as wires; its outline seen from above is taken"
    elif len(levels) > 1:
        detail = f"lines on {len(levels)} heights, z {levels[0]:g} to {levels[-1]:g} mm; all are taken as z = 0"
    elif levels and abs(levels[0]) > 1e-3:
        detail = f"everything lies at z = {levels[0]:g} mm; taken as z = 0"
    else:
        return
    out.faults.append(Fault("off-plane", None, levels[-1] - levels[0] if levels else None, (), detail))


def _add_text(out: Collected, loose: Loose, options: CollectOptions) -> None:
    e: Dxf = loose.entity
    try:
        words = e.plain_text() if e.dxftype() == "MTEXT" else e.dxf.get("text", "")
        insert = e.dxf.insert
        if e.dxftype() != "MTEXT" and e.dxf.hasattr("extrusion"):
            insert = e.ocs().to_wcs(insert)
        height = float(e.dxf.get("char_height" if e.dxftype() == "MTEXT" else "height", 0.0))
        turn_deg = float(e.dxf.get("rotation", 0.0)) % 360.0
    except Exception:  # a damaged text must not cost the outlines
        out.skipped.append(_skip(loose, "an unreadable text"))
        return
    x, y = insert.x * options.mm_per_unit, insert.y * options.mm_per_unit
    if isfinite(x) and isfinite(y) and words.strip():
        size = height * options.mm_per_unit
        out.texts.append(
            Text(printable(words.strip()[:500]), (x, y), loose.layer, loose.handle, size, turn_deg=turn_deg)
        )


def _add_blocks(out: Collected, document: DxfDocument, mm_per_unit: float) -> None:
    for insert in document.modelspace().query("INSERT"):
        at = insert.dxf.get("insert", (0.0, 0.0, 0.0))
        place = (float(at[0]) * mm_per_unit, float(at[1]) * mm_per_unit)
        out.simplified.append(Simplified("INSERT", place, insert.dxf.handle or "", insert.dxf.get("name", "")))


def _add_paper_space(out: Collected, document: DxfDocument) -> None:
    for layout in document.layouts:
        if layout.is_modelspace:
            continue
        count = sum(1 for e in layout if e.dxftype() != "VIEWPORT")
        if count:
            out.skipped.append(
                Skipped("LAYOUT", "", "", f"{count} entities in paper space “{layout.name}”: only model space is cut")
            )


def _skip(loose: Loose, reason: str) -> Skipped:
    return Skipped(loose.kind, loose.layer, loose.handle, reason)
