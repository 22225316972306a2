"""Leaders: which texts they belong to, and where they point."""

from collections.abc import Iterator, Sequence
from dataclasses import replace
from math import hypot, isfinite
from typing import Any

from ezdxf.document import Drawing as DxfDocument
from ezdxf.lldxf.const import DXFError
from ezdxf.tools.text import plain_mtext

from flatprep.model.drawing import Text

Point = tuple[float, float]
NEAR_HEIGHTS = 3.0
"""A leader that names no text belongs to the one that its tail ends beside, so many letter heights away at the most."""
_DAMAGED = (AttributeError, DXFError, IndexError, TypeError, ValueError)


def with_leaders(texts: Sequence[Text], document: DxfDocument, mm_per_unit: float) -> tuple[Text, ...]:
    """Return the texts with the tips of their leaders, and the texts that leaders carry themselves.

    A damaged leader is passed over: its text then speaks of what is nearest.
    """
    out = list(texts)
    for tip, tail, handle in _leaders(document, mm_per_unit):
        k = _owner(out, tail, handle)
        if k is not None:
            out[k] = replace(out[k], points_to=(*out[k].points_to, tip))
    out += _carried(document, mm_per_unit)
    return tuple(out)


def _leaders(document: DxfDocument, mm_per_unit: float) -> Iterator[tuple[Point, Point, str]]:
    """Yield tip, tail and the handle of the text of each plain leader."""
    for entity in _of_type(document, "LEADER"):
        try:
            line = [_point(v, mm_per_unit) for v in entity.vertices]
            if len(line) >= 2:
                yield line[0], line[-1], str(entity.dxf.get("annotation_handle", "0"))
        except _DAMAGED:
            continue


def _owner(texts: Sequence[Text], tail: Point, handle: str) -> int | None:
    named = next((k for k, text in enumerate(texts) if text.handle and text.handle == handle), None)
    if named is not None or not texts:
        return named
    apart, k = min((hypot(text.at[0] - tail[0], text.at[1] - tail[1]), k) for k, text in enumerate(texts))
    return k if apart <= NEAR_HEIGHTS * texts[k].height_mm else None


def _carried(document: DxfDocument, mm_per_unit: float) -> Iterator[Text]:
    """Yield the texts of leaders that hold their own."""
    for entity in _of_type(document, "MULTILEADER", "MLEADER"):
        try:
            content = entity.context.mtext
            words = str(plain_mtext(content.default_content)).strip() if content else ""
            if not words:
                continue
            tips = [
                _point(ln.vertices[0], mm_per_unit) for ld in entity.context.leaders for ln in ld.lines if ln.vertices
            ]
            at, height = _point(content.insert, mm_per_unit), float(entity.context.char_height) * mm_per_unit
            yield Text(words[:500], at, entity.dxf.layer, entity.dxf.handle or "", height, tuple(tips))
        except _DAMAGED:
            continue


def _of_type(document: DxfDocument, *kinds: str) -> list[Any]:
    return [entity for entity in document.modelspace() if entity.dxftype() in kinds]


def _point(vertex: Any, mm_per_unit: float) -> Point:
    x, y = float(vertex[0]) * mm_per_unit, float(vertex[1]) * mm_per_unit
    if not (isfinite(x) and isfinite(y)):
        raise ValueError("a coordinate is no number")
    return x, y
