"""An untidy drawing made clean: joined, without doubles, arcs for chords, flat, in mm, on layers of its own."""

from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path
from tempfile import TemporaryDirectory

import numpy as np
import shapely

from flatprep.drawing.read import ReadOptions, read
from flatprep.drawing.tidy import tidy
from flatprep.drawing.write import CUT, NOTE, clean_drawing
from flatprep.geom import bulge
from flatprep.geom.bulge import Floats, points_along
from flatprep.model.drawing import Contour, Curve, Drawing, Part, Text
from flatprep.model.finding import Finding
from flatprep.repair.rearc import round_part
from flatprep.repair.reliefs import relieve_part
from flatprep.repair.slots import resize_part
from flatprep.repair.told import changes_of, left_of, rounded_change, stands_on_part
from flatprep.repair.values import Change, Repaired, RepairOptions

_DECIMALS = 6
"""Coordinates are written to a nanometre, so that reading them again gives the same figures."""
_ROUNDS = 5
_ON_LINE_MM = 0.005
_TEXT_MM = 2.5
"""Height of a text that names none."""


def repair(path: Path, options: RepairOptions | None = None) -> Repaired:
    """Make a clean drawing out of an untidy one; the file itself is only read.

    Parameters
    ----------
    path
        A DXF file.
    options
        See `RepairOptions`.

    Returns
    -------
    Repaired
        Its text, repaired once more, is the same text.

    Raises
    ------
    DrawingError
        When the file cannot be read at all.
    """
    options = options or RepairOptions()
    drawing = read(path, ReadOptions(options.units, options.roles, options.tol))
    first = _once(drawing, options)
    # reading the result again may show more, such as a second border within a border: until nothing changes
    last, changes = first, list(first.changes)
    for _ in range(_ROUNDS):
        again = _once(_reread(last.text, path.name, options), options)
        if again.text == last.text:
            break
        changes += again.changes
        last = again
    known = {_key(f) for f in first.left}
    left = (*first.left, *(f for f in last.left if _key(f) not in known))
    return replace(first, file=str(path), text=last.text, changes=tuple(changes), left=left, after=last.after)


def _key(finding: Finding) -> tuple[str, tuple[float, ...]]:
    return finding.rule, tuple(round(v, 3) for v in finding.at or ())


def _reread(text: str, name: str, options: RepairOptions) -> Drawing:
    with TemporaryDirectory(prefix="flatprep-") as folder:
        aside = Path(folder) / name
        aside.write_text(text, encoding="utf-8")
        return read(aside, ReadOptions(tol=options.tol))


def _once(drawing: Drawing, options: RepairOptions) -> Repaired:
    changes = list(changes_of(drawing, options.gap_mm))
    left = list(left_of(drawing, options.gap_mm))
    parts = []
    for part in drawing.parts:
        rounded, told = round_part(part, options.rounding)
        changes += map(rounded_change, told)
        asked, more, refused = _as_asked(rounded, options, _fixed(drawing, part, options.gap_mm))
        changes, left = changes + more, left + refused
        parts.append(asked)
    lines = []
    for curves in ([c for p in parts for c in p.marks], [c for p in parts for c in p.bends]):
        single, faults = tidy(curves, options.tol)
        lines.append([_curve_on_grid(c) for c in single])
        changes += [Change("double", "a mark or bend line drawn twice", f.at, handles=f.handles) for f in faults]
    cut, loose = _cut(drawing, parts, options.gap_mm)
    texts = [_own_layer(t, drawing) for t in drawing.texts]
    text = clean_drawing(cut, [_curve_on_grid(c) for c in loose], lines[0], lines[1], texts)
    return Repaired(drawing.file, text, drawing.units, tuple(changes), tuple(left), drawing.parts, tuple(parts))


def _as_asked(part: Part, options: RepairOptions, fixed: set[int]) -> tuple[Part, list[Change], list[Finding]]:
    """Resize slots, then open corners, where that is asked for."""
    changes: list[Change] = []
    left: list[Finding] = []
    if options.slots is not None:
        part, changes, left = resize_part(part, options.slots, fixed)
    if options.relief is not None:
        part, opened, refused = relieve_part(part, options.relief, fixed)
        changes, left = changes + opened, left + refused
    return part, changes, left


def _fixed(drawing: Drawing, part: Part, gap_mm: float) -> set[int]:
    """Contours of a part that are written as they were drawn: open ones, and those that cross themselves."""
    crossing = _rings(drawing.crossing)
    return {k for k, c in enumerate(part.contours) if _open_pieces(c, gap_mm) or _lies_on(c, crossing)}


def _rings(contours: Sequence[Contour]) -> list[shapely.LinearRing]:
    return [shapely.LinearRing(points_along(c.xyb, closed=True, chord_mm=0.002)) for c in contours]


def _cut(drawing: Drawing, rounded: Sequence[Part], gap_mm: float) -> tuple[list[Contour], list[Curve]]:
    """Sort into closed contours, inner before outer, and open lines; what crosses itself stays as it was drawn."""
    crossing = _rings(drawing.crossing)
    closed: list[Contour] = []
    loose = list(drawing.loose)
    by_depth = sorted(zip(drawing.parts, rounded, strict=True), key=lambda pair: -pair[0].depth)
    for drawn, clean in by_depth:
        for old, new in zip((*drawn.holes, drawn.outer), (*clean.holes, clean.outer), strict=True):
            open_pieces = _open_pieces(old, gap_mm)
            if open_pieces:
                loose += open_pieces
            elif not _lies_on(old, crossing):
                closed.append(_on_grid(new))
    return closed + [_on_grid(c) for c in drawing.crossing], loose


def _open_pieces(contour: Contour, gap_mm: float) -> list[Curve]:
    """Return the open lines of a contour that the reader bridged over wide gaps, none where it closes."""
    xyb, n = contour.xyb, len(contour.xyb)
    if "" not in contour.handles or len(contour.handles) != n:
        return []
    step = np.hypot(*(np.roll(xyb[:, :2], -1, axis=0) - xyb[:, :2]).T)
    gaps = [k for k in range(n) if not contour.handles[k] and xyb[k, 2] == 0.0 and step[k] > gap_mm]
    pieces = []
    for gap, following in zip(gaps, gaps[1:] + gaps[:1], strict=True):
        rows = np.arange(gap + 1, gap + 2 + (following - gap - 1) % n) % n
        piece = xyb[rows].copy()
        piece[-1, 2] = 0.0
        pieces.append(Curve(piece, closed=False, layer=CUT))
    return pieces


def _lies_on(contour: Contour, lines: Sequence[shapely.LinearRing]) -> bool:
    if not lines:
        return False
    probe = shapely.points(points_along(contour.xyb, closed=True, chord_mm=0.002))
    return any(bool((shapely.distance(probe, line) <= _ON_LINE_MM).all()) for line in lines)


def _own_layer(text: Text, drawing: Drawing) -> Text:
    """Put a text on NOTE; one that may have been meant to be cut stays with the cut lines."""
    layer = CUT if stands_on_part(drawing, text) else NOTE
    x, y = (round(v, _DECIMALS) for v in text.at)
    return replace(text, layer=layer, at=(x, y), height_mm=round(text.height_mm, _DECIMALS) or _TEXT_MM)


def _on_grid(contour: Contour) -> Contour:
    return replace(contour, xyb=_rounded(contour.xyb, closed=True))


def _curve_on_grid(curve: Curve) -> Curve:
    return replace(curve, xyb=_rounded(curve.xyb, closed=curve.closed))


def _rounded(xyb: Floats, *, closed: bool) -> Floats:
    """Return the polyline with its coordinates on the grid; a full circle gets its centre and radius there."""
    circle = bulge.as_circle(xyb) if closed else None
    if circle is not None:
        whole = bulge.circle(*(round(v, _DECIMALS) for v in circle))
        return whole if bulge.signed_area(xyb) > 0.0 else bulge.reverse(whole, closed=True)
    out = xyb.copy()
    out[:, :2] = np.round(xyb[:, :2], _DECIMALS) + 0.0
    return out
