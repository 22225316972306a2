"""The one DXF writer: sheets with their parts, and single parts that were changed.

Layers: CUT the contours, each one closed LWPOLYLINE or CIRCLE, inner before outer; MARK what is only marked; SHEET
the border; NOTE labels and bend lines, never cut. All in one neutral grey, told apart by line styles. The same
layout gives the same bytes: no times and no random ids are written.
"""

import io
import re
from collections.abc import Iterable, Mapping, Sequence
from functools import lru_cache
from threading import get_ident

import numpy as np
from ezdxf._options import options
from ezdxf.document import Drawing as Document
from ezdxf.enums import TextEntityAlignment
from ezdxf.lldxf.const import DXF12
from ezdxf.lldxf.tagwriter import TagWriter
from ezdxf.version import __version__ as ezdxf_version

from flatprep.drawing.forms import USUAL, SheetForm
from flatprep.drawing.order import cutting_order
from flatprep.drawing.words import NO_WORDS, Words, identity_lines
from flatprep.geom.bulge import Floats, Similarity
from flatprep.geom.polygons import inner_point
from flatprep.model.drawing import Contour, Curve, Part, Text
from flatprep.model.layout import SheetLayout
from flatprep.model.tab import NO_TABS, Tab, tab_stroke

CUT, MARK, BEND, SHEET, NOTE = "CUT", "MARK", "BEND", "SHEET", "NOTE"
GREY = 8
"""AutoCAD colour index of a neutral grey."""
STYLES: Mapping[str, tuple[float, ...]] = {
    "FP_DASH": (9.0, 6.0, -3.0),
    "FP_DASHDOT": (14.0, 9.0, -2.0, 1.0, -2.0),
    "FP_DOT": (3.0, 0.5, -2.5),
}
"""Line styles as DXF patterns: total length, then dashes and gaps, mm."""
STYLE_OF = {CUT: "CONTINUOUS", MARK: "FP_DASH", BEND: "FP_DASHDOT", SHEET: "FP_DASHDOT", NOTE: "FP_DOT"}
_ALWAYS_THERE = ("0", "Defpoints")
"""Layers that ezdxf adds."""
_NO_ENTITIES = "  0\nSECTION\n  2\nENTITIES\n  0\nENDSEC\n"
MM_CODE = 4
"""$INSUNITS of millimetres."""
LEAST_TEXT_MM, MOST_TEXT_MM, TEXT_SHARE = 1.5, 10.0, 0.12
SMALL_TEXT = 0.5
"""Height of the second line of a label over that of the first."""


def sheet_drawing(
    sheet: SheetLayout,
    parts: Mapping[str, Part],
    *,
    words: Words = NO_WORDS,
    form: SheetForm = USUAL,
    tabs: Mapping[str, Sequence[Tab]] = NO_TABS,
) -> str:
    """DXF text of a sheet: its border, every part in the order of cutting, labels.

    Parameters
    ----------
    sheet
    parts
        True shapes by the names that the placements use.
    words
        What is written beside the parts' names.
    form
        The usual one, or one that a cutter asks for.
    tabs
        Holding tabs by part: their places are noted by short strokes across the outline, the contours stay whole.
    """
    if form.cut_only:
        return _contours_alone(sheet, parts, form)
    doc = _document((CUT, MARK, SHEET, NOTE), form.version)
    for ring in (sheet.outline, *sheet.holes):
        _polyline(doc, SHEET, np.column_stack([ring, np.zeros(len(ring))]), closed=True)
    for index in cutting_order(sheet, parts):
        placement = sheet.placements[index]
        part, motion = parts[placement.part], placement.motion
        _part(doc, part, motion)
        for etched in words.etched.get((placement.part, placement.mirrored), ()):
            _curve(doc, MARK, etched, motion)
        for tab in tabs.get(placement.part, ()):
            _curve(doc, NOTE, tab_stroke(tab), motion)
        _label(doc, part, motion, (f"{placement.part} {placement.copy}", words.identity.get(placement.part, "")))
    height = min(MOST_TEXT_MM, max(LEAST_TEXT_MM, float(np.ptp(sheet.outline, axis=0).max()) / 80.0))
    left, low = (float(v) for v in sheet.outline.min(axis=0))
    for n, line in enumerate((*words.title, *identity_lines(sheet, words.identity)), start=1):
        _text(doc, line, (left, low - 2.0 * n * height), height)
    return _written(doc)


def _contours_alone(sheet: SheetLayout, parts: Mapping[str, Part], form: SheetForm) -> str:
    doc = _document((CUT,), form.version)
    for index in cutting_order(sheet, parts):
        placement = sheet.placements[index]
        part = parts[placement.part]
        for contour in (*part.holes, part.outer):
            _contour(doc, contour, placement.motion)
    return _written(doc)


def lines_drawing(lines: Iterable[Curve]) -> str:
    """DXF text of cut lines alone, closed or open, in the order of cutting; sheet coordinates, mm."""
    doc = _document((CUT,))
    for line in lines:
        if line.closed:
            _contour(doc, Contour(line.xyb), Similarity())
        else:
            _curve(doc, CUT, line, Similarity())
    return _written(doc)


def part_drawing(parts: Part | Sequence[Part], *, notes: Sequence[str] = ()) -> str:
    """DXF text of parts at their own coordinates, mm, with `notes` written under them."""
    every = [parts] if isinstance(parts, Part) else list(parts)
    doc = _document((CUT, MARK, BEND, NOTE))
    for part in every:
        _part(doc, part, Similarity(), bends=BEND)
    if notes and every:
        left, low = (min(p.outer.bounds[k] for p in every) for k in (0, 1))
        height = min(MOST_TEXT_MM, max(LEAST_TEXT_MM, TEXT_SHARE * min(min(p.size_mm) for p in every)))
        for n, line in enumerate(notes, start=1):
            _text(doc, line, (left, low - 2.0 * n * height), height)
    return _written(doc)


def clean_drawing(
    cut: Sequence[Contour],
    loose: Sequence[Curve],
    marks: Sequence[Curve],
    bends: Sequence[Curve],
    texts: Sequence[Text],
) -> str:
    """DXF text of an untidy drawing made clean, mm, everything at its own coordinates.

    Parameters
    ----------
    cut, loose
        Closed contours and open lines for layer CUT.
    marks, bends
        Lines for layers MARK and BEND.
    texts
        Each on the layer it names.
    """
    doc = _document(tuple(dict.fromkeys((CUT, MARK, BEND, NOTE, *(t.layer for t in texts)))))
    for contour in cut:
        _contour(doc, contour, Similarity())
    for layer, curves in ((CUT, loose), (MARK, marks), (BEND, bends)):
        for curve in curves:
            _curve(doc, layer, curve, Similarity())
    for text in texts:
        at = {"layer": text.layer, "insert": text.at, "rotation": text.turn_deg}
        if "\n" in text.text:
            words = text.text.replace("\n", "\\P")
            doc.modelspace().add_mtext(words, dxfattribs={**at, "char_height": text.height_mm})
        else:
            doc.modelspace().add_text(text.text, height=text.height_mm, dxfattribs=at)
    return _written(doc)


def border_drawing(outline: Floats, holes: Sequence[Floats] = (), *, notes: Sequence[str] = ()) -> str:
    """DXF text of a remnant's border, to be given as `outline` of stock: contours on CUT, `notes` beside them.

    Parameters
    ----------
    outline : ndarray, shape (n, 2) or (n, 3)
        Points, or a bulge polyline, mm.
    """
    doc = _document((CUT, NOTE))
    for ring in (*holes, outline):
        points = ring if ring.shape[1] == 3 else np.column_stack([ring, np.zeros(len(ring))])
        _polyline(doc, CUT, points, closed=True)
    left, low = (float(v) for v in outline[:, :2].min(axis=0))
    for n, line in enumerate(notes, start=1):
        _text(doc, line, (left, low - 20.0 * n), MOST_TEXT_MM)
    return _written(doc)


def _document(layers: Iterable[str], version: str = USUAL.version) -> Document:
    """Return an empty document, to be written before the thread asks for the next: it is the same one for each kind."""
    doc, handle = _blank(tuple(layers), version, get_ident())
    doc.modelspace().delete_all_entities()
    doc.entitydb.purge()
    doc.entitydb.handles.reset(handle)
    return doc


@lru_cache(maxsize=8)
def _blank(layers: tuple[str, ...], version: str, _thread: int) -> tuple[Document, str]:
    """Make a document that one thread draws on again and again, and its first free handle: making one takes long."""
    doc = _new_document(layers, version)
    return doc, str(doc.entitydb.handles)


def _new_document(layers: Iterable[str], version: str) -> Document:
    doc = Document.new(version)
    if doc.dxfversion > DXF12:  # older files know no unit
        doc.header["$INSUNITS"] = MM_CODE
        doc.header["$MEASUREMENT"] = 1
    doc.ezdxf_metadata()["CREATED_BY_EZDXF"] = ezdxf_version  # without the time that stands there
    for name, pattern in STYLES.items():
        doc.linetypes.add(name, pattern=list(pattern), description=name)
    for name in layers:
        doc.layers.add(name, color=GREY, linetype=STYLE_OF[name])
    doc.update_all()  # else handles are given out again when it is written
    return doc


def _part(doc: Document, part: Part, motion: Similarity, bends: str = NOTE) -> None:
    """Draw a part; on a sheet its bend lines are notes, for a cutter knows no layer for them."""
    for contour in (*part.holes, part.outer):
        _contour(doc, contour, motion)
    for curve in part.marks:
        _curve(doc, MARK, curve, motion)
    for curve in part.bends:
        _curve(doc, bends, curve, motion)


def _contour(doc: Document, contour: Contour, motion: Similarity) -> None:
    if contour.circle is None:
        _polyline(doc, CUT, motion.polyline(contour.xyb), closed=True)
        return
    x, y, radius = contour.circle
    centre = motion.points(np.array([[x, y]]))[0]
    doc.modelspace().add_circle((float(centre[0]), float(centre[1])), radius, dxfattribs={"layer": CUT})


def _curve(doc: Document, layer: str, curve: Curve, motion: Similarity) -> None:
    _polyline(doc, layer, motion.polyline(curve.xyb), closed=curve.closed)


def _polyline(doc: Document, layer: str, xyb: Floats, *, closed: bool) -> None:
    points = [(float(x), float(y), float(b)) for x, y, b in xyb]
    draw = doc.modelspace().add_lwpolyline if doc.dxfversion > DXF12 else doc.modelspace().add_polyline2d
    draw(points, format="xyb", close=closed, dxfattribs={"layer": layer})


@lru_cache(maxsize=1024)
def _label_point(part: Part) -> tuple[float, float]:
    """Point of a part that takes its label, found once for all pieces of it."""
    return inner_point(part.outer.xyb, [h.xyb for h in part.holes], chord_mm=0.1)


def _label(doc: Document, part: Part, motion: Similarity, lines: tuple[str, str]) -> None:
    """Write a piece's name, and in small letters under it which drawing it is of."""
    (x, y) = (float(v) for v in motion.points(np.array([_label_point(part)]))[0])
    height = min(MOST_TEXT_MM, max(LEAST_TEXT_MM, TEXT_SHARE * min(part.size_mm)))
    _text(doc, lines[0], (x, y), height, middle=True)
    if lines[1]:
        _text(doc, lines[1], (x, y - height), SMALL_TEXT * height, middle=True)


def _text(doc: Document, words: str, at: tuple[float, float], height: float, *, middle: bool = False) -> None:
    text = doc.modelspace().add_text(words, height=height, dxfattribs={"layer": NOTE})
    text.set_placement(at, align=TextEntityAlignment.MIDDLE_CENTER if middle else TextEntityAlignment.LEFT)


def _written(doc: Document) -> str:
    """Text of a document of `_document`: what is drawn, between what all documents with these layers have in common.

    The latter, for which ezdxf takes most of its time, holds nothing of the entities but the first free handle.
    """
    layers = tuple(str(layer.dxf.name) for layer in doc.layers if layer.dxf.name not in _ALWAYS_THERE)
    before, between, after = _around(layers, doc.dxfversion)
    stream = io.StringIO()
    handles = doc.dxfversion > DXF12 or bool(doc.header.get("$HANDLING", 0))
    doc.entities.export_dxf(TagWriter(stream, dxfversion=doc.dxfversion, write_handles=handles))
    return f"{before}{doc.entitydb.handles}{between}{stream.getvalue()}{after}"


@lru_cache(maxsize=64)
def _around(layers: tuple[str, ...], version: str) -> tuple[str, str, str]:
    """Text of an empty document before its first free handle, from there to the entities, and after these."""
    head, after = _whole(_new_document(layers, version)).split(_NO_ENTITIES)
    before, between = re.split(r"(?<=\$HANDSEED\n  5\n)[0-9A-F]+", head)
    return before, between, after


def _whole(doc: Document) -> str:
    """Text of a document as ezdxf writes it: with a fixed date, no random ids, and nothing in the order of a set."""
    doc.classes.add_required_classes(doc.dxfversion)
    doc.classes.classes = dict(sorted(doc.classes.classes.items()))
    stream = io.StringIO()
    before = options.write_fixed_meta_data_for_testing
    options.write_fixed_meta_data_for_testing = True
    try:
        doc.write(stream)
    finally:
        options.write_fixed_meta_data_for_testing = before
    return stream.getvalue()
