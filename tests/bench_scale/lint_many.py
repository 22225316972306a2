"""Lint of many drawings with one and with two processes: time, ratio, memory.

    python -m tests.bench_scale.lint_many [--drawings 1000] [--jobs 1,2] [--kinds 50] [--seed 1]

The drawings are random parts written as DXF, `--kinds` of them over and over. The last line is the ratio.
"""

import argparse
import resource
import subprocess
import sys
import tempfile
import time
from pathlib import Path

import numpy as np

from flatprep.drawing.write import part_drawing
from tests.nest.random_jobs import random_part

ABOUT = ("--process", "fibre-laser", "--material", "mild-steel", "--thickness", "3", "--format", "json")


def main() -> None:
    cli = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    cli.add_argument("--drawings", type=int, default=1000)
    cli.add_argument("--jobs", default="1,2")
    cli.add_argument("--kinds", type=int, default=50)
    cli.add_argument("--seed", type=int, default=1)
    o = cli.parse_args()
    rng = np.random.default_rng(o.seed)
    texts = [part_drawing(random_part(rng, f"part{k}")) for k in range(o.kinds)]
    took: dict[str, float] = {}
    said: set[bytes] = set()
    with tempfile.TemporaryDirectory() as folder:
        for k in range(o.drawings):
            Path(folder, f"part{k:05d}.dxf").write_text(texts[k % o.kinds])
        for jobs in o.jobs.split(","):
            began = time.monotonic()
            words = [sys.executable, "-m", "flatprep", "lint", folder, *ABOUT, "--jobs", jobs]
            run = subprocess.run(words, capture_output=True, check=False)
            took[jobs] = time.monotonic() - began
            said.add(run.stdout)
            peak = resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss / 1024
            print(
                f"--jobs {jobs}: {o.drawings} drawings in {took[jobs]:.1f} s, {1000 * took[jobs] / o.drawings:.1f} ms "
                f"a drawing, largest process {peak:.0f} MB, status {run.returncode}",
                flush=True,
            )
    times = list(took.values())
    alike = "the same answer" if len(said) == 1 else f"{len(said)} different answers"
    print(f"{times[0] / times[-1]:.2f} times as fast with --jobs {o.jobs.split(',')[-1]}, {alike}")
    sys.exit(len(said) != 1)


if __name__ == "__main__":
    main()
