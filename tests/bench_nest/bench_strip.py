"""Density against time on the published strip instances, and how fast the search works.

Run by hand, where FLATPREP_DATA names the folder that holds ``instances``::

    python tests/bench_nest/bench_strip.py swim shirts --seconds 60 --jobs 2 --seed 1

Prints for each instance the time (s) and density (%) of the layouts that were better by 0.1 points, then the final
density beside the published ones (ESICUP data sets; published.json says whose), time to 95 % of it, positions tried a
second in this process, and the share of the time spent in kernels.
"""

import argparse
import json
import os
import sys
import time
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np

from flatprep.nest import engine
from flatprep.nest.clock import Clock
from flatprep.nest.outlines import signed_area
from flatprep.nest.search import search, strip_task
from flatprep.nest.shapes import Best, Shape

STRIP_MM = 1000.0
WORTH_A_LINE = 0.1


@dataclass(frozen=True)
class Instance:
    name: str
    shapes: tuple[Shape, ...]

    @property
    def area_mm2(self) -> float:
        return sum(s.count * abs(signed_area(s.outer)) for s in self.shapes)

    def density(self, best: Best) -> float:
        return 100.0 * self.area_mm2 / (STRIP_MM * best.length_mm)


def load(folder: Path, name: str) -> Instance:
    found = json.loads((folder / f"{name}.json").read_text())
    scale = STRIP_MM / found["strip_height"]
    return Instance(name, tuple(shape_of(piece, scale) for piece in found["pieces"]))


def shape_of(piece: dict[str, Any], scale: float) -> Shape:
    turns = None if piece["rotations_deg"] == "continuous" else tuple(map(float, piece["rotations_deg"]))
    rings = [np.array(ring, dtype=np.float64) * scale for ring in (piece["outer"], *piece.get("holes", []))]
    return Shape(rings[0], tuple(rings[1:]), turns, (False,), piece["quantity"])


class Timed:
    """A kernel that notes how long it ran."""

    def __init__(self, kernel: Any) -> None:
        self._kernel, self.seconds = kernel, 0.0

    def __call__(self, *args: Any) -> Any:
        start = time.perf_counter()
        result = self._kernel(*args)
        self.seconds += time.perf_counter() - start
        return result


def run(instance: Instance, clock: Clock, seed: int, jobs: int) -> list[tuple[float, float]]:
    """Search; return time (s) and density (%) of each better layout."""
    curve: list[tuple[float, float]] = []
    search(
        strip_task(instance.shapes, STRIP_MM, None),
        clock,
        seed,
        lambda best: curve.append((clock.elapsed_s, instance.density(best))),
        jobs,
    )
    return curve


def tell(instance: Instance, curve: Sequence[tuple[float, float]], published: dict[str, float]) -> None:
    last = -1.0
    for seconds, density in curve:
        if density >= last + WORTH_A_LINE or (seconds, density) == curve[-1]:
            sys.stdout.write(f"  {seconds:7.2f} s  {density:6.2f} %\n")
            last = density
    final = curve[-1][1]
    early = next(seconds for seconds, density in curve if density >= 0.95 * final)
    against = ", ".join(f"{key} {value:.2f}" for key, value in published.items())
    sys.stdout.write(
        f"{instance.name}: {final:.2f} % ({against or 'nothing published'}); 95 % of it in {early:.1f} s\n"
    )


def main() -> None:
    cli = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    cli.add_argument("names", nargs="+")
    cli.add_argument("--seconds", type=float, default=60.0)
    cli.add_argument("--steps", type=int)
    cli.add_argument("--seed", type=int, default=1)
    cli.add_argument("--jobs", type=int, default=1)
    ask = cli.parse_args()
    folder = Path(os.environ["FLATPREP_DATA"]) / "instances"
    published = json.loads((folder / "published.json").read_text())
    run(load(folder, ask.names[0]), Clock(steps=1), ask.seed, 1)  # compile, or fetch what was compiled
    for name in ask.names:
        instance, clock = load(folder, name), Clock(ask.seconds, ask.steps)
        timed = engine.sweeps = Timed(engine.sweeps)
        curve = run(instance, clock, ask.seed, ask.jobs)
        took = clock.elapsed_s
        tell(instance, curve, published.get(name, {}))
        rate, share = clock.evaluations / took / 1e6, timed.seconds / took
        sys.stdout.write(f"  {rate:.2f} million positions a second, {100.0 * share:.0f} % of the time in kernels\n")
        sys.stdout.flush()


if __name__ == "__main__":
    main()
