"""What a command says, and when."""

import os
import signal
import subprocess
import sys
import threading
import time

import pytest
from click.testing import CliRunner

from flatprep.cli.main import root
from flatprep.cli.watch import inputs, stamps, wait_for_change
from flatprep.job.context import JobOptions
from tests.cli.test_jobs import JOB, leaf
from tests.drawing.draw import box, drawn


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
    assert "leaf.dxf: 1 part, mm (header)" in verbose.stderr
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
    waiter = threading.Thread(target=wait_for_change, args=(stamps([file]),), kwargs={"every_s": 0.02})
    waiter.start()
    time.sleep(0.1)
    assert waiter.is_alive()
    file.write_text("another")
    waiter.join(timeout=10)
    assert not waiter.is_alive()


def test_what_changed_before_the_wait_ends_it_at_once(tmp_path):
    file = tmp_path / "leaf.dxf"
    file.write_text("one")
    before = stamps([file])
    file.write_text("another")
    began = time.monotonic()
    wait_for_change(before, every_s=0.02)
    assert time.monotonic() - began < 2.0


def test_prepare_runs_again_when_a_drawing_changes_and_ends_when_asked(job, tmp_path):
    """Without stock there is nothing to nest, and a run is short; a mistake in the job is told and waited out."""
    text = JOB[: JOB.index("[[stock]]")] + JOB[JOB.index("[[part]]") :]
    job.write_text(text)
    table = tmp_path / "out" / "parts.csv"
    words = [sys.executable, "-m", "flatprep", "prepare", str(job), "--out", str(tmp_path / "out"), "--watch"]
    with subprocess.Popen(words, stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True) as process:
        said = iter(process.stderr.readline, "")
        assert "waiting for a change" in next(said)
        assert ",80.0,50.0," in table.read_text()
        drawn(tmp_path, lambda msp: box(msp, 0, 0, 70, 40))
        assert "waiting for a change" in next(said)
        assert ",70.0,40.0," in table.read_text()
        job.write_text("mistake")
        assert "error" in next(said)
        assert "waiting" in next(line for line in said if "try" not in line)
        job.write_text(text)
        assert "waiting" in next(said)
        process.send_signal(signal.SIGINT)
        process.communicate(timeout=60)
    assert process.returncode == 130
