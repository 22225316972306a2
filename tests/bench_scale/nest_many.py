"""Time and memory until the first full, verified layout, against the number of pieces.

    python -m tests.bench_scale.nest_many [--pieces 250,500,1000,2000] [--kinds 60] [--sheets 20]
                                          [--seconds 0] [--jobs 1] [--seed 1]

Pieces of `--kinds` shapes on sheets of one size, about `--sheets` of them for the largest count. With `--seconds` the
search goes on so long, to show what it gains over the constructive layout that it begins with: the parts' share of
all sheets, of the last one up to its used length. CPU time is what counts on a busy machine.
"""

import argparse
import resource
import sys
import time
from dataclasses import replace

import numpy as np
from shapely.geometry import Polygon

from flatprep.model.layout import Layout
from flatprep.nest.problem import Budget, NestAsk
from flatprep.nest.solve import nest
from tests.nest.parts import ask, item, sheet
from tests.nest.random_jobs import random_part

SHARE = 0.72
"""Of a sheet that parts are taken to fill, to choose its size."""


def job(pieces: int, kinds: int, sheets: int, most: int, seed: int) -> NestAsk:
    """`pieces` pieces of `kinds` shapes, and as many sheets as needed; `most` pieces would fill `sheets` of them."""
    rng = np.random.default_rng(seed)
    parts = [random_part(rng, f"part{k}") for k in range(kinds)]
    area = sum(p.area_mm2 for p in parts) * most / kinds / sheets / SHARE
    width = float(np.sqrt(area / 2.0))
    counts = [pieces // kinds + (k < pieces % kinds) for k in range(kinds)]
    items = [replace(item(p), quantity=count) for p, count in zip(parts, counts, strict=True)]
    return ask(items, [sheet(2.0 * width, width, count=None)], 3.0, 5.0)


def density(layout: Layout) -> float:
    """Net area of the parts over that of the sheets, of the last one only up to its used length."""
    *full, last = layout.sheets
    area = [Polygon(s.outline).area for s in layout.sheets]
    net = sum(s.utilisation * a for s, a in zip(layout.sheets, area, strict=True))
    return net / (sum(area[: len(full)]) + last.used_length_mm * float(np.ptp(last.outline[:, 1])))


class Watch:
    """Notes when the first layout came, and stops after that once the time is over."""

    def __init__(self, seconds: float) -> None:
        self._seconds, self._began, self._cpu = seconds, time.monotonic(), time.process_time()
        self.first_s = self.first_cpu_s = 0.0
        self.first_sheets = self.better = 0
        self.first_density = 0.0

    def note(self, layout: Layout) -> None:
        if not self.first_sheets:
            self.first_s, self.first_cpu_s = time.monotonic() - self._began, time.process_time() - self._cpu
            self.first_sheets, self.first_density = len(layout.sheets), density(layout)
        else:
            self.better += 1

    def stop(self) -> bool:
        return bool(self.first_sheets) and time.monotonic() - self._began >= self._seconds


def main() -> None:
    cli = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    cli.add_argument("--pieces", default="250,500,1000,2000")
    cli.add_argument("--kinds", type=int, default=60)
    cli.add_argument("--sheets", type=int, default=20)
    cli.add_argument("--seed", type=int, default=1)
    cli.add_argument("--seconds", type=float, default=0.0)
    cli.add_argument("--jobs", type=int, default=1)
    o = cli.parse_args()
    counts = [int(word) for word in o.pieces.split(",")]
    # kernels are compiled or loaded before anything is timed
    nest(job(2 * o.kinds, o.kinds, o.sheets, max(counts), o.seed + 1), Budget(steps=1))
    for pieces in counts:
        wanted = job(pieces, o.kinds, o.sheets, max(counts), o.seed)
        watch = Watch(o.seconds)
        budget = Budget(seconds=o.seconds or 600.0, seed=o.seed, jobs=o.jobs)
        layout = nest(wanted, budget, on_better=watch.note, stop=watch.stop)
        placed = sum(len(s.placements) for s in layout.sheets)
        memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
        each = 1000 * watch.first_cpu_s / pieces
        print(
            f"{pieces} pieces, {o.kinds} kinds: first layout {watch.first_s:.1f} s ({watch.first_cpu_s:.1f} s CPU, "
            f"{each:.2f} ms a piece) on {watch.first_sheets} sheets, {watch.first_density:.1%} full; "
            f"at the end {len(layout.sheets)} sheets, {density(layout):.1%} full, {watch.better} times better, "
            f"{placed} placed, peak {memory:.0f} MB",
            flush=True,
        )
        if placed != pieces:
            sys.exit(1)


if __name__ == "__main__":
    main()
