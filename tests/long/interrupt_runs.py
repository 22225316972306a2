"""Interrupt `nest` and `prepare` at random moments; outputs must stay whole and layouts sound.

    interrupt_runs.py [--kills 200] [--stops 100] [--seed 1]

SIGKILL: every file in the folder that was there before is still whole (JSON parses, DXF ends with EOF, SVG and HTML
close), and no file is half written. SIGINT and SIGTERM: the run ends within 2 s with status 130 or 143, or with its
usual one when it was done by then; a layout that was written passes the verifier. The last line sums up.
"""

import argparse
import json
import random
import signal
import subprocess
import sys
import tempfile
import time
from dataclasses import dataclass, field
from pathlib import Path

from flatprep import api
from flatprep.api.nest import nest_ask
from flatprep.nest.verify import verify

SAMPLE = Path(__file__).parents[2] / "sample_parts" / "job.toml"
ENDS = {".json": ("}",), ".dxf": ("EOF",), ".svg": ("</svg>",), ".html": ("</html>",)}


@dataclass
class Outcome:
    kills: int = 0
    stops: int = 0
    half: list[str] = field(default_factory=list)
    late: list[str] = field(default_factory=list)
    unsound: list[str] = field(default_factory=list)
    odd: list[str] = field(default_factory=list)


def half_written(folder: Path) -> list[str]:
    """Files that do not end as their kind must."""
    bad = []
    for path in folder.rglob("*"):
        if path.suffix not in ENDS or path.name.startswith("."):
            continue
        text = path.read_text().rstrip()
        whole = text.endswith(ENDS[path.suffix])
        if path.suffix == ".json" and whole:
            try:
                json.loads(text)
            except ValueError:
                whole = False
        if not whole:
            bad.append(str(path))
    return bad


def start(command: str, folder: Path, seed: int) -> subprocess.Popen[str]:
    words = [sys.executable, "-m", "flatprep", command, str(SAMPLE), "--out", str(folder), "--seconds", "6"]
    return subprocess.Popen([*words, "--seed", str(seed)], stdout=subprocess.DEVNULL, stderr=subprocess.PIPE, text=True)


def kill_once(outcome: Outcome, command: str, folder: Path, rng: random.Random) -> None:
    run = start(command, folder, rng.randrange(1000))
    time.sleep(rng.uniform(0.2, 9.0))
    run.kill()
    run.communicate()
    outcome.kills += 1
    outcome.half += half_written(folder)


def stop_once(outcome: Outcome, command: str, folder: Path, rng: random.Random, ask: object) -> None:
    number = rng.choice([signal.SIGINT, signal.SIGTERM])
    run = start(command, folder, rng.randrange(1000))
    time.sleep(rng.uniform(0.2, 9.0))
    asked = time.monotonic()
    run.send_signal(number)
    _, err = run.communicate(timeout=60)
    took = time.monotonic() - asked
    outcome.stops += 1
    if took > 2.0:
        outcome.late.append(f"{command} {number.name}: {took:.1f} s")
    if run.returncode not in (0, 1, 128 + number, -number) or "Traceback" in err:
        outcome.odd.append(f"{command} {number.name}: status {run.returncode}: {err[-200:]}")
    outcome.half += half_written(folder)
    if (folder / "layout.json").exists():
        faults = verify(api.stored_layout(folder / "layout.json"), ask)
        outcome.unsound += [f.message for f in faults]


def main() -> None:
    cli = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    cli.add_argument("--kills", type=int, default=200)
    cli.add_argument("--stops", type=int, default=100)
    cli.add_argument("--seed", type=int, default=1)
    o = cli.parse_args()
    rng, outcome = random.Random(o.seed), Outcome()
    ask = nest_ask(api.read_job(api.load_job(SAMPLE)))
    with tempfile.TemporaryDirectory() as root:
        for k in range(o.kills):
            kill_once(outcome, rng.choice(["nest", "prepare"]), Path(root) / f"kill{k % 4}", rng)
        for k in range(o.stops):
            stop_once(outcome, rng.choice(["nest", "prepare"]), Path(root) / f"stop{k}", rng, ask)
    for name in ("half", "late", "unsound", "odd"):
        for line in getattr(outcome, name)[:10]:
            print(f"{name}: {line}")
    print(
        f"{outcome.kills} kills, {outcome.stops} stops: {len(outcome.half)} half-written files, {len(outcome.late)} late, "
        f"{len(outcome.unsound)} faults in layouts, {len(outcome.odd)} odd ends"
    )
    sys.exit(bool(outcome.half or outcome.late or outcome.unsound or outcome.odd))


if __name__ == "__main__":
    main()
