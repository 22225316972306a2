"""Random jobs for the nest: several sheets, remnants, windows, grain, pairs, any spacing."""

import numpy as np

from flatprep.geom.bulge import circle, reverse
from flatprep.model.drawing import Contour, Part
from tests.nest.parts import ask, hook, item, polygon, rectangle, remnant, ring, sheet


def random_part(rng, name):
    kind = rng.integers(6)
    a, b = (float(v) for v in rng.uniform(8, 90, 2))
    x, y = (float(v) for v in rng.uniform(-500, 500, 2))
    if kind == 0:
        return rectangle(name, a, b, x, y)
    if kind == 1:
        return ring(name, a / 2 + 10, (a / 2 + 10) * float(rng.uniform(0.3, 0.95)))
    if kind == 2:
        return hook(name, a + 10, b + 10, min(a, b) / 2)
    if kind == 3:  # a slotted end out, a bay in
        ends = np.array([[x, y, 0.0], [x + a, y, 1.0], [x + a, y + b / 2, 0.0], [x, y + b / 2, -0.6]])
        return Part(name, Contour(ends))
    if kind == 4:
        corners = int(rng.integers(3, 12))
        angle = (np.arange(corners) + rng.uniform(0.05, 0.95, corners)) * 2 * np.pi / corners
        reach = rng.uniform(6, 50, corners)
        return polygon(name, np.column_stack([x + reach * np.cos(angle), y + reach * np.sin(angle)]).tolist())
    plate = rectangle(name, a + 30, b + 30)
    window = Contour(reverse(circle((a + 30) / 2, (b + 30) / 2, min(a, b) / 2 + 5), closed=True))
    return Part(name, plate.outer, (window,))


def random_item(rng, name):
    turns = [None, (0.0,), (0.0, 180.0), (0.0, 90.0, 180.0, 270.0), tuple(float(t) for t in range(0, 360, 15))]
    grain = rng.choice(["x", "y"]) if rng.random() < 0.25 else None
    return item(
        random_part(rng, name),
        int(rng.integers(0, 6)),
        quantity_opposite=int(rng.integers(1, 4)) if rng.random() < 0.3 else 0,
        turns_deg=turns[int(rng.integers(len(turns)))],
        may_flip=bool(rng.random() < 0.2),
        grain=None if grain is None else str(grain),
        thickness_mm=float(rng.choice([3.0, 3.0, 5.0])),
    )


def random_remnant(rng, name):
    a, b = (float(v) for v in rng.uniform(120, 300, 2))
    notch = [(0, 0), (a, 0), (a, b), (0.7 * a, b), (0.6 * a, 0.4 * b), (0.5 * a, b), (0, 0.8 * b)]
    x, y = 0.1 * a, 0.1 * b
    holes = [[(x, y), (x + 15, y), (x + 15, y + 12), (x, y + 12)]] if rng.random() < 0.5 else []
    moved = np.array(notch) + rng.uniform(-50, 50, 2)
    shift = moved[0]
    return remnant(moved, [np.array(h) + shift for h in holes], name=name, thickness_mm=3.0)


def random_stock(rng, number):
    name, grain = f"stock{number}", [None, "length", "width"][int(rng.integers(3))]
    kind = rng.random()
    if kind < 0.25:
        return random_remnant(rng, name)
    more = {"name": name, "grain": grain, "thickness_mm": float(rng.choice([3.0, 3.0, 5.0]))}
    if kind < 0.4:
        return sheet(None, float(rng.uniform(100, 250)), **more)
    count = None if rng.random() < 0.3 else int(rng.integers(1, 3))
    price = float(rng.uniform(5, 50)) if rng.random() < 0.5 else None
    length, width = (float(v) for v in rng.uniform(90, 350, 2))
    return sheet(length, width, count=count, price=price, **more)


def random_ask(seed):
    rng = np.random.default_rng(seed)
    items = [random_item(rng, f"part{k}") for k in range(int(rng.integers(1, 7)))]
    stock = [random_stock(rng, k) for k in range(int(rng.integers(1, 5)))]
    spacing = float(rng.choice([0.0, 0.2, 1.0, 3.0, 10.0])) if rng.random() < 0.7 else float(rng.uniform(0, 10))
    return ask(items, stock, spacing, float(rng.choice([0.0, 2.0, 8.0])), windows=bool(rng.random() < 0.7))
