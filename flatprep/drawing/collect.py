"""Everything a document holds, sorted: curves in mm with their roles, texts, and what was left out."""

from collections import Counter
from collections.abc import Mapping
from dataclasses import dataclass, field
from math import isfinite
from typing import Any

import numpy as np
from ezdxf.document import Drawing as DxfDocument

from flatprep.base.errors import DrawingError
from flatprep.drawing.entities import Shape, UnusableEntityError, shape_of
from flatprep.drawing.explode import Loose, explode
from flatprep.drawing.limits import ReadLimits
from flatprep.drawing.roles import Guess, role_of
from flatprep.model.drawing import Curve, Fault, Role, Skipped, Text

Dxf = Any
_TEXTS = {"TEXT", "MTEXT", "ATTRIB", "ATTDEF"}
_NOT_CUT = {
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
}


@dataclass(slots=True)
class Collected:
    """What model space gave, in mm; filled while walking through it."""

    curves: list[tuple[Curve, Role]] = field(default_factory=list)
    texts: list[Text] = field(default_factory=list)
    skipped: list[Skipped] = field(default_factory=list)
    faults: list[Fault] = field(default_factory=list)
    roles: dict[str, Guess] = field(default_factory=dict)
    heights: Counter[float] = field(default_factory=Counter)
    vertical: int = 0


@dataclass(frozen=True, slots=True)
class CollectOptions:
    """What the user said: mm of a drawing unit, roles of layers, and the caps."""

    mm_per_unit: float
    roles: Mapping[str, Role]
    curve_mm: float
    limits: ReadLimits


def collect(document: DxfDocument, options: CollectOptions) -> Collected:
    """Walk through model space.

    Raises
    ------
    DrawingError
        When a cap is passed, or a coordinate is out of all bounds.
    """
    out = Collected()
    off = {layer.dxf.name.lower() for layer in document.layers if layer.is_off() or layer.is_frozen()}
    vertices = 0
    for loose in explode(document, options.limits):
        kind = loose.entity.dxftype()
        if kind in _TEXTS:
            _add_text(out, loose, options)
        elif kind in _NOT_CUT:
            out.skipped.append(_skip(loose, _NOT_CUT[kind]))
        else:
            vertices += _add_curve(out, loose, options, off)
            if vertices > options.limits.vertices:
                raise DrawingError(
                    f"more than {options.limits.vertices} vertices", "export splines and curves as arcs, or coarser"
                )
    _add_paper_space(out, document)
    _tell_heights(out)
    return out


def _add_curve(out: Collected, loose: Loose, options: CollectOptions, off: set[str]) -> int:
    try:
        shape = shape_of(loose.entity, options.curve_mm / options.mm_per_unit)
    except UnusableEntityError as err:
        out.skipped.append(_skip(loose, f"unusable: {err}"))
        return 0
    if shape is None:
        out.skipped.append(_skip(loose, "no line, arc or curve"))
        return 0
    k = options.mm_per_unit
    xyb = shape.xyb if k == 1.0 else shape.xyb * np.array([k, k, 1.0])
    if float(np.abs(xyb[:, :2]).max()) > options.limits.coordinate_mm:
        out.skipped.append(_skip(loose, f"it lies more than {options.limits.coordinate_mm / 1e6:g} km from the origin"))
        return 0
    guess = role_of(loose.layer, loose.linetype, options.roles, off=loose.layer.lower() in off)
    out.roles.setdefault(loose.layer, guess)
    curve = Curve(xyb, shape.closed, loose.layer, loose.handle, loose.entity.dxftype(), loose.linetype, loose.color)
    if _stands_up(shape):
        out.vertical += 1
    else:
        out.heights[round(shape.z_low * k, 3)] += 1
        out.curves.append((curve, guess.role))
    return len(xyb)


def _stands_up(shape: Shape) -> bool:
    """Tell whether a curve runs along z: an upright edge of a body drawn as wires."""
    spread = float(np.ptp(shape.xyb[:, :2], axis=0).max())
    return shape.z_high - shape.z_low > 1e-6 and spread < 0.01 * (shape.z_high - shape.z_low)


def _tell_heights(out: Collected) -> None:
    levels = sorted(out.heights)
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
    except Exception:  # a damaged text must not cost the outlines
        out.skipped.append(_skip(loose, "an unreadable text"))
        return
    x, y = insert.x * options.mm_per_unit, insert.y * options.mm_per_unit
    if isfinite(x) and isfinite(y) and words.strip():
        out.texts.append(Text(words.strip()[:500], (x, y), loose.layer, loose.handle, height * options.mm_per_unit))


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
    return Skipped(loose.entity.dxftype(), loose.layer, loose.handle, reason)
