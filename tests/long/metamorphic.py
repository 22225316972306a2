"""Real drawings written another way, many times over: the same parts, areas and findings must come out.

    python -m tests.long.metamorphic FOLDER [--variants 2000] [--seed 1] [--seconds 1200] [--verbose]

FOLDER holds `files/` and `truth.csv` with the columns `path` and `mm_per_unit`. The last line sums up.
"""

import argparse
import csv
import logging
import sys
import tempfile
import time
from collections import Counter
from pathlib import Path
from random import Random

from tests.metamorphic.same import base_of, differences, is_ambiguous
from tests.metamorphic.vary import random_variant

UNIT = {1.0: "mm", 25.4: "in", 10.0: "cm"}


def main() -> int:
    """Run the campaign; 1 when a variant came out different."""
    cli = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    cli.add_argument("folder", type=Path)
    cli.add_argument("--variants", type=int, default=2000)
    cli.add_argument("--seed", type=int, default=1)
    cli.add_argument("--seconds", type=float, default=1e9)
    cli.add_argument("--only", default="")
    cli.add_argument("--verbose", action="store_true")
    ask = cli.parse_args()
    logging.disable(logging.ERROR)
    rows = list(csv.DictReader((ask.folder / "truth.csv").read_text().splitlines()))
    drawings = [(r["path"], UNIT.get(round(float(r["mm_per_unit"] or 1), 4))) for r in rows if ask.only in r["path"]]
    drawings = [(p, u) for p, u in drawings if u is not None]
    rng, tally, wrong = Random(ask.seed), Counter(), Counter()
    end = time.monotonic() + ask.seconds
    with tempfile.TemporaryDirectory() as folder:
        for k in range(ask.variants):
            if time.monotonic() > end:
                break
            name, unit = drawings[k % len(drawings)]
            how = random_variant(rng)
            try:
                parts, findings = differences(ask.folder / name, unit, how, Path(folder))
                vague = is_ambiguous(base_of(ask.folder / name, unit).drawing)
            except Exception as err:  # a campaign goes on, and counts
                tally["not done"] += 1
                wrong[f"{name}: {type(err).__name__} {str(err)[:80]}"] += 1
                continue
            kind = "ambiguous" if vague else "plain"
            tally[kind] += 1
            tally[f"{kind}, parts"] += bool(parts)
            tally[f"{kind}, findings"] += bool(findings)
            for said in (*parts[:1], *findings[:1]):
                wrong[f"{name} ({kind}): {said}"] += 1
            if ask.verbose and (parts or findings):
                print(f"{name}: {'; '.join([*parts, *findings][:3])} -- {how}", flush=True)
    for line, count in wrong.most_common(40):
        print(f"{count:5d} x {line}")
    print(
        f"{tally['plain']} variants: parts the same in {tally['plain'] - tally['plain, parts']}, findings in "
        f"{tally['plain'] - tally['plain, findings']}; of drawings whose outlines cross or branch "
        f"{tally['ambiguous']}: parts the same in {tally['ambiguous'] - tally['ambiguous, parts']}; "
        f"not done {tally['not done']}"
    )
    return 1 if tally["plain, parts"] or tally["plain, findings"] else 0


if __name__ == "__main__":
    sys.exit(main())
