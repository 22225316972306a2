"""Faults of the machine around a run: each one clear error, and what was there stays whole."""

import hashlib
import os
import shutil
import subprocess
import sys
from contextlib import contextmanager

import pytest
from click.testing import CliRunner

from flatprep import api
from flatprep.base.files import claimed
from flatprep.cli.main import root
from tests.cli.test_jobs import JOB, leaf
from tests.damage import half_written
from tests.drawing.draw import drawn

NOBODY = 65534


@pytest.fixture
def job(tmp_path):
    drawn(tmp_path, leaf)
    path = tmp_path / "job.toml"
    path.write_text(JOB)
    return path


def flatprep(*words, **how):
    """Run it as a program, as nobody if asked, and without the switch that shows tracebacks."""
    env = {k: v for k, v in os.environ.items() if k != "FLATPREP_TRACEBACK"}
    words = [sys.executable, "-m", "flatprep", *map(str, words)]
    return subprocess.run(words, capture_output=True, text=True, env=env, check=False, **how)


def one_error(got, *words):
    assert got.returncode == 2, got.stderr
    lines = got.stderr.splitlines()
    assert len([line for line in lines if line.startswith("error: ")]) == 1, got.stderr
    assert "Traceback" not in got.stderr
    assert "itself failed" not in got.stderr
    for word in words:
        assert word in got.stderr
    assert got.stdout == ""


@contextmanager
def plain_user(folder):
    """Be nobody for a while, where the tests are run by root, who may do everything."""
    if os.geteuid() != 0:
        yield
        return
    for path in (folder, *folder.parents[:2]):
        path.chmod(0o755)
    os.seteuid(NOBODY)
    try:
        yield
    finally:
        os.seteuid(0)


def files_of(folder):
    return {path.relative_to(folder): path.read_bytes() for path in folder.rglob("*") if path.is_file()}


@pytest.mark.parametrize("command", ["nest", "prepare"])
def test_full_disk_leaves_the_older_outputs(job, command):
    resource = pytest.importorskip("resource")
    out = job.parent / "out"
    assert flatprep(command, job, "--out", out, "--steps", "1").returncode in (0, 1)
    before = files_of(out)

    def small_files():
        # a write beyond it fails as one to a full disk does; SIGXFSZ, which Python ignores, is all that differs
        resource.setrlimit(resource.RLIMIT_FSIZE, (9000, 9000))

    job.write_text(JOB.replace("quantity = 4", "quantity = 3"))
    got = flatprep(command, job, "--out", out, "--steps", "1", preexec_fn=small_files)
    one_error(got, "cannot be written")
    assert files_of(out) == before


@pytest.mark.skipif(os.name == "nt", reason="permissions of POSIX")
def test_read_only_folder(job):
    out = job.parent / "out"
    out.mkdir(mode=0o555)
    words = ["nest", str(job), "--out", str(out), "--steps", "1"]
    assert CliRunner().invoke(root, [*words[:3], str(job.parent / "warm"), *words[4:]]).exit_code == 0
    with plain_user(job.parent):
        got = CliRunner().invoke(root, words)
    assert got.exit_code == 2
    assert str(out) in got.stderr
    assert "Permission denied" in got.stderr
    assert "choose another folder" in got.stderr


@pytest.mark.parametrize("command", ["nest", "prepare"])
def test_file_in_the_way_of_the_folder(job, command):
    (job.parent / "out").write_text("mine")
    one_error(flatprep(command, job, "--out", job.parent / "out"), "out", "--out")
    assert (job.parent / "out").read_text() == "mine"


def test_folder_in_the_way_of_a_file(job):
    out = job.parent / "out"
    (out / "sheet-01.dxf").mkdir(parents=True)
    one_error(flatprep("nest", job, "--out", out, "--steps", "1"), "sheet-01.dxf")
    assert half_written(out) == []
    assert not (out / "layout.json").exists()


def test_second_run_into_one_folder(job):
    with claimed(job.parent / "out"):
        one_error(flatprep("prepare", job, "--out", job.parent / "out", "--steps", "1"), "another run")


@pytest.mark.skipif(os.name == "nt", reason="permissions of POSIX")
def test_unreadable_drawing_costs_itself(job):
    shutil.copy(job.parent / "leaf.dxf", job.parent / "other.dxf")
    assert CliRunner().invoke(root, ["lint", str(job.parent)]).exit_code == 0
    (job.parent / "leaf.dxf").chmod(0)
    with plain_user(job.parent):
        got = CliRunner().invoke(root, ["lint", str(job.parent)])
    assert got.exit_code == 1, got.stderr
    assert "leaf.dxf: Permission denied" in got.stdout
    assert "other.dxf" in got.stdout


def test_folder_named_as_a_drawing(job):
    (job.parent / "leaf.dxf").unlink()
    (job.parent / "leaf.dxf").mkdir()
    one_error(flatprep("prepare", job, "--out", job.parent / "out"), "leaf.dxf")


def test_drawing_that_vanishes_after_it_was_read_is_told_by_its_digest(job):
    """The report names the bytes that were read, not those that are there later."""
    digest = hashlib.sha256((job.parent / "leaf.dxf").read_bytes()).hexdigest()
    read = api.read_job(api.load_job(job))
    (job.parent / "leaf.dxf").unlink()
    done = api.prepare_job(read, api.Budget(steps=1))
    api.write_prepared(done, job.parent / "out")
    assert half_written(job.parent / "out") == []
    assert digest[:10] in (job.parent / "out" / "report.html").read_text()
