"""Damaged drawings through every verb that reads one: each gets an answer, and no file is left half written.

    python -m tests.long.fuzz_verbs [SOURCE...] [--count 200] [--seed 1] [--verb lint] [--keep DIR]

SOURCE: drawings or folders of them (default: the project's own). Fails on a traceback, an exit status other than
0, 1 and 2, more than `SECONDS` for a drawing, or a file left half written. `lint`, `nest` and `prepare` get several
damaged drawings at once, beside a sound one. The last line sums up.
"""

import argparse
import os
import subprocess
import sys
import tempfile
import time
from collections.abc import Callable, Sequence
from dataclasses import dataclass, field
from pathlib import Path
from random import Random

from tests.damage import damaged, half_written

ROOT = Path(__file__).parents[2]
OURS = (ROOT / "tests" / "drawings", ROOT / "sample_parts")
SOUND = ROOT / "tests" / "drawings" / "washer.dxf"
AT_ONCE = 6
SECONDS = {"lint": 12.0, "repair": 30.0, "compare": 80.0, "nest": 15.0, "prepare": 15.0}
"""A drawing may take what the verb allows it, and a little for a busy machine."""
START_SECONDS = 30.0
LARGEST = 150_000
ABOUT = ("--process", "fibre-laser", "--material", "mild-steel", "--thickness", "3")
JOB = """name = "fuzz"
units = "mm"
process = "fibre-laser"

[[stock]]
name = "steel"
material = "mild-steel"
thickness = 3
length = 1000
width = 500
count = "any"
"""
PART = """
[[part]]
drawing = "{0}.dxf"
material = "mild-steel"
thickness = 3
quantity = 2
"""


@dataclass
class Tally:
    """What was tried, and what went wrong."""

    tried: int = 0
    slowest_s: float = 0.0
    wrong: list[str] = field(default_factory=list)


def ask(words: Sequence[str], folder: Path, tally: Tally, drawings: int) -> str:
    """Run flatprep and note what must not be; return what it printed on stderr."""
    limit = START_SECONDS + SECONDS[words[0]] * drawings
    began = time.monotonic()
    environment = {k: v for k, v in os.environ.items() if k != "FLATPREP_TRACEBACK"}
    command = [sys.executable, "-m", "flatprep", *words]
    name = f"{words[0]} in {folder}"
    try:
        run = subprocess.run(command, capture_output=True, text=True, errors="replace", timeout=limit, env=environment)
    except subprocess.TimeoutExpired:
        tally.wrong.append(f"{name}: no answer in {limit:.0f} s")
        return ""
    tally.tried += drawings
    tally.slowest_s = max(tally.slowest_s, (time.monotonic() - began) / drawings)
    said = run.stderr.strip()
    if run.returncode not in (0, 1, 2) or "Traceback" in said or "itself failed" in said:
        tally.wrong.append(f"{name}: status {run.returncode}: {said[-300:]}")
    tally.wrong += [f"{words[0]}: {line}" for line in half_written(folder / "out")]
    return said


def lint(files: Sequence[Path], folder: Path, tally: Tally) -> None:
    ask(["lint", *map(str, files), *ABOUT], folder, tally, len(files))


def repair(files: Sequence[Path], folder: Path, tally: Tally) -> None:
    (folder / "out").mkdir()
    for file in files:
        ask(["repair", str(file), "--out", str(folder / "out" / file.name)], folder, tally, 1)


def compare(files: Sequence[Path], folder: Path, tally: Tally) -> None:
    (folder / "out").mkdir()
    for file in files:
        picture = folder / "out" / f"{file.stem}.svg"
        ask(["compare", str(SOUND), str(file), "--svg", str(picture)], folder, tally, 1)


def nest(files: Sequence[Path], folder: Path, tally: Tally) -> None:
    _job("nest", files, folder, tally)


def prepare(files: Sequence[Path], folder: Path, tally: Tally) -> None:
    _job("prepare", files, folder, tally)


def _job(verb: str, files: Sequence[Path], folder: Path, tally: Tally) -> None:
    (folder / SOUND.name).write_bytes(SOUND.read_bytes())
    job = folder / "job.toml"
    job.write_text(JOB + "".join(PART.format(file.stem) for file in (*files, folder / SOUND.name)))
    ask([verb, str(job), "--out", str(folder / "out"), "--steps", "1"], folder, tally, len(files))
    if not (folder / "out" / "layout.json").exists():
        tally.wrong.append(f"{verb} in {folder}: the sound part has no layout")


VERBS: dict[str, Callable[[Sequence[Path], Path, Tally], None]] = {
    "lint": lint, "repair": repair, "compare": compare, "nest": nest, "prepare": prepare,
}  # fmt: skip


def sources(given: Sequence[Path]) -> list[Path]:
    """Drawings that are small enough to be damaged often."""
    found = {f for path in given for f in ([path] if path.is_file() else path.rglob("*.dxf"))}
    return sorted(f for f in found if f.is_file() and 0 < f.stat().st_size < LARGEST)


def main() -> None:
    cli = argparse.ArgumentParser(description=__doc__, formatter_class=argparse.RawDescriptionHelpFormatter)
    cli.add_argument("sources", nargs="*", type=Path, default=list(OURS))
    cli.add_argument("--count", type=int, default=200, help="damaged drawings a verb")
    cli.add_argument("--seed", type=int, default=1)
    cli.add_argument("--verb", choices=list(VERBS), action="append")
    cli.add_argument("--keep", type=Path, help="folder for the damaged drawings, kept where something went wrong")
    o = cli.parse_args()
    keep = o.keep or Path(tempfile.mkdtemp(prefix="fuzz-"))
    drawings, total, failures = sources(o.sources), 0, 0
    for verb in o.verb or VERBS:
        rng, tally = Random(f"{o.seed} {verb}"), Tally()
        for first in range(0, o.count, AT_ONCE):
            folder = keep / f"{verb}-{o.seed}-{first}"
            folder.mkdir(parents=True)
            files = [folder / f"m{k}.dxf" for k in range(first, min(first + AT_ONCE, o.count))]
            for file in files:
                file.write_bytes(damaged(rng.choice(drawings).read_bytes(), rng))
            VERBS[verb](files, folder, tally)
        print(*tally.wrong[:20], sep="\n" if tally.wrong else "")
        print(
            f"{verb}: {tally.tried} drawings, slowest {tally.slowest_s:.1f} s, {len(tally.wrong)} failures", flush=True
        )
        total, failures = total + tally.tried, failures + len(tally.wrong)
    print(f"{total} damaged drawings, seed {o.seed}: {failures} failures")
    sys.exit(bool(failures))


if __name__ == "__main__":
    main()
