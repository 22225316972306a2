"""Interrupt `nest` and `prepare` at random moments; outputs must stay whole and layouts sound.

    python -m tests.long.interrupt_runs [--kills 200] [--stops 100] [--seed 1] [--patience 2]

SIGKILL: every file in the folder is whole afterwards (JSON parses, DXF ends with EOF, SVG and HTML close), and no
worker outlives the run by more than a second. SIGINT and SIGTERM: the run ends within `--patience` seconds with status
130 or 143, or with its usual one when it was done by then; nothing is half written; a layout that is there passes the
verifier. Every run uses one or two processes; the moments are spread over the time of a run that is left alone. The
last line sums up, with the load of the machine (processes that want a processor, mean of the last minute) and the most
processor time that a run took after it was asked to end, which does not depend on that load (on Linux; else 0).
"""

import argparse
import os
import random
import signal
import subprocess
import sys
import tempfile
import time
from contextlib import suppress
from dataclasses import dataclass, field
from pathlib import Path

from flatprep import api
from flatprep.api.nest import nest_ask
from flatprep.nest.problem import NestAsk
from flatprep.nest.verify import verify
from flatprep.nest.warm import SEARCH, compiling
from tests.damage import half_written

SAMPLE = Path(__file__).parents[2] / "sample_parts" / "job.toml"
SECONDS = 5


@dataclass
class Outcome:
    """What was tried, and what went wrong."""

    kills: int = 0
    stops: int = 0
    layouts: int = 0
    slowest_s: float = 0.0
    most_cpu_s: float = 0.0
    half: list[str] = field(default_factory=list)
    late: list[str] = field(default_factory=list)
    unsound: list[str] = field(default_factory=list)
    odd: list[str] = field(default_factory=list)


class Run:
    """A run that is interrupted; its workers hold its stderr, so reading that ends when the last of them does."""

    def __init__(self, folder: Path, rng: random.Random, latest_s: float) -> None:
        command, jobs = rng.choice(["nest", "prepare"]), rng.choice(["1", "2"])
        words = [command, str(SAMPLE), "--out", str(folder), "--seconds", str(SECONDS), "--jobs", jobs]
        self.name = f"{command} --jobs {jobs}"
        self.process = subprocess.Popen(
            [sys.executable, "-m", "flatprep", *words, "--seed", str(rng.randrange(1000))],
            stdout=subprocess.DEVNULL,
            stderr=subprocess.PIPE,
            text=True,
        )
        time.sleep(rng.uniform(0.1, latest_s))

    def end(self, number: signal.Signals, outcome: Outcome, patience_s: float) -> str:
        """Send a signal, wait for the end of the run and of its workers."""
        waited, asked, spent = waited_cpu_s(), time.monotonic(), cpu_s(self.process.pid)
        self.process.send_signal(number)
        _, err = self.process.communicate(timeout=120)
        took = time.monotonic() - asked
        outcome.slowest_s = max(outcome.slowest_s, took)
        if spent is not None and number is not signal.SIGKILL:  # which workers outlive: who waits for them is unknown
            outcome.most_cpu_s = max(outcome.most_cpu_s, waited_cpu_s() - waited - spent)
        if took > patience_s:
            outcome.late.append(f"{self.name} {number.name}: {took:.1f} s")
        return err


def waited_cpu_s() -> float:
    """Processor time of all processes that this one has waited for, and of those that they have waited for."""
    used = os.times()
    return used.children_user + used.children_system


def cpu_s(pid: int) -> float | None:
    """Processor time of a process so far, its children's included; None where the system does not tell."""
    found: dict[int, tuple[int, float]] = {}
    for stat in Path("/proc").glob("[0-9]*/stat"):
        with suppress(OSError):  # ended meanwhile
            fields = stat.read_text().rpartition(")")[2].split()
            found[int(stat.parent.name)] = int(fields[1]), sum(map(int, fields[11:15])) / os.sysconf("SC_CLK_TCK")
    if pid not in found:
        return None
    return found[pid][1] + sum(used for parent, used in found.values() if parent == pid)


def time_alone(folder: Path) -> float:
    """Seconds of a run that is left alone, everything compiled."""
    with compiling() as compiler:
        compiler.wait(SEARCH)
    words = ["prepare", str(SAMPLE), "--out", str(folder), "--seconds", str(SECONDS)]
    began = time.monotonic()
    subprocess.run([sys.executable, "-m", "flatprep", *words], stdout=subprocess.DEVNULL, check=False)
    return time.monotonic() - began


def kill_once(outcome: Outcome, folder: Path, rng: random.Random, latest_s: float) -> None:
    Run(folder, rng, latest_s).end(signal.SIGKILL, outcome, 1.0)
    outcome.kills += 1
    # a hidden piece may be left of the file that was being written; the next run clears it away
    outcome.half += [line for line in half_written(folder) if "left over" not in line]


def stop_once(
    outcome: Outcome, folder: Path, rng: random.Random, latest_s: float, ask: NestAsk, patience_s: float
) -> None:
    number = rng.choice([signal.SIGINT, signal.SIGTERM])
    run = Run(folder, rng, latest_s)
    err = run.end(number, outcome, patience_s)
    status = run.process.returncode
    outcome.stops += 1
    if status not in (0, 1, 128 + number, -number) or "Traceback" in err or "itself failed" in err:
        outcome.odd.append(f"{run.name} {number.name}: status {status}: {err[-300:]}")
    outcome.half += half_written(folder)
    if (folder / "layout.json").exists():
        outcome.layouts += 1
        faults = verify(api.stored_layout(folder / "layout.json"), ask)
        outcome.unsound += [f.message for f in faults]


def main() -> None:
    cli = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    cli.add_argument("--kills", type=int, default=200)
    cli.add_argument("--stops", type=int, default=100)
    cli.add_argument("--seed", type=int, default=1)
    cli.add_argument("--patience", type=float, default=2.0, help="s that an end may take")
    o = cli.parse_args()
    rng, outcome = random.Random(o.seed), Outcome()
    ask = nest_ask(api.read_job(api.load_job(SAMPLE)))
    with tempfile.TemporaryDirectory() as root:
        latest_s = time_alone(Path(root) / "alone")
        for k in range(o.kills):
            kill_once(outcome, Path(root) / f"kill{k % 4}", rng, latest_s)
        for k in range(o.stops):
            stop_once(outcome, Path(root) / f"stop{k}", rng, latest_s, ask, o.patience)
    for name in ("half", "late", "unsound", "odd"):
        for line in getattr(outcome, name)[:10]:
            print(f"{name}: {line}")
    print(
        f"{outcome.kills} kills, {outcome.stops} stops, slowest end {outcome.slowest_s:.1f} s, most processor time "
        f"after a stop {outcome.most_cpu_s:.1f} s, "
        f"{outcome.layouts} layouts verified: {len(outcome.half)} half-written files, {len(outcome.late)} late, "
        f"{len(outcome.unsound)} faults in layouts, {len(outcome.odd)} odd ends; load {os.getloadavg()[0]:.1f}"
    )
    sys.exit(bool(outcome.half or outcome.late or outcome.unsound or outcome.odd))


if __name__ == "__main__":
    main()
