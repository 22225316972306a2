"""What each idea of the search is worth: the same search without it.

Run by hand, where FLATPREP_DATA names the folder that holds ``instances``::

    python -m tests.bench_nest.bench_ideas fu dagli --seconds 30 --seed 1

Every search runs in a process of its own, compiled anew, for what is left out is compiled into it. Prints a line each:
final density (%), time (s) to 95 % of the density that the whole search reaches, million positions tried a second.
"""

import argparse
import os
import subprocess
import sys
import tempfile
from collections.abc import Callable
from pathlib import Path

import numpy as np

from flatprep.geom.bulge import Floats
from flatprep.nest import engine, line, moves, prospects, rearrange, shelf, squeeze
from flatprep.nest._jit import bare
from flatprep.nest.board import Ground
from flatprep.nest.clock import Clock
from flatprep.nest.engine import Engine
from flatprep.nest.outlines import Outlines
from flatprep.nest.snap import Contacts
from flatprep.nest.tables import Tables, no_tables
from tests.bench_nest.bench_strip import load, run

WHOLE = "nothing"


def no_grids(outlines: Outlines, _packed: int) -> Tables:
    """Send every question to the exact geometry."""
    return no_tables(outlines)


@bare
def no_snap(_ground: Ground, _i: int, _kept: Floats, _row: int, _contacts: Contacts, _rng: np.random.Generator) -> int:
    """Leave the place as it is."""
    return 0


def no_rearranging(_engine: Engine) -> None:
    """Leave the pieces where they are."""


def without_tables() -> None:
    engine.prepare_tables = no_grids


def without_contacts() -> None:
    moves.snap = no_snap


def without_corners() -> None:
    moves.CORNER_SAMPLES = 0


def without_rearranging() -> None:
    squeeze.rearrange = no_rearranging


def without_neighbourhoods() -> None:
    rearrange.NEAR_SHARE = 0.0


def without_judgement() -> None:
    prospects.FEWEST_KEPT = shelf.MOST_KEPT + 1


def without_going_back() -> None:
    line.STUCK_POSITIONS = sys.maxsize


LEAVE_OUT: dict[str, Callable[[], None]] = {
    WHOLE: lambda: None,
    "tables": without_tables,
    "contacts": without_contacts,
    "corners": without_corners,
    "neighbourhoods": without_neighbourhoods,
    "judgement": without_judgement,
    "going back": without_going_back,
    "rearranging": without_rearranging,
}


def search_once(name: str, seconds: float, seed: int, whole: float | None) -> None:
    """Search in this process and print the line but for its head."""
    instance = load(Path(os.environ["FLATPREP_DATA"]) / "instances", name)
    run(instance, Clock(steps=1), seed, 1)  # compiles
    clock = Clock(seconds)
    curve = run(instance, clock, seed, 1)
    final = curve[-1][1]
    mark = 0.95 * (whole or final)
    early = next((f"{at:.1f} s" for at, density in curve if density >= mark), "never")
    rate = clock.evaluations / clock.elapsed_s / 1e6
    sys.stdout.write(f"{final:.2f} %, 95 % in {early}, {rate:.2f} million positions a second\n")


def main() -> None:
    cli = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    cli.add_argument("names", nargs="+")
    cli.add_argument("--seconds", type=float, default=30.0)
    cli.add_argument("--seed", type=int, default=1)
    cli.add_argument("--without", choices=LEAVE_OUT, help="search in this process")
    cli.add_argument("--whole", type=float, help="density that the whole search reaches, %%")
    ask = cli.parse_args()
    if ask.without:
        LEAVE_OUT[ask.without]()
        search_once(ask.names[0], ask.seconds, ask.seed, ask.whole)
        return
    for name in ask.names:
        whole: list[str] = []
        for idea in LEAVE_OUT:
            words = [name, "--seconds", str(ask.seconds), "--seed", str(ask.seed), "--without", idea, *whole]
            with tempfile.TemporaryDirectory() as cache:
                told = subprocess.run(
                    [sys.executable, "-m", "tests.bench_nest.bench_ideas", *words],
                    env={**os.environ, "NUMBA_CACHE_DIR": cache}, capture_output=True, text=True, check=True,
                ).stdout  # fmt: skip
            sys.stdout.write(f"{name}, without {idea}: {told}")
            sys.stdout.flush()
            whole = whole or ["--whole", told.split()[0]]


if __name__ == "__main__":
    main()
