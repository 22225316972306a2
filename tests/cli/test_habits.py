"""What a command says, and when."""

import os
import subprocess
import sys
import threading
import time

import pytest
from click.testing import CliRunner

from flatprep.cli.main import root
from flatprep.cli.watch import inputs, wait_for_change
from flatprep.job.context import JobOptions
from tests.cli.test_jobs import JOB, leaf
from tests.drawing.draw import drawn


@pytest.fixture
def job(tmp_path):
    drawn(tmp_path, leaf)
    path = tmp_path / "job.toml"
    path.write_text(JOB.replace("spacing = 3.0", "spacing = 0.0"))
    return path


def run(*words):
    return CliRunner().invoke(root, [str(w) for w in words])


def test_quiet_says_no_warning_and_verbose_says_what_is_read(job, tmp_path):
    usual, quiet, verbose = (
        run("nest", job, "--out", tmp_path / "out", "--steps", "5", *word) for word in ([], ["--quiet"], ["--verbose"])
    )
    assert "less than the kerf" in usual.stderr
    assert quiet.stderr == ""
    assert "leaf.dxf: 1 parts, mm (header)" in verbose.stderr
    assert usual.stdout == quiet.stdout == verbose.stdout


def test_quiet_still_says_errors(tmp_path):
    got = run("nest", tmp_path / "none.toml", "--out", tmp_path / "out", "-q")
    assert got.exit_code == 2
    assert "none.toml" in got.stderr


def test_nothing_but_the_document_on_stdout(job, tmp_path):
    got = run("nest", job, "--out", tmp_path / "out", "--steps", "5", "--format", "json")
    assert got.stdout.startswith("{")
    assert got.stdout.rstrip().endswith("}")


@pytest.mark.parametrize("shell", ["bash", "zsh", "fish"])
def test_shell_completion(shell):
    env = os.environ | {"_FLATPREP_COMPLETE": f"{shell}_source"}
    got = subprocess.run([sys.executable, "-m", "flatprep"], env=env, capture_output=True, text=True, check=False)
    if "4.4" in got.stderr:
        pytest.skip("this bash is older than completion needs")
    assert "_FLATPREP_COMPLETE" in got.stdout


def test_inputs_of_a_job(job, tmp_path):
    assert inputs(job, JobOptions()) == (job, tmp_path / "leaf.dxf")
    job.write_text("mistake")
    assert inputs(job, JobOptions()) == (job,)


def test_a_change_ends_the_wait(tmp_path):
    file = tmp_path / "leaf.dxf"
    file.write_text("one")
    waiter = threading.Thread(target=wait_for_change, args=([file],), kwargs={"every_s": 0.02})
    waiter.start()
    time.sleep(0.1)
    assert waiter.is_alive()
    file.write_text("another")
    waiter.join(timeout=10)
    assert not waiter.is_alive()
