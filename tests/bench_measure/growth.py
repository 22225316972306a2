"""Growth of lint's measuring with the number of edges: near n log n.

    python -m tests.bench_measure.growth

Plates of holes near each other (every pair leaves a web to measure), at about 100, 1,000 and 10,000 edges, and a
plate of 5,000 holes that leave none.
"""

import sys
import time
from math import log

from flatprep.measure.part import MeasuredPart
from flatprep.rules import run
from flatprep.rules.base import Context
from tests.measure.shapes import circle, drawing, part, rectangle
from tests.rules.setting import laser


def row_of_holes(count):
    """A strip with holes of 17.8 mm every 20 mm: webs of 2.2 mm between them and 1.1 mm to both ends."""
    return part(rectangle(0, 0, 20 * count, 40), *(circle(10 + 20 * k, 20, 8.9) for k in range(count)))


def field_of_holes():
    """5,000 holes of 8 mm, 11 mm apart."""
    holes = (circle(10 + 19.8 * i, 10 + 19.6 * j, 4) for i in range(100) for j in range(50))
    return part(rectangle(0, 0, 2000, 1000), *holes)


def seconds(make):
    """Best of three, a fresh part each time."""
    best = float("inf")
    for _ in range(3):
        sheet = Context(drawing(make), laser(), None, 3.0)
        start = time.perf_counter()
        run(sheet)
        best = min(best, time.perf_counter() - start)
    return best


def main():
    lines, first = [], None
    for edges in (100, 1_000, 10_000):
        plate = row_of_holes(edges // 2)
        assert len(MeasuredPart(plate).webs(3.0)) == edges // 2 + 1  # the two ends too
        spent = seconds(plate)
        each = spent / (edges * log(edges))
        first = first or each
        lines.append(f"{edges:6d} edges: {spent:.3f} s, {each / first:.2f} of the first per n log n")
    lines.append(f"5,000 holes without a web: {seconds(field_of_holes()):.2f} s")
    sys.stdout.write("\n".join([*lines, ""]))


if __name__ == "__main__":
    main()
