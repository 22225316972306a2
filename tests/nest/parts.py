"""Parts and asks that the tests of the nest share."""

import numpy as np

from flatprep.geom.bulge import circle, reverse
from flatprep.model.drawing import Contour, Part
from flatprep.nest.problem import Item, NestAsk, StockSheet


def polygon(name, points):
    return Part(name, Contour(np.array([[x, y, 0.0] for x, y in points])))


def rectangle(name, width, height, x=0.0, y=0.0):
    return polygon(name, [(x, y), (x + width, y), (x + width, y + height), (x, y + height)])


def ring(name, radius, hole):
    window = Contour(reverse(circle(0.0, 0.0, hole), closed=True))
    return Part(name, Contour(circle(0.0, 0.0, radius)), (window,))


def disc(name, radius):
    return Part(name, Contour(circle(0.0, 0.0, radius)))


def hook(name, a=60.0, b=40.0, t=10.0):
    """An L, which no turn makes its own mirror image."""
    return polygon(name, [(0, 0), (a, 0), (a, t), (t, t), (t, b), (0, b)])


def item(part, quantity=1, **more):
    return Item(part, more.pop("material", "steel"), more.pop("thickness_mm", 3.0), quantity, **more)


def sheet(length=300.0, width=200.0, **more):
    named = {"name": "sheet", "material": "steel", "thickness_mm": 3.0} | more
    return StockSheet(named.pop("name"), named.pop("material"), named.pop("thickness_mm"), length, width, **named)


def remnant(points, holes=(), **more):
    outline = np.array(points, dtype=float)
    rings = tuple(np.array(h, dtype=float) for h in holes)
    width = float(np.ptp(outline[:, 1]))
    return sheet(None, width, outline=outline, holes=rings, **{"name": "remnant"} | more)


def ask(items, stock, spacing=0.0, margin=0.0, **more):
    return NestAsk(tuple(items), tuple(stock), spacing, margin, **more)
