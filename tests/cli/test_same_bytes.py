"""The same input, seed, steps and number of processes give the same bytes, whatever the hash seed and the clock."""

import os
import subprocess
import sys
from pathlib import Path

import pytest

from tests.cli.test_jobs import JOB, leaf
from tests.drawing.draw import box, drawn

DRAWINGS = Path(__file__).parents[1] / "drawings"


@pytest.fixture
def job(tmp_path):
    drawn(tmp_path, leaf)
    drawn(tmp_path, lambda msp: (box(msp, 0, 0, 30, 20), msp.add_text("4x M5", height=2)), name="clip.dxf")
    path = tmp_path / "job.toml"
    second = '[[part]]\ndrawing = "clip.dxf"\nmaterial = "mild-steel"\nthickness = 3\nquantity = 9\n'
    path.write_text(JOB + second)
    return path


def run(hash_seed, *words):
    env = os.environ | {"PYTHONHASHSEED": str(hash_seed)}
    words = [sys.executable, "-m", "flatprep", *map(str, words)]
    return subprocess.run(words, env=env, capture_output=True, check=False)


def tree(folder):
    return {str(path.relative_to(folder)): path.read_bytes() for path in sorted(folder.rglob("*")) if path.is_file()}


@pytest.mark.parametrize("jobs", [1, 2])
def test_prepare(job, tmp_path, jobs):
    trees = []
    for hash_seed in (1, 4):
        out = tmp_path / "out"
        got = run(hash_seed, "prepare", job, "--out", out, "--steps", "30", "--seed", "5", "--jobs", jobs)
        assert got.returncode in (0, 1), got.stderr
        trees.append((got.stdout, tree(out)))
        out.rename(tmp_path / f"out{hash_seed}")
    assert len(trees[0][1]) > 10
    assert trees[0] == trees[1]


def test_lint_with_one_process_and_with_two():
    words = ("lint", DRAWINGS, "--process", "fibre-laser", "--material", "mild-steel", "--thickness", "3")
    one, two = (run(jobs, *words, "--format", "json", "--jobs", jobs) for jobs in (1, 2))
    assert one.returncode == two.returncode == 1
    assert one.stdout == two.stdout
    assert len(one.stdout) > 1000
