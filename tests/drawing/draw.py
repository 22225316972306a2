"""Drawings for tests, made with ezdxf."""

from collections.abc import Callable
from math import pi
from pathlib import Path

import ezdxf
from ezdxf.document import Drawing as DxfDocument
from ezdxf.layouts import BaseLayout

Paint = Callable[[BaseLayout], None]


def new(version: str = "R2010", unit: int = 4) -> DxfDocument:
    """An empty document in mm unless said otherwise."""
    doc = ezdxf.new(version)
    if version != "R12":
        doc.header["$INSUNITS"] = unit
    return doc


def save(doc: DxfDocument, folder: Path, name: str = "leaf.dxf") -> Path:
    path = folder / name
    doc.saveas(path)
    return path


def drawn(folder: Path, paint: Paint, version: str = "R2010", unit: int = 4, name: str = "leaf.dxf") -> Path:
    """A drawing whose model space `paint` filled."""
    doc = new(version, unit)
    paint(doc.modelspace())
    return save(doc, folder, name)


def box(msp: BaseLayout, x: float, y: float, w: float, h: float, **at: object) -> None:
    """A rectangle of four lines, in no particular order or direction."""
    corners = [(x, y), (x + w, y), (x + w, y + h), (x, y + h)]
    for a, b, flip in ((0, 1, 0), (3, 2, 0), (1, 2, 1), (3, 0, 1)):
        p, q = (corners[b], corners[a]) if flip else (corners[a], corners[b])
        msp.add_line(p, q, dxfattribs=at)


CIRCLE_10 = pi * 100.0


PLATE = 80 * 50 - CIRCLE_10
"""Area of `plate`, mm²."""


def plate(space):
    """Draw 80 x 50 with a hole of 20 in its middle."""
    box(space, 0, 0, 80, 50)
    space.add_circle((40, 25), 10)


def kinds(drawing):
    """Kinds of what a reading found."""
    return [f.kind for f in drawing.faults]
