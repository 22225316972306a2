"""Widths against maximal balls: random plates, then every part of the shared corpus that is not too long.

    FLATPREP_DATA=... python -m tests.long.widths_by_balls [--plates 200]

Prints a line for each disagreement above 0.02 mm and ends with status 1 when there is one.
"""

import argparse
import csv
import os
import sys
from pathlib import Path

import numpy as np

from flatprep.base.errors import FlatprepError
from flatprep.base.units import MM_PER_UNIT
from flatprep.drawing.read import ReadOptions, read
from flatprep.measure.holes import HoleShape
from flatprep.measure.part import MeasuredPart
from tests.measure.balls import disagreements
from tests.measure.random_parts import random_part

LONGEST_MM = 12_000
"""Longer contours are left out: their samples would take hours."""
UNITS = {mm: unit for unit, mm in MM_PER_UNIT.items()}
SIDES = ((1, 3.0), (-1, 1.5))


def compare(part, say):
    """Compare webs and slots of a part with balls."""
    measured = MeasuredPart(part)
    step = max(0.05, part.cut_length_mm / 40_000)
    for side, most in SIDES:
        found = measured.webs(most) if side > 0 else measured.slots(most)
        kept = [k for k, s in enumerate(measured.shapes) if side > 0 or k == 0 or s.shape is HoleShape.OTHER]
        number = {k: n for n, k in enumerate(kept)}
        for width in found:
            object.__setattr__(width, "contours", tuple(number[c] for c in width.contours))
        contours = [measured.shapes[k].exact for k in kept]
        for line in disagreements(found, contours, side=side, most_mm=most, step_mm=step):
            say(f"{part.name}, {'webs' if side > 0 else 'slots'}: {line}")


def corpus():
    """Drawings of the shared corpus in the units that a person reads in them."""
    folder = os.environ.get("FLATPREP_DATA")
    if not folder:
        return
    with Path(folder, "corpus", "truth.csv").open() as table:
        for row in csv.DictReader(table):
            unit = UNITS.get(round(float(row["mm_per_unit"] or 1), 4))
            try:
                yield read(Path(folder, "corpus", row["path"]), ReadOptions(unit))
            except FlatprepError:
                continue


def main():
    cli = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    cli.add_argument("--plates", type=int, default=200)
    o = cli.parse_args()
    said = []
    for seed in range(o.plates):
        compare(random_part(np.random.default_rng(seed)), lambda line, seed=seed: said.append(f"plate {seed}: {line}"))
    for drawing in corpus():
        if any(fault.kind == "self-crossing" for fault in drawing.faults):
            continue  # which side is material is anyone's guess
        for part in drawing.parts:
            if part.cut_length_mm <= LONGEST_MM:
                compare(part, said.append)
    sys.stdout.write("\n".join([*said, f"{len(said)} disagreements", ""]))
    sys.exit(1 if said else 0)


if __name__ == "__main__":
    main()
