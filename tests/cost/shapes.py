"""Parts, sheets and layouts of a few numbers."""

from decimal import Decimal

import numpy as np

from flatprep.geom import bulge
from flatprep.job.values import Stock
from flatprep.model.drawing import Contour, Part
from flatprep.model.layout import Layout, Placement, SheetLayout
from flatprep.profile.material_load import load_material


def ring(*points):
    """A closed contour of straight sides."""
    return Contour(np.array([(x, y, 0.0) for x, y in points], dtype=np.float64))


def rectangle(name, width, height, holes=(), at=(0.0, 0.0)):
    """A rectangle with round holes (x, y, diameter), moved by `at`."""
    x, y = at
    outer = ring((x, y), (x + width, y), (x + width, y + height), (x, y + height))
    rims = tuple(
        Contour(bulge.reverse(bulge.circle(x + hx, y + hy, d / 2.0), closed=True), ("",)) for hx, hy, d in holes
    )
    return Part(name, outer, rims)


def disc(name, diameter, bore=0.0, at=(0.0, 0.0)):
    """A round part with a round bore."""
    hole = (Contour(bulge.reverse(bulge.circle(*at, bore / 2.0), closed=True)),) if bore else ()
    return Part(name, Contour(bulge.circle(*at, diameter / 2.0)), hole)


def stock(name, price=None, material="mild-steel", thickness=3.0, length=1000.0, width=500.0, metre=None):
    """Stock with a price in a text, or None."""
    return Stock(
        name, load_material(material), thickness, length, width,
        price_per_sheet=None if price is None else Decimal(price),
        price_per_metre=None if metre is None else Decimal(metre),
    )  # fmt: skip


def sheet(of, *names, used=None, length=None):
    """A sheet of a stock with parts of these names (where they lie does not matter)."""
    wide = used if of.length_mm is None else (length or of.length_mm)
    outline = np.array([(0, 0), (wide, 0), (wide, of.width_mm), (0, of.width_mm)], dtype=np.float64)
    placed = tuple(Placement(name, n, 0.0, False, 0.0, 0.0) for n, name in enumerate(names, 1))
    return SheetLayout(of.name, of.material.id, of.thickness_mm, outline, (), used or wide, 0.0, placed)


def layout(*sheets):
    """A layout of these sheets."""
    return Layout(3.0, 8.0, tuple(sheets))
